import { sql, type Kysely } from 'kysely';

/** The run record: appended, never edited away. */
export async function up(db: Kysely<any>): Promise<void> {
	await sql`create table run (
		id uuid primary key default gen_random_uuid(),
		client_id uuid not null references client,
		number text not null constraint run_number_unique unique,
		build_id uuid not null,
		cell_id uuid not null references cell,
		fuel_batch_id uuid not null references fuel_batch,
		booking_id uuid,
		limit_set_id uuid references limit_set,
		kind text not null check (kind in ('power_sweep','steady_points','point_table','motoring','endurance','free_log')),
		state text not null default 'open' check (state in ('open','closed','accepted','voided')),
		correction text not null default 'none' check (correction in ('none','sae_j1349','iso_1585','din_70020','iso_3046')),
		net boolean,
		ambient jsonb not null default '{}',
		settings jsonb not null default '{}',
		started_at timestamptz not null,
		ended_at timestamptz,
		logged_by uuid not null references person,
		reviewed_by uuid references person,
		reviewed_at timestamptz,
		review_reason text,
		version integer not null default 1,
		created_at timestamptz not null default now(),
		constraint run_key unique (client_id, id),
		constraint run_build foreign key (client_id, build_id) references build (client_id, id),
		constraint run_booking foreign key (client_id, booking_id) references booking (client_id, id),
		-- Nobody accepts a run that they logged themselves.
		constraint run_accepted_by_another check (state <> 'accepted' or reviewed_by <> logged_by)
	)`.execute(db);
	await sql`create index run_started on run (started_at desc, id)`.execute(db);
	await sql`create index run_client_started on run (client_id, started_at desc, id)`.execute(db);
	await sql`create index run_build_started on run (client_id, build_id, started_at desc)`.execute(db);

	await sql`create table log_line (
		id uuid primary key default gen_random_uuid(),
		client_id uuid not null references client,
		run_id uuid not null,
		at timestamptz not null,
		text text not null check (length(text) between 1 and 4000),
		author uuid not null references person,
		supersedes_id uuid constraint log_line_superseded_once unique,
		reason text,
		created_at timestamptz not null default now(),
		constraint log_line_key unique (client_id, id),
		constraint log_line_run foreign key (client_id, run_id) references run (client_id, id),
		constraint log_line_supersedes foreign key (client_id, supersedes_id) references log_line (client_id, id),
		constraint log_line_reason_when_superseding check (supersedes_id is null or reason is not null)
	)`.execute(db);
	await sql`create index log_line_run_at on log_line (client_id, run_id, at)`.execute(db);

	await sql`create table trace (
		id uuid primary key default gen_random_uuid(),
		client_id uuid not null references client,
		run_id uuid not null,
		filename text not null check (length(filename) between 1 and 255),
		state text not null default 'received' check (state in ('received','processing','needs_map','ready','refused')),
		is_primary boolean not null default false,
		time_offset_s float8 not null default 0,
		sha256 bytea not null check (length(sha256) = 32),
		size_bytes bigint not null check (size_bytes >= 0),
		object_key text not null,
		columnar_key text,
		row_count bigint,
		sample_rate_hz float8,
		channels jsonb,
		column_map jsonb,
		proposal jsonb,
		error text,
		uploaded_by uuid not null references person,
		created_at timestamptz not null default now(),
		processed_at timestamptz,
		constraint trace_key unique (client_id, id),
		constraint trace_run foreign key (client_id, run_id) references run (client_id, id),
		constraint trace_error_by_state check ((state in ('refused', 'needs_map')) = (error is not null))
	)`.execute(db);
	await sql`create index trace_run_id on trace (client_id, run_id, created_at)`.execute(db);
	await sql`create unique index trace_one_primary on trace (run_id) where is_primary`.execute(db);

	// One row per computation; superseded ones stay as history.
	await sql`create table reduction (
		id uuid primary key default gen_random_uuid(),
		client_id uuid not null references client,
		run_id uuid not null,
		trace_id uuid not null,
		method_version text not null,
		settings jsonb not null,
		inputs jsonb not null,
		curve jsonb not null,
		points jsonb not null,
		computed_at timestamptz not null default now(),
		superseded_at timestamptz,
		constraint reduction_key unique (client_id, id),
		constraint reduction_run foreign key (client_id, run_id) references run (client_id, id),
		constraint reduction_trace foreign key (client_id, trace_id) references trace (client_id, id)
	)`.execute(db);
	await sql`create unique index reduction_one_current on reduction (trace_id) where superseded_at is null`.execute(
		db
	);
	await sql`create index reduction_run_id on reduction (client_id, run_id)`.execute(db);

	await sql`create table metric (
		id uuid primary key default gen_random_uuid(),
		client_id uuid not null references client,
		run_id uuid not null,
		reduction_id uuid not null,
		code text not null,
		value float8 not null,
		unit text not null,
		u float8,
		at jsonb,
		method text not null,
		outside_range text,
		-- True while its reduction is the primary trace's current one: what trends and lists read.
		is_current boolean not null default true,
		constraint metric_unique unique (reduction_id, code),
		constraint metric_run foreign key (client_id, run_id) references run (client_id, id),
		constraint metric_reduction foreign key (client_id, reduction_id) references reduction (client_id, id)
	)`.execute(db);
	await sql`create index metric_current on metric (client_id, code, run_id) include (value, u, unit, outside_range) where is_current`.execute(
		db
	);
	await sql`create index metric_current_run on metric (run_id) where is_current`.execute(db);

	await sql`create table finding (
		id uuid primary key default gen_random_uuid(),
		client_id uuid not null references client,
		trace_id uuid not null,
		reduction_id uuid not null,
		code text not null,
		severity text not null check (severity in ('info','warning','error')),
		message text not null,
		spans jsonb not null,
		channel text,
		constraint finding_trace foreign key (client_id, trace_id) references trace (client_id, id),
		constraint finding_reduction foreign key (client_id, reduction_id) references reduction (client_id, id)
	)`.execute(db);
	await sql`create index finding_reduction_id on finding (client_id, reduction_id)`.execute(db);

	await sql`create table flag (
		id uuid primary key default gen_random_uuid(),
		client_id uuid not null references client,
		run_id uuid not null,
		reduction_id uuid,
		rule text not null,
		severity text not null check (severity in ('note','review','breach')),
		spans jsonb not null default '[]',
		worst jsonb,
		total_s float8,
		message text not null,
		raised_by uuid references person,
		created_at timestamptz not null default now(),
		constraint flag_run foreign key (client_id, run_id) references run (client_id, id),
		constraint flag_reduction foreign key (client_id, reduction_id) references reduction (client_id, id),
		constraint flag_by_rule_or_person check ((reduction_id is null) = (raised_by is not null))
	)`.execute(db);
	await sql`create index flag_run_id on flag (client_id, run_id)`.execute(db);

	await sql`create table attachment (
		id uuid primary key default gen_random_uuid(),
		client_id uuid not null references client,
		run_id uuid,
		build_id uuid,
		filename text not null check (length(filename) between 1 and 255),
		content_type text not null,
		sha256 bytea not null check (length(sha256) = 32),
		size_bytes bigint not null check (size_bytes >= 0),
		object_key text not null,
		added_by uuid not null references person,
		created_at timestamptz not null default now(),
		constraint attachment_run foreign key (client_id, run_id) references run (client_id, id),
		constraint attachment_build foreign key (client_id, build_id) references build (client_id, id),
		constraint attachment_of_one check (num_nonnulls(run_id, build_id) = 1)
	)`.execute(db);
	await sql`create index attachment_run_id on attachment (client_id, run_id)`.execute(db);
	await sql`create index attachment_build_id on attachment (client_id, build_id)`.execute(db);

	const fits = sql`exists (select from fuel_batch b where b.id = fuel_batch_id and (b.client_id is null or b.client_id = run.client_id))
		and (limit_set_id is null or exists (select from limit_set s where s.id = limit_set_id
			and (s.client_id is null or s.client_id = run.client_id)))`;
	await sql`alter table run enable row level security`.execute(db);
	await sql`alter table run force row level security`.execute(db);
	await sql`create policy lab on run to trunnion_lab using (true) with check (${fits})`.execute(db);
	await sql`create policy own on run for select to trunnion_client using (client_id = (select acting_client()))`.execute(
		db
	);
	await sql`grant select, insert, update on run to trunnion_lab`.execute(db);
	await sql`grant select on run to trunnion_client`.execute(db);

	for (const table of ['log_line', 'trace', 'reduction', 'metric', 'finding', 'flag', 'attachment']) {
		await sql`alter table ${sql.table(table)} enable row level security`.execute(db);
		await sql`alter table ${sql.table(table)} force row level security`.execute(db);
		await sql`create policy lab on ${sql.table(table)} to trunnion_lab using (true) with check (true)`.execute(
			db
		);
		await sql`create policy own on ${sql.table(table)} for select to trunnion_client
			using (client_id = (select acting_client()))`.execute(db);
		await sql`grant select, insert on ${sql.table(table)} to trunnion_lab`.execute(db);
		await sql`grant select on ${sql.table(table)} to trunnion_client`.execute(db);
	}
	// What may still change after it is written; log lines, findings, flags and attachments may not.
	await sql`grant update on trace to trunnion_lab`.execute(db);
	await sql`grant update (superseded_at) on reduction to trunnion_lab`.execute(db);
	await sql`grant update (is_current) on metric to trunnion_lab`.execute(db);
}

import { requireMay, type Principal } from '../access';
import { reading, type Trx } from '../db';
import type { Deps } from '../deps';
import { resolve } from '../refs';
import { RUN_KINDS, type RunKind } from '$lib/domain/model';

/** What a new record starts from, and where that was taken from; null for what nobody can tell yet. */
interface RunStart {
	build: string | null;
	cell: string | null;
	fuelBatch: string | null;
	kind: RunKind | null;
	booking: { id: string; number: string } | null;
	/** The booking or run that the rest was taken from; `own`: a run this person logged. */
	from: { kind: 'booking' | 'own' | 'lab'; number: string } | null;
}

interface Asked {
	booking?: string | undefined;
	build?: string | undefined;
	cell?: string | undefined;
	fuelBatch?: string | undefined;
}

interface Source {
	number: string;
	buildId: string;
	cellId: string;
	fuelBatchId: string | null;
	kind: string | null;
}

const kindOf = (kind: string | null): RunKind | null => RUN_KINDS.find((each) => each === kind) ?? null;

/** The latest run that can be repeated: of this build where one is asked for, else this person's own, else anyone's. */
async function lastRun(
	trx: Trx,
	who: Principal,
	build: string | null
): Promise<(Source & { isOwn: boolean }) | null> {
	const runs = () => {
		const all = trx
			.selectFrom('run as r')
			.innerJoin('build as b', 'b.id', 'r.buildId')
			.select(['r.number', 'r.buildId', 'r.cellId', 'r.fuelBatchId', 'r.kind', 'r.loggedBy'])
			.where('r.state', '<>', 'voided')
			.orderBy('r.createdAt', 'desc')
			.orderBy('r.id')
			.limit(1);
		return build ? all.where('r.buildId', '=', build) : all.where('b.state', '<>', 'retired');
	};
	const own = await runs().where('r.loggedBy', '=', who.personId).executeTakeFirst();
	const found = own ?? (await runs().executeTakeFirst());
	return found ? { ...found, isOwn: own !== undefined } : null;
}

/** The only one there is, so that a lab's first record need not ask. */
async function only(trx: Trx, table: 'build' | 'cell' | 'fuelBatch'): Promise<string | null> {
	const rows = await trx.selectFrom(table).select('id').limit(2).execute();
	return rows.length === 1 ? rows[0]!.id : null;
}

/** A batch of another client is never offered: the record would be refused. */
async function batchFor(trx: Trx, batch: string | null, build: string | null): Promise<string | null> {
	if (!batch || !build) return batch;
	const fits = await trx
		.selectFrom('fuelBatch as f')
		.innerJoin('build as b', (join) => join.on('b.id', '=', build))
		.select('f.id')
		.where('f.id', '=', batch)
		.where((eb) => eb.or([eb('f.clientId', 'is', null), eb('f.clientId', '=', eb.ref('b.clientId'))]))
		.executeTakeFirst();
	return fits?.id ?? null;
}

/** What a new record can begin with, so that a person only looks it over. */
export async function readRunStart(deps: Deps, who: Principal, asked: Asked): Promise<RunStart> {
	requireMay(who, 'run.open');
	return reading(deps.pools, who, async (trx) => {
		const idOf = async (kind: 'booking' | 'build' | 'cell' | 'fuel_batch', ref: string | undefined) =>
			ref ? (await resolve(trx, kind, ref)).id : null;
		const bookingId = await idOf('booking', asked.booking);
		const booking = bookingId
			? await trx
					.selectFrom('booking')
					.select(['id', 'number', 'buildId', 'cellId', 'fuelBatchId', 'kind'])
					.where('id', '=', bookingId)
					.executeTakeFirstOrThrow()
			: null;
		const askedBuild = await idOf('build', asked.build);
		const run = await lastRun(trx, who, booking?.buildId ?? askedBuild);
		const build = booking?.buildId ?? askedBuild ?? run?.buildId ?? (await only(trx, 'build'));
		const cell =
			booking?.cellId ?? (await idOf('cell', asked.cell)) ?? run?.cellId ?? (await only(trx, 'cell'));
		const batch =
			booking?.fuelBatchId ??
			(await idOf('fuel_batch', asked.fuelBatch)) ??
			run?.fuelBatchId ??
			(await only(trx, 'fuelBatch'));
		const taken = booking
			? ({ kind: 'booking', number: booking.number } as const)
			: run
				? ({ kind: run.isOwn ? 'own' : 'lab', number: run.number } as const)
				: null;
		return {
			build,
			cell,
			fuelBatch: await batchFor(trx, batch, build),
			kind: kindOf(booking?.kind ?? null) ?? kindOf(run?.kind ?? null),
			booking: booking ? { id: booking.id, number: booking.number } : null,
			from: taken
		};
	});
}

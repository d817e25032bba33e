import { randomUUID } from 'node:crypto';
import { hostname } from 'node:os';
import { EventEmitter } from 'node:events';
import { run, type Runner, type TaskList, type WorkerEvents } from 'graphile-worker';
import type pg from 'pg';
import { log } from '../config';
import type { Deps } from '../deps';
import { JOBS, type JobData, type JobName } from '../jobs';
import { closeMail, mailHandlers } from '../mail';
import { processTrace } from '../traces';

/** The mapped type makes a task without a handler a compile error. */
type Handlers = { [N in JobName]: (data: JobData<N>) => Promise<void> };

const ALIVE_EVERY_MS = 10_000;

function tasksOf(handlers: Handlers): TaskList {
	const names = Object.keys(JOBS) as JobName[];
	return Object.fromEntries(
		names.map((name) => [
			name,
			async (payload: unknown) => {
				const data = JOBS[name].payload.parse(payload);
				await (handlers[name] as (data: unknown) => Promise<void>)(data);
			}
		])
	);
}

export interface RunningWorker {
	/** Finishes the jobs in hand, then ends. */
	stop(): Promise<void>;
	/** Settles when the worker ends by itself, which it should not. */
	ended: Promise<void>;
}

/** Runs jobs until told to stop. Several may run against one queue, on one machine or many. */
export async function startWorker(deps: Deps, concurrency = 2): Promise<RunningWorker> {
	const handlers: Handlers = { 'trace.process': (data) => processTrace(deps, data), ...mailHandlers(deps) };
	const life = await Life.begin(
		deps.pools.queuePool,
		`${hostname()}-${process.pid}-${randomUUID().slice(0, 8)}`
	);
	const events: WorkerEvents = new EventEmitter();
	// Before it may lock a job, so that nobody can take it for dead.
	events.on('worker:create', ({ worker }) => void life.use(worker.workerId));
	const runner: Runner = await run({
		pgPool: deps.pools.queuePool,
		taskList: tasksOf(handlers),
		parsedCronItems: [],
		concurrency,
		pollInterval: 1000,
		noHandleSignals: true,
		events
	});
	events.on('job:error', ({ job, error }) =>
		log.warn(
			{ task: job.task_identifier, jobId: job.id, attempt: job.attempts, err: error },
			'job failed; it will be tried again'
		)
	);
	events.on('job:failed', ({ job, error }) =>
		log.error({ task: job.task_identifier, jobId: job.id, err: error }, 'job given up after its last try')
	);
	return {
		ended: runner.promise,
		stop: async () => {
			await runner.stop();
			closeMail(deps);
			await life.end();
		}
	};
}

/**
 * Says that this process lives, and takes the jobs of those that do not: a killed worker's jobs would stay locked for
 * hours. Living is holding an advisory lock on a connection of its own, which PostgreSQL drops the moment the process is gone.
 */
class Life {
	private readonly timer: NodeJS.Timeout;
	private readonly known = new Set<string>();

	private constructor(
		private readonly client: pg.PoolClient,
		private readonly id: string
	) {
		this.timer = setInterval(() => void this.tell(), ALIVE_EVERY_MS);
	}

	static async begin(pool: pg.Pool, id: string): Promise<Life> {
		const client = await pool.connect();
		client.on('error', (error) => log.error({ err: error }, 'the worker lost its connection; it will end'));
		const life = new Life(client, id);
		await life.use(id);
		await life.tell();
		return life;
	}

	/** The queue library names each of its workers itself: every name gets its lock before its first job runs on. */
	async use(workerId: string): Promise<void> {
		if (this.known.has(workerId)) return;
		this.known.add(workerId);
		await this.client.query('select pg_advisory_lock_shared(hashtextextended($1, 1))', [workerId]);
	}

	private async tell(): Promise<void> {
		try {
			await this.client.query(
				`insert into jobs.worker (id) values ($1) on conflict (id) do update set seen_at = now()`,
				[this.id]
			);
			await this.client.query(`delete from jobs.worker where seen_at < now() - interval '1 hour'`);
			await this.freeJobsOfTheDead();
		} catch (error) {
			log.error({ err: error }, 'could not say that the worker lives');
		}
	}

	private async freeJobsOfTheDead(): Promise<void> {
		const { rows } = await this.client.query<{ locked_by: string }>(
			`select distinct locked_by from graphile_worker.jobs where locked_by is not null and locked_at < now() - interval '5 seconds'`
		);
		for (const { locked_by: workerId } of rows) {
			if (this.known.has(workerId)) continue;
			const { rows: held } = await this.client.query<{ free: boolean }>(
				'select pg_try_advisory_xact_lock(hashtextextended($1, 1)) as free',
				[workerId]
			);
			if (!held[0]?.free) continue;
			await this.client.query('select graphile_worker.force_unlock_workers(array[$1])', [workerId]);
			log.warn({ workerId }, 'a worker died; its jobs run again');
		}
	}

	async end(): Promise<void> {
		clearInterval(this.timer);
		await this.client.query('delete from jobs.worker where id = $1', [this.id]);
		await this.client.query('select pg_advisory_unlock_all()');
		this.client.release();
	}
}

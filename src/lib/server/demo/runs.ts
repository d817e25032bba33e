import { Readable } from 'node:stream';
import { setTimeout as sleep } from 'node:timers/promises';
import type { Deps } from '../deps';
import {
	acceptRun,
	addLogLine,
	closeRun,
	flagRun,
	getRun,
	listLogLines,
	listRuns,
	NewFlag,
	NewLogLine,
	NewRun,
	openRun,
	voidRun,
	type RunDetail
} from '../runs';
import { receiveTrace } from '../traces';
import { momentOf } from './calendar';
import type { DemoRecord, DemoRun } from './lab/run';
import { DEMO_RECORDS, DEMO_RUNS } from './lab/runs';
import type { Cast } from './people';
import { runFile } from './run-file';

const MINUTE_MS = 60_000;
/** A record is closed so long after its start, and reviewed so long after that. */
const CLOSED_AFTER_MS = 25 * MINUTE_MS;
const REVIEWED_AFTER_MS = 90 * MINUTE_MS;
/** Traces between two lines of progress. */
const SAID_EVERY = 6;
const ALL = 500;

export interface Seeding {
	deps: Deps;
	cast: Cast;
	begun: Date;
	/** Numbers of the bookings by their key in the plan. */
	bookings: ReadonlyMap<string, string>;
	say: (line: string) => void;
}

type Plan = DemoRecord & Partial<DemoRun>;

interface SentRun {
	plan: Plan;
	startedAt: Date;
	number: string;
}

const at = (deps: Deps, when: Date): Deps => ({ ...deps, now: () => when });

/** Opens what is missing, sends its trace behind every user's work, writes its log and closes it; oldest first. */
export async function sendRuns(seeding: Seeding): Promise<SentRun[]> {
	const { deps, cast, begun, say } = seeding;
	const known = new Map<string, string>();
	for (let cursor: string | undefined, more = true; more;) {
		const page = await listRuns(deps, cast('manager'), { limit: ALL, ...(cursor ? { cursor } : {}) });
		for (const { build, startedAt, number } of page.items)
			known.set(`${build} ${new Date(startedAt).getTime()}`, number);
		cursor = page.nextCursor ?? undefined;
		more = cursor !== undefined;
	}
	const plans = [...DEMO_RUNS, ...DEMO_RECORDS]
		.map((plan: Plan) => ({ plan, startedAt: momentOf(begun, deps.config.labTimeZone, plan.started) }))
		.sort((a, b) => a.startedAt.getTime() - b.startedAt.getTime());
	const sent: SentRun[] = [];
	let traces = 0;
	for (const { plan, startedAt } of plans) {
		const same = known.get(`${plan.build} ${startedAt.getTime()}`);
		const run = same ? await getRun(deps, cast('manager'), same) : await open(seeding, plan, startedAt);
		if (run.state === 'open') await record(seeding, plan, startedAt, run);
		sent.push({ plan, startedAt, number: run.number });
		if (isMeasured(plan) && (++traces % SAID_EVERY === 0 || traces === DEMO_RUNS.length))
			say(`Demo lab: ${traces} of ${DEMO_RUNS.length} traces sent`);
	}
	return sent;
}

const isMeasured = (plan: Plan): plan is DemoRun => plan.filename !== undefined;

async function open({ deps, cast, bookings }: Seeding, plan: Plan, startedAt: Date): Promise<RunDetail> {
	return openRun(
		deps,
		cast(plan.loggedBy),
		NewRun.parse({
			client: plan.client,
			build: plan.build,
			cell: plan.cell,
			fuelBatch: plan.batch,
			kind: plan.kind,
			startedAt: startedAt.toISOString(),
			booking: plan.booking === undefined ? null : bookings.get(plan.booking),
			limitSet: plan.limitSet,
			correction: plan.correction,
			net: true,
			ambient: plan.air
		})
	);
}

/** Trace, log and flags of an open record, as far as they are not there yet; then its end. */
async function record({ deps, cast }: Seeding, plan: Plan, startedAt: Date, run: RunDetail): Promise<void> {
	const { number } = run;
	const who = cast(plan.loggedBy);
	if (isMeasured(plan) && run.traces.length === 0)
		await receiveTrace(deps, who, number, {
			filename: plan.filename,
			body: Readable.from([runFile(plan).bytes]),
			declaredBytes: null,
			background: true
		});
	await writeLog(deps, cast, plan, startedAt, number);
	for (const { by, severity, reason, span } of plan.flags ?? []) {
		if (run.flags.some(({ message }) => message === reason)) continue;
		const flag = NewFlag.parse({ severity, reason, ...(span ? { from: span[0], to: span[1] } : {}) });
		await flagRun(deps, cast(by), number, flag, null, { asHistory: true });
	}
	if (plan.outcome.state !== 'open')
		await closeRun(at(deps, new Date(startedAt.getTime() + CLOSED_AFTER_MS)), who, number, null);
}

async function writeLog(deps: Deps, cast: Cast, plan: Plan, startedAt: Date, number: string): Promise<void> {
	const who = cast(plan.loggedBy);
	const written = await listLogLines(deps, who, number);
	for (const { minute, text, corrects } of plan.log) {
		if (written.some((line) => line.text === text)) continue;
		const earlier = corrects && written.find((line) => line.text === corrects.text);
		const line = NewLogLine.parse({
			text,
			at: new Date(startedAt.getTime() + minute * MINUTE_MS).toISOString(),
			...(earlier ? { supersedes: earlier.id, reason: corrects.reason } : {})
		});
		written.push(await addLogLine(deps, who, number, line));
	}
}

const isComputed = (run: RunDetail) =>
	run.traces.every(({ state }) => state !== 'received' && state !== 'processing');

/**
 * Accepts and voids as planned, each when its figures are there: nobody reviews what is not computed yet. They are computed in
 * the order in which they were sent, so that only the next one need be looked at.
 * @returns how many were left when the time was over
 */
export async function reviewRuns(
	{ deps, cast }: Seeding,
	sent: readonly SentRun[],
	patienceMs: number
): Promise<number> {
	const until = performance.now() + patienceMs;
	let left = 0;
	for (const one of sent) {
		let run = await getRun(deps, cast('manager'), one.number);
		for (
			;
			!isComputed(run) && performance.now() < until;
			run = await getRun(deps, cast('manager'), one.number)
		)
			await sleep(300);
		if (!isComputed(run)) left++;
		else if (run.state === 'closed') await review(deps, cast, one);
	}
	return left;
}

async function review(deps: Deps, cast: Cast, { plan, startedAt, number }: SentRun): Promise<void> {
	const { outcome } = plan;
	const later = at(deps, new Date(startedAt.getTime() + CLOSED_AFTER_MS + REVIEWED_AFTER_MS));
	if (outcome.state === 'accepted') await acceptRun(later, cast(outcome.by), number, outcome.reason, null);
	if (outcome.state === 'voided') await voidRun(later, cast(outcome.by), number, outcome.reason ?? '', null);
}

import { Readable } from 'node:stream';
import { setTimeout as sleep } from 'node:timers/promises';
import type { Deps } from '../deps';
import {
	acceptRun,
	addLogLine,
	closeRun,
	getRun,
	listLogLines,
	listRuns,
	NewRun,
	openRun,
	voidRun,
	type RunDetail
} from '../runs';
import { receiveTrace } from '../traces';
import { labTime } from './calendar';
import type { DemoRun } from './lab/run';
import { DEMO_RUNS } from './lab/runs';
import type { Cast } from './people';
import { runFile } from './run-file';

const MINUTE_MS = 60_000;
/** A record is closed so long after its start, and reviewed so long after that. */
const CLOSED_AFTER_MS = 25 * MINUTE_MS;
const REVIEWED_AFTER_MS = 90 * MINUTE_MS;

export interface Seeding {
	deps: Deps;
	cast: Cast;
	begun: Date;
	/** Numbers of the bookings by their key in the plan. */
	bookings: ReadonlyMap<string, string>;
	say: (line: string) => void;
}

interface SentRun {
	plan: DemoRun;
	startedAt: Date;
	number: string;
}

const at = (deps: Deps, when: Date): Deps => ({ ...deps, now: () => when });

/** Opens what is missing, sends its trace behind every user's work, writes its log and closes it. */
export async function sendRuns(seeding: Seeding): Promise<SentRun[]> {
	const { deps, cast, begun, say } = seeding;
	const known = (await listRuns(deps, cast('manager'), { limit: 500 })).items;
	const sent: SentRun[] = [];
	for (const plan of DEMO_RUNS) {
		const startedAt = labTime(begun, deps.config.labTimeZone, plan.workday, plan.clock);
		const same = known.find(
			(run) =>
				run.client === plan.client &&
				run.build === plan.build &&
				new Date(run.startedAt).getTime() === startedAt.getTime()
		);
		const run = same
			? await getRun(deps, cast('manager'), same.number)
			: await open(seeding, plan, startedAt);
		if (run.traces.length === 0 && run.state === 'open')
			await receiveTrace(deps, cast(plan.loggedBy), run.number, {
				filename: plan.filename,
				body: Readable.from([runFile(plan).bytes]),
				declaredBytes: null,
				background: true
			});
		if (run.state === 'open') await writeUp(seeding, plan, startedAt, run.number);
		sent.push({ plan, startedAt, number: run.number });
		say(`Demo lab: ${sent.length} of ${DEMO_RUNS.length} traces sent`);
	}
	return sent;
}

async function open({ deps, cast, bookings }: Seeding, plan: DemoRun, startedAt: Date): Promise<RunDetail> {
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

async function writeUp(
	{ deps, cast }: Seeding,
	plan: DemoRun,
	startedAt: Date,
	number: string
): Promise<void> {
	const who = cast(plan.loggedBy);
	const written = await listLogLines(deps, who, number);
	for (const { minute, text } of plan.log)
		if (!written.some((line) => line.text === text))
			await addLogLine(deps, who, number, { text, at: new Date(startedAt.getTime() + minute * MINUTE_MS) });
	await closeRun(at(deps, new Date(startedAt.getTime() + CLOSED_AFTER_MS)), who, number, null);
}

const isComputed = (run: RunDetail) =>
	run.traces.every(({ state }) => state !== 'received' && state !== 'processing');

/**
 * Accepts and voids as planned, each when its figures are there: nobody reviews what is not computed yet.
 * @returns how many still wait for their figures when the time is over
 */
export async function reviewRuns(
	seeding: Seeding,
	sent: readonly SentRun[],
	patienceMs: number
): Promise<number> {
	const { deps, cast } = seeding;
	let waiting = [...sent];
	for (const until = performance.now() + patienceMs; ; await sleep(500)) {
		const still: SentRun[] = [];
		for (const one of waiting) {
			const run = await getRun(deps, cast('manager'), one.number);
			if (!isComputed(run)) still.push(one);
			else if (run.state === 'closed') await review(deps, cast, one);
		}
		waiting = still;
		if (waiting.length === 0 || performance.now() > until) return waiting.length;
	}
}

async function review(deps: Deps, cast: Cast, { plan, startedAt, number }: SentRun): Promise<void> {
	const { outcome } = plan;
	const later = at(deps, new Date(startedAt.getTime() + CLOSED_AFTER_MS + REVIEWED_AFTER_MS));
	if (outcome.state === 'accepted') await acceptRun(later, cast(outcome.by), number, outcome.reason, null);
	if (outcome.state === 'voided') await voidRun(later, cast(outcome.by), number, outcome.reason ?? '', null);
}

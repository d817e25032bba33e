import type { RunKind } from '$lib/domain/model';
import type { Surroundings } from '../engine-model';
import { seededRandom } from '../random';
import { BENCHES } from './benches';
import type { DemoBooking } from './booking';
import { CAMPAIGNS, type Campaign, type Step } from './campaigns';
import { HAPPENINGS } from './events';
import type { DemoLogLine, DemoRecord, DemoRun, Logger, Outcome, Reviewer } from './run';
import { ACCEPTED_RECORD, ACCEPTED_WORDS, LOG_WORDS } from './words';

const KINDS: Readonly<Record<Step, RunKind>> = {
	in: 'free_log',
	check: 'free_log',
	shift: 'endurance',
	sweep: 'power_sweep',
	points: 'steady_points'
};
const LOGGERS: readonly Logger[] = ['operator', 'operator2', 'operator', 'operator2', 'engineer'];
const REVIEWERS: readonly Reviewer[] = ['engineer', 'engineer2', 'engineer', 'manager'];
/** Hours at which the runs of a day begin; minutes are the day's own. */
const HOURS = [9, 10, 13, 14];

/** Held points need no fast recording. */
const POINTS_RATE_HZ = 10;

const pick = <T>(from: readonly T[], share: number): T => from[Math.floor(share * from.length)]!;
const two = (value: number) => String(value).padStart(2, '0');

/** The air in the house on a working day: the same for all cells, moving a little through the day. */
function airOn(workday: number, hour: number): Surroundings {
	const { even } = seededRandom(`air ${workday}`);
	return {
		barometerKpa: Math.round(10 * (98.6 + 2.4 * even())) / 10,
		temperatureC: Math.round(10 * (19 + 4 * even() + 0.3 * (hour - 9))) / 10,
		humidityPct: Math.round(36 + 18 * even())
	};
}

function logOf(step: Step, random: { even(): number }): DemoLogLine[] {
	const words = LOG_WORDS[step].filter(() => random.even() < 0.5);
	return (words.length ? words : LOG_WORDS[step].slice(0, 1)).map(([minute, text]) => ({ minute, text }));
}

function outcomeOf(step: Step, workday: number, loggedBy: Logger, random: { even(): number }): Outcome {
	const isMeasured = step === 'sweep' || step === 'points';
	// The latest ones are not all looked at yet.
	if (workday > -30 && random.even() < 0.4) return { state: 'closed' };
	const by = pick(
		REVIEWERS.filter((one) => one !== loggedBy),
		random.even()
	);
	if (!isMeasured) return { state: 'accepted', by, reason: ACCEPTED_RECORD };
	return random.even() < 0.5
		? { state: 'accepted', by }
		: { state: 'accepted', by, reason: pick(ACCEPTED_WORDS, random.even()) };
}

interface Placed {
	campaign: Campaign;
	workday: number;
	/** Of the day, from 0. */
	index: number;
	step: Step;
	booking: string;
}

/** Name of a run, and of its file without the ending. */
const nameOf = ({ campaign, workday, index }: Placed, measured: number) =>
	`${campaign.build.toLowerCase().replace('.', '-')}-d${-workday}-${measured || `r${index + 1}`}`;

function recordOf(placed: Placed, name: string): DemoRecord {
	const { campaign, workday, index, step, booking } = placed;
	const { client, cell, limitSet, correction } = BENCHES[campaign.bench];
	const random = seededRandom(`${name} story`);
	const hour = HOURS[index]!;
	const loggedBy = pick(LOGGERS, random.even());
	const happened = HAPPENINGS[name];
	return {
		client,
		cell,
		limitSet,
		correction,
		build: campaign.build,
		batch: campaign.batch,
		kind: KINDS[step],
		air: airOn(workday, hour),
		started: { workday, clock: `${two(hour)}:${two(Math.floor(5 + 50 * random.even()))}` },
		booking,
		loggedBy,
		log: [...logOf(step, random), ...(happened?.log ?? [])],
		flags: happened?.flags ?? [],
		outcome: reviewable(happened?.outcome, loggedBy) ?? outcomeOf(step, workday, loggedBy, random)
	};
}

/** Nobody reviews their own run: the manager then does. */
function reviewable(outcome: Outcome | undefined, loggedBy: Logger): Outcome | undefined {
	return outcome && 'by' in outcome && outcome.by === loggedBy ? { ...outcome, by: 'manager' } : outcome;
}

function runOf(record: DemoRecord, campaign: Campaign, step: 'sweep' | 'points', name: string): DemoRun {
	const { rateHz, columns, dialect, ...bench } = BENCHES[campaign.bench];
	const { disturbances, test, crosses } = HAPPENINGS[name] ?? {};
	return {
		...record,
		filename: `${name}.csv`,
		trace: 'ready',
		crosses: crosses ?? (campaign.batch === 'B7-219' ? 2 : 0),
		test: test ?? bench[step],
		rateHz: step === 'points' ? POINTS_RATE_HZ : rateHz,
		columns,
		dialect,
		...(disturbances ? { disturbances } : {})
	};
}

function slotOf(campaign: Campaign, key: string, from: number, to: number): DemoBooking {
	const { client, cell } = BENCHES[campaign.bench];
	const { build, batch, purpose, askedBy, throughout, days } = campaign;
	const kinds = days.filter(([day]) => day >= from && day <= to).flatMap(([, ...steps]) => steps);
	return {
		key,
		client,
		build,
		cell,
		batch,
		kind: KINDS[kinds.at(-1) ?? 'check'],
		purpose,
		askedBy,
		from: { workday: from, clock: throughout ? '08:00' : '08:30' },
		to: { workday: to, clock: throughout ? '18:00' : '16:30' },
		fate: { is: 'confirmed' }
	};
}

interface History {
	bookings: DemoBooking[];
	runs: DemoRun[];
	records: DemoRecord[];
}

function tell(): History {
	const history: History = { bookings: [], runs: [], records: [] };
	for (const campaign of CAMPAIGNS) {
		const whole = [campaign.days[0]![0], campaign.days.at(-1)![0]] as const;
		for (const [workday, ...planned] of campaign.days) {
			const [from, to] = campaign.throughout ? whole : [workday, workday];
			const booking = `${campaign.build} ${from}`;
			if (workday === from) history.bookings.push(slotOf(campaign, booking, from, to));
			// A day begins with a check unless it is for running in; some are written down.
			const written = seededRandom(`${booking} check`).even() < 0.6;
			const steps: Step[] =
				planned.length === 0 || (written && planned[0] === 'sweep') ? ['check', ...planned] : planned;
			let measured = 0;
			for (const [index, step] of steps.entries()) {
				const placed = { campaign, workday, index, step, booking };
				const isMeasured = step === 'sweep' || step === 'points';
				const name = nameOf(placed, isMeasured ? ++measured : 0);
				const record = recordOf(placed, name);
				if (isMeasured) history.runs.push(runOf(record, campaign, step, name));
				else history.records.push(record);
			}
		}
	}
	return history;
}

/** The lab's year from its campaigns: the same at every call. */
export const HISTORY: Readonly<History> = tell();

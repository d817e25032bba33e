import { BENCHES } from './benches';
import type { DemoRecord, DemoRun } from './run';

const { sprint, farm } = BENCHES;
const sprintAir = { barometerKpa: 99.9, temperatureC: 22, humidityPct: 44 };

/** A pull of the test that is on. */
const pull: DemoRun = {
	client: sprint.client,
	cell: sprint.cell,
	limitSet: sprint.limitSet,
	correction: sprint.correction,
	rateHz: sprint.rateHz,
	columns: sprint.columns,
	dialect: sprint.dialect,
	build: 'QM-24.2',
	batch: 'E5-117',
	kind: 'power_sweep',
	air: sprintAir,
	started: { minutes: -70 },
	booking: 'live-on',
	loggedBy: 'operator',
	log: [
		{ minute: -9, text: 'Warm-up done, torque zero taken.' },
		{ minute: 2, text: 'First pull clean to 7200.' }
	],
	outcome: { state: 'closed' },
	filename: 'qm-24-2-today-1.csv',
	trace: 'ready',
	crosses: 0,
	test: sprint.sweep
};

export const LIVE_RUNS: readonly DemoRun[] = [pull];

export const LIVE_RECORDS: readonly DemoRecord[] = [
	{
		client: sprint.client,
		cell: sprint.cell,
		limitSet: sprint.limitSet,
		correction: sprint.correction,
		build: 'QM-24.2',
		batch: 'E5-117',
		kind: 'power_sweep',
		air: sprintAir,
		started: { minutes: -12 },
		booking: 'live-on',
		loggedBy: 'operator',
		log: [{ minute: 1, text: 'Second pull begun after cooling down.' }],
		outcome: { state: 'open' }
	},
	{
		client: farm.client,
		cell: farm.cell,
		limitSet: farm.limitSet,
		correction: farm.correction,
		build: 'SD-45.2',
		batch: 'B7-208',
		kind: 'steady_points',
		air: { barometerKpa: 99.9, temperatureC: 23, humidityPct: 42 },
		started: { minutes: -95 },
		booking: 'live-over',
		loggedBy: 'operator2',
		log: [
			{ minute: 2, text: 'First point held.' },
			{ minute: 41, text: 'Point 5 repeated: brake water valve was hunting.' },
			{ minute: 70, text: 'Seven of nine points done.' }
		],
		outcome: { state: 'open' }
	}
];

import type { Surroundings } from '../engine-model';
import { DIALECTS } from '../trace-file';
import { COLUMNS } from './columns';
import { STORE_SWING } from './events';
import type { DemoRun } from './run';

const accepted = (by: 'engineer' | 'manager', reason?: string) =>
	({ state: 'accepted', by, ...(reason ? { reason } : {}) }) as const;
const closed = { state: 'closed' } as const;

type Own<K extends keyof DemoRun> = Omit<DemoRun, K>;

const sprint = (
	run: Own<'client' | 'cell' | 'batch' | 'kind' | 'limitSet' | 'correction' | 'rateHz' | 'trace' | 'crosses'>
): DemoRun => ({
	client: 'QMS',
	cell: 'EC1',
	batch: 'E5-117',
	kind: 'power_sweep',
	limitSet: 'LAB-SAFE',
	correction: 'sae_j1349',
	rateHz: 50,
	trace: 'ready',
	crosses: 0,
	...run
});

/** The same pull on two builds, two installations each: what is to be found is in the difference. */
const generator = (
	build: string,
	workday: number,
	air: Surroundings,
	more: Pick<DemoRun, 'outcome' | 'log'>
): DemoRun => ({
	filename: `${build.toLowerCase().replace('.', '-')}-sweep-d${-workday}.csv`,
	client: 'BVG',
	build,
	cell: 'AC3',
	batch: 'E85-031',
	kind: 'power_sweep',
	limitSet: 'LAB-SAFE',
	correction: 'none',
	air,
	started: { workday, clock: '10:40' },
	booking: `generator-${build.at(-1)!.toLowerCase()}${workday === -11 || workday === -6 ? '' : '2'}`,
	loggedBy: 'operator',
	trace: 'ready',
	crosses: 0,
	test: { is: 'sweep', plan: { fromRpm: 1400, toRpm: 4200, rateRpmS: 70 } },
	rateHz: 50,
	columns: COLUMNS.cell3,
	dialect: DIALECTS.unitRow,
	...more
});

const ultralight = (
	run: Own<'client' | 'build' | 'cell' | 'batch' | 'kind' | 'limitSet' | 'correction' | 'rateHz' | 'crosses'>
): DemoRun => ({
	client: 'LHA',
	build: 'LH-58.1',
	cell: 'AC4',
	batch: 'E5-117',
	kind: 'power_sweep',
	limitSet: 'LAB-SAFE-2T',
	correction: 'sae_j1349',
	booking: 'ultralight-ref',
	crosses: 0,
	rateHz: 50,
	...run
});

const farm = (run: Own<'client' | 'cell' | 'batch' | 'limitSet' | 'correction' | 'crosses'>): DemoRun => ({
	client: 'SFM',
	cell: 'WB2',
	batch: 'B7-208',
	limitSet: 'LAB-DIESEL',
	crosses: 0,
	// Charged diesels need the pressure before the cooler for ISO 1585, which this cell does not record.
	correction: 'din_70020',
	...run
});

/** Diesel sweep at a pace that its turbocharger follows. */
const farmSweep = { fromRpm: 900, toRpm: 2300, rateRpmS: 25 };

/** The lab's last three weeks and the swing of a store before them, oldest first. */
export const RECENT_RUNS: readonly DemoRun[] = [
	{
		...generator(
			'BV-16.B',
			-44,
			{ barometerKpa: 99.4, temperatureC: 22, humidityPct: 43 },
			{
				outcome: {
					state: 'accepted',
					by: 'manager',
					reason: 'Swing is over the limit of the set: told to the customer.'
				},
				log: [{ minute: 6, text: 'Store at 64 % before the start, long drive on purpose.' }]
			}
		),
		filename: 'bv-16-b-store-swing.csv',
		kind: 'free_log',
		limitSet: 'BVG-STORE',
		started: { workday: -44, clock: '10:20' },
		booking: 'generator-store',
		loggedBy: 'operator2',
		// The swing, and the charge that it ends on.
		crosses: 2,
		test: STORE_SWING,
		rateHz: 20,
		columns: COLUMNS.store,
		dialect: DIALECTS.tabs
	},
	sprint({
		filename: 'qm-24-1-pull-2.csv',
		build: 'QM-24.1',
		air: { barometerKpa: 99.6, temperatureC: 21.5, humidityPct: 46 },
		started: { workday: -14, clock: '11:10' },
		booking: 'sprint-first',
		loggedBy: 'operator',
		log: [
			{ minute: -12, text: 'Warm-up done, oil 92 °C, no leaks.' },
			{ minute: 1, text: 'Pull 2, clean to 7200.' }
		],
		outcome: accepted('engineer', 'Second of three pulls; lambda steady.'),
		test: { is: 'sweep', plan: { fromRpm: 2500, toRpm: 7200, rateRpmS: 120 } },
		columns: COLUMNS.cell1,
		dialect: DIALECTS.plain
	}),
	generator(
		'BV-16.A',
		-11,
		{ barometerKpa: 100.4, temperatureC: 20, humidityPct: 41 },
		{
			outcome: accepted('engineer'),
			log: [{ minute: -5, text: 'Fuel temperature settled before the pull.' }]
		}
	),
	generator(
		'BV-16.A',
		-10,
		{ barometerKpa: 100.1, temperatureC: 22.5, humidityPct: 44 },
		{
			outcome: accepted('engineer'),
			log: [{ minute: -30, text: 'Engine taken off the shaft and aligned anew after yesterday.' }]
		}
	),
	farm({
		filename: 'sd-45-1-sweep.csv',
		build: 'SD-45.1',
		kind: 'power_sweep',
		air: { barometerKpa: 100.2, temperatureC: 23, humidityPct: 38 },
		started: { workday: -9, clock: '10:05' },
		booking: 'farm-first',
		loggedBy: 'operator',
		log: [],
		outcome: accepted('engineer'),
		trace: 'ready',
		test: { is: 'sweep', plan: farmSweep },
		rateHz: 20,
		columns: COLUMNS.cell2,
		dialect: {
			...DIALECTS.decimalComma,
			preamble: ['Cell;2', 'Remark;warm engine, second sweep', '']
		}
	}),
	farm({
		filename: 'sd-45-1-points.csv',
		build: 'SD-45.1',
		kind: 'steady_points',
		air: { barometerKpa: 100.2, temperatureC: 23.5, humidityPct: 38 },
		started: { workday: -9, clock: '13:20' },
		booking: 'farm-first',
		loggedBy: 'engineer',
		log: [{ minute: 4, text: 'Brake water outlet 48 °C, all points held.' }],
		outcome: accepted('manager'),
		trace: 'ready',
		test: {
			is: 'steady',
			holdS: 54,
			points: [2300, 1800, 1400].flatMap((speedRpm) => [1, 0.75, 0.5].map((load) => ({ speedRpm, load })))
		},
		rateHz: 10,
		columns: COLUMNS.cell2,
		dialect: DIALECTS.decimalComma
	}),
	farm({
		filename: 'sd-45-2-export.csv',
		build: 'SD-45.2',
		kind: 'power_sweep',
		air: { barometerKpa: 99.8, temperatureC: 24, humidityPct: 40 },
		started: { workday: -7, clock: '15:30' },
		booking: 'farm-map9',
		loggedBy: 'operator',
		log: [{ minute: 9, text: 'Export had the clock column switched off. Sweep to be repeated.' }],
		outcome: closed,
		trace: 'refused',
		test: { is: 'sweep', plan: farmSweep },
		rateHz: 20,
		columns: COLUMNS.cell2.filter(({ code }) => code !== 'time'),
		dialect: DIALECTS.decimalComma
	}),
	generator(
		'BV-16.B',
		-6,
		{ barometerKpa: 99.7, temperatureC: 21, humidityPct: 47 },
		{
			outcome: accepted('engineer'),
			log: [{ minute: 2, text: 'No knock with map G4.' }]
		}
	),
	generator(
		'BV-16.B',
		-5,
		{ barometerKpa: 100, temperatureC: 23, humidityPct: 45 },
		{
			outcome: accepted('engineer'),
			log: []
		}
	),
	{
		...generator(
			'BV-16.B',
			-5,
			{ barometerKpa: 100, temperatureC: 23.5, humidityPct: 45 },
			{
				outcome: closed,
				log: [{ minute: 0, text: 'Store at 64 % before the start.' }]
			}
		),
		filename: 'bv-16-b-store.csv',
		kind: 'free_log',
		limitSet: 'BVG-STORE',
		started: { workday: -5, clock: '14:15' },
		crosses: 0,
		test: {
			is: 'electrical',
			speedRpm: 3000,
			stretches: [
				{ seconds: 20, load: 0.7, electricalKw: 0 },
				{ seconds: 40, load: 0.9, electricalKw: 18 },
				{ seconds: 30, load: 0.8, electricalKw: 4 },
				{ seconds: 55, load: 0.7, electricalKw: -14 },
				{ seconds: 35, load: 0.9, electricalKw: 16 },
				{ seconds: 30, load: 0.6, electricalKw: -8 }
			]
		},
		rateHz: 20,
		columns: COLUMNS.store,
		dialect: DIALECTS.tabs
	},
	ultralight({
		filename: 'LH58_run_3.csv',
		air: { barometerKpa: 98.9, temperatureC: 19.5, humidityPct: 52 },
		started: { workday: -4, clock: '10:20' },
		loggedBy: 'operator',
		log: [{ minute: -3, text: 'Both exhaust thermocouples renewed.' }],
		outcome: accepted('engineer'),
		trace: 'ready',
		test: { is: 'sweep', plan: { fromRpm: 3500, toRpm: 6800, rateRpmS: 150 } },
		columns: COLUMNS.cell4,
		dialect: DIALECTS.quotedUs
	}),
	ultralight({
		filename: 'LH58_hand_logger.csv',
		air: { barometerKpa: 98.9, temperatureC: 20, humidityPct: 51 },
		started: { workday: -4, clock: '11:35' },
		loggedBy: 'engineer',
		log: [{ minute: 1, text: 'Recorded with the customer’s hand logger; it writes no units.' }],
		outcome: closed,
		trace: 'needs_map',
		test: { is: 'sweep', plan: { fromRpm: 3500, toRpm: 6800, rateRpmS: 150 } },
		columns: COLUMNS.handLogger,
		dialect: DIALECTS.bare
	}),
	{
		filename: 'ts-14-1-energy-flow.csv',
		client: 'TSL',
		build: 'TS-14.1',
		cell: 'AC3',
		batch: 'TSL-S98-06',
		kind: 'power_sweep',
		limitSet: 'TSL-ENERGY',
		correction: 'none',
		air: { barometerKpa: 99.9, temperatureC: 22, humidityPct: 43 },
		started: { workday: -2, clock: '11:00' },
		booking: 'fuel-first',
		loggedBy: 'operator',
		log: [
			{
				minute: 1,
				text: 'Control held the energy flow on its line but for two overshoots while the boost came up.'
			}
		],
		outcome: closed,
		trace: 'ready',
		crosses: 1,
		test: {
			is: 'capped',
			plan: { fromRpm: 1800, toRpm: 6500, rateRpmS: 120 },
			overshoots: [
				{ atS: 8.4, lastsS: 1.4, by: 0.03 },
				{ atS: 10.9, lastsS: 0.9, by: 0.022 }
			]
		},
		rateHz: 50,
		columns: COLUMNS.cell3,
		dialect: DIALECTS.plain
	},
	sprint({
		filename: 'qm-24-2-pull-1.csv',
		build: 'QM-24.2',
		air: { barometerKpa: 99.2, temperatureC: 24, humidityPct: 50 },
		started: { workday: -1, clock: '10:15' },
		booking: 'sprint-short',
		loggedBy: 'operator',
		log: [
			{ minute: 3, text: 'Coolant valve was still on by-pass.' },
			{ minute: 14, text: 'Valve opened; pull to be repeated.' }
		],
		outcome: {
			state: 'voided',
			by: 'engineer',
			reason: 'Coolant on by-pass: the engine was not at its test temperature. Repeated as the next run.'
		},
		test: { is: 'sweep', plan: { fromRpm: 2500, toRpm: 7200, rateRpmS: 120 } },
		columns: COLUMNS.cell1,
		dialect: DIALECTS.plain
	}),
	sprint({
		filename: 'qm-24-2-up-and-down.csv',
		build: 'QM-24.2',
		air: { barometerKpa: 99.2, temperatureC: 24.5, humidityPct: 49 },
		started: { workday: -1, clock: '11:05' },
		booking: 'sprint-short',
		loggedBy: 'operator',
		log: [{ minute: 2, text: 'Up and down, brake warm.' }],
		outcome: closed,
		test: { is: 'sweep', plan: { fromRpm: 2500, toRpm: 7200, rateRpmS: 130, andDown: true } },
		columns: COLUMNS.cell1,
		dialect: DIALECTS.unitRow
	})
];

import { DIALECTS } from '../trace-file';
import { COLUMNS } from './columns';
import type { DemoRun } from './run';

/** What goes with an engine in a cell: how it is swept and held there, and how that cell's measuring system writes it down. */
export type Bench = Pick<
	DemoRun,
	'client' | 'cell' | 'limitSet' | 'correction' | 'rateHz' | 'columns' | 'dialect'
> & {
	sweep: DemoRun['test'];
	points: DemoRun['test'];
};

const held = (speeds: readonly number[], loads: readonly number[]): DemoRun['test'] => ({
	is: 'steady',
	holdS: 54,
	points: speeds.flatMap((speedRpm) => loads.map((load) => ({ speedRpm, load })))
});

const sprint: Bench = {
	client: 'QMS',
	cell: 'EC1',
	limitSet: 'LAB-SAFE',
	correction: 'sae_j1349',
	rateHz: 50,
	columns: COLUMNS.cell1,
	dialect: DIALECTS.plain,
	sweep: { is: 'sweep', plan: { fromRpm: 2500, toRpm: 7200, rateRpmS: 120 } },
	points: held([5200, 4000], [1, 0.4])
};

export const BENCHES = {
	sprint,
	sprintInCell3: { ...sprint, cell: 'AC3', columns: COLUMNS.cell3, dialect: DIALECTS.unitRow },
	generator: {
		client: 'BVG',
		cell: 'AC3',
		limitSet: 'LAB-SAFE',
		correction: 'none',
		rateHz: 50,
		columns: COLUMNS.cell3,
		dialect: DIALECTS.unitRow,
		sweep: { is: 'sweep', plan: { fromRpm: 1400, toRpm: 4200, rateRpmS: 70 } },
		points: held([3000, 1500], [1, 0.75])
	},
	ultralight: {
		client: 'LHA',
		cell: 'AC4',
		limitSet: 'LAB-SAFE-2T',
		correction: 'sae_j1349',
		rateHz: 50,
		columns: COLUMNS.cell4,
		dialect: DIALECTS.quotedUs,
		sweep: { is: 'sweep', plan: { fromRpm: 3500, toRpm: 6800, rateRpmS: 130 } },
		points: held([5900, 5000], [1, 0.8])
	},
	farm: {
		client: 'SFM',
		cell: 'WB2',
		limitSet: 'LAB-DIESEL',
		// Charged diesels need the pressure before the cooler for ISO 1585, which this cell does not record.
		correction: 'din_70020',
		rateHz: 20,
		columns: COLUMNS.cell2,
		dialect: DIALECTS.decimalComma,
		// A pace that its turbocharger follows.
		sweep: { is: 'sweep', plan: { fromRpm: 900, toRpm: 2300, rateRpmS: 25 } },
		points: held([2300, 1400], [1, 0.5])
	},
	fuel: {
		client: 'TSL',
		cell: 'AC3',
		limitSet: 'TSL-ENERGY',
		correction: 'none',
		rateHz: 50,
		columns: COLUMNS.cell3,
		dialect: DIALECTS.plain,
		sweep: { is: 'capped', plan: { fromRpm: 1800, toRpm: 6500, rateRpmS: 120 }, overshoots: [] },
		points: held([4500, 3000], [1, 0.75])
	}
} as const satisfies Record<string, Bench>;

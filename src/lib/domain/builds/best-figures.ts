import { mean, standardDeviation } from '../statistics/moments';

/** One run's figure. */
export interface RunFigure {
	code: string;
	unit: string;
	value: number;
	u: number | null;
	run: string;
	runId: string;
	/** Standard it was corrected by, for a corrected figure; else null. */
	correction: string | null;
}

export interface BestFigure extends RunFigure {
	/** Runs that have the figure. */
	n: number;
	mean: number;
	/** Scatter from run to run, one standard deviation; null for a single run. */
	sd: number | null;
}

/** Figures of which the best is worth showing, and which way is better. */
const BETTER: Readonly<Record<string, 'highest' | 'lowest'>> = {
	peak_power: 'highest',
	peak_power_corrected: 'highest',
	peak_torque: 'highest',
	peak_torque_corrected: 'highest',
	bmep_max: 'highest',
	bte_max: 'highest',
	bsfc_min: 'lowest'
};

export const BEST_CODES: readonly string[] = Object.keys(BETTER);

/**
 * The best of each figure over some runs, with how many there were and how they scatter: of many tries the best is lucky,
 * so it never stands alone. Figures corrected by different standards are not compared.
 */
export function bestFigures(figures: readonly RunFigure[]): BestFigure[] {
	return BEST_CODES.flatMap((code) => {
		const of = figures.filter((figure) => figure.code === code);
		return [...new Set(of.map(({ correction }) => correction))].sort().map((correction) => {
			const runs = of.filter((figure) => figure.correction === correction);
			const values = runs.map(({ value }) => value);
			const bestValue = BETTER[code] === 'highest' ? Math.max(...values) : Math.min(...values);
			const best = runs.find(({ value }) => value === bestValue)!;
			const sd = runs.length > 1 ? standardDeviation(values) : null;
			return { ...best, n: runs.length, mean: mean(values), sd };
		});
	});
}

import { describe, expect, it } from 'vitest';
import { bestFigures, type RunFigure } from './best-figures';

const figure = (code: string, value: number, run: string, correction: string | null = null): RunFigure => ({
	code,
	unit: 'kW',
	value,
	u: 0.1,
	run,
	runId: `id-${run}`,
	correction
});

describe('best figures', () => {
	it('takes the highest power and the lowest consumption, with all runs behind them', () => {
		const [power, consumption] = bestFigures([
			figure('bsfc_min', 250, 'R1'),
			figure('peak_power', 100, 'R1'),
			figure('peak_power', 104, 'R2'),
			figure('peak_power', 102, 'R3'),
			figure('bsfc_min', 246, 'R2')
		]);
		expect(power).toMatchObject({ code: 'peak_power', value: 104, run: 'R2', n: 3, mean: 102, sd: 2 });
		expect(consumption).toMatchObject({ code: 'bsfc_min', value: 246, run: 'R2', n: 2, mean: 248 });
	});
	it('does not compare what was corrected by different standards', () =>
		expect(
			bestFigures([
				figure('peak_power_corrected', 100, 'R1', 'sae_j1349'),
				figure('peak_power_corrected', 110, 'R2', 'iso_1585')
			]).map(({ correction, n, sd }) => [correction, n, sd])
		).toEqual([
			['iso_1585', 1, null],
			['sae_j1349', 1, null]
		]));
	it('of equal ones the first run has it, and other figures are left out', () =>
		expect(
			bestFigures([
				figure('peak_power', 1, 'R1'),
				figure('peak_power', 1, 'R2'),
				figure('duration', 9, 'R2')
			]).map(({ run }) => run)
		).toEqual(['R1']));
});

import type { Finding, Point, RunContext } from '../model';
import { derive } from '../trace/derive';
import { correct, correctedMetrics } from './corrected';
import { curveMetrics } from './curve-metrics';
import { rowPlaces } from './curve-places';
import { findPlateaus, type Plateau, type PlateauSettings } from './plateaus';
import { orNull, toCurve, toPoints, type Reduced } from './reduced';
import { stated } from './sweep';

const DEFAULTS: PlateauSettings = { speedTolerance: 0.01, torqueTolerance: 0.02, settleS: 10, averageS: 30 };
const METHOD = 'point-mean.1';

interface Averages {
	means: Map<string, Float64Array>;
	sds: Map<string, Float64Array>;
	counts: Map<string, Float64Array>;
	/** Standard uncertainty of each mean by its scatter. */
	us: Map<string, Float64Array>;
}

/**
 * Standard uncertainty of a mean whose samples hang together: the variance of means of ever longer batches tells how many of them are
 * independent. Batches of about a tenth of the samples are used.
 */
function uncertaintyOfMean(values: readonly number[], sd: number): number {
	const n = values.length;
	const plain = sd / Math.sqrt(n);
	const size = Math.floor(n / 10);
	if (size < 2) return plain;
	const batches: number[] = [];
	for (let at = 0; at + size <= n; at += size) {
		let sum = 0;
		for (let i = at; i < at + size; i++) sum += values[i]!;
		batches.push(sum / size);
	}
	const mean = batches.reduce((a, b) => a + b, 0) / batches.length;
	const variance = batches.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (batches.length - 1);
	return Math.max(plain, Math.sqrt(variance / batches.length));
}

function average(columns: ReadonlyMap<string, Float64Array>, plateaus: readonly Plateau[]): Averages {
	const result: Averages = { means: new Map(), sds: new Map(), counts: new Map(), us: new Map() };
	for (const [code, values] of columns) {
		const [mean, sd, count, u] = [0, 1, 2, 3].map(() => new Float64Array(plateaus.length).fill(NaN)) as [
			Float64Array,
			Float64Array,
			Float64Array,
			Float64Array
		];
		plateaus.forEach(({ from, to }, at) => {
			const known: number[] = [];
			for (let i = from; i < to; i++) if (!Number.isNaN(values[i]!)) known.push(values[i]!);
			count[at] = known.length;
			if (known.length === 0) return;
			mean[at] = known.reduce((a, b) => a + b, 0) / known.length;
			if (known.length < 2) return;
			const squares = known.reduce((sum, value) => sum + (value - mean[at]!) ** 2, 0);
			sd[at] = Math.sqrt(squares / (known.length - 1));
			u[at] = uncertaintyOfMean(known, sd[at]);
		});
		result.means.set(code, mean);
		result.sds.set(code, sd);
		result.counts.set(code, count);
		result.us.set(code, u);
	}
	return result;
}

/** Scatter of what is derived from several means, first order: the parts in quadrature by their exponents. */
function derivedUncertainty(averages: Averages, code: string, row: number): number | null {
	const relative = (channel: string) => {
		const mean = averages.means.get(channel)?.[row] ?? NaN;
		return (averages.us.get(channel)?.[row] ?? NaN) / Math.abs(mean);
	};
	const own = averages.us.get(code)?.[row];
	if (own !== undefined) return orNull(own);
	const parts: Record<string, readonly string[]> = {
		power: ['speed', 'torque'],
		bmep: ['torque'],
		bsfc: ['speed', 'torque', 'fuel_flow'],
		bte: ['speed', 'torque', 'fuel_flow'],
		fuel_energy_flow: ['fuel_flow'],
		afr: ['air_flow', 'fuel_flow'],
		lambda_flow: ['air_flow', 'fuel_flow'],
		ve_inlet: ['air_flow', 'speed']
	};
	const inputs = parts[code];
	if (!inputs) return null;
	return orNull(Math.sqrt(inputs.reduce((sum, channel) => sum + relative(channel) ** 2, 0)));
}

/**
 * Reduces a run of held points: plateaus, their means, and what follows from the means (ratios of means, never means of ratios).
 * Each point carries `n` (samples), `sd_*` and `cov_*` of speed, torque and flows, `time_from` and `time_to`.
 */
export function reduceSteady(
	time: Float64Array,
	columns: ReadonlyMap<string, Float64Array>,
	context: RunContext
): Reduced {
	const settings = { ...DEFAULTS, ...stated(context.settings) };
	const plateaus = findPlateaus(time, columns.get('speed')!, columns.get('torque')!, settings);
	const findings: Finding[] = [];
	if (plateaus.length === 0)
		findings.push({
			code: 'no_points',
			severity: 'warning',
			message: `No steady point was found: speed must stay within ±${100 * settings.speedTolerance} % and torque within ±${100 * settings.torqueTolerance} % for ${settings.settleS} s and ${settings.averageS} s more. Widen the settings or check the kind of the run.`,
			spans: []
		});
	const averages = average(columns, plateaus);
	const rows = plateaus.length;
	const table = new Map(averages.means);
	const derived = derive(table, rows, context);
	for (const [code, values] of derived) table.set(code, values);
	const correcting = correct(table, rows, context);
	for (const [code, values] of correcting.columns) table.set(code, values);
	const scatter = (code: string, row: number) => {
		const u = derivedUncertainty(averages, code, row);
		const value = table.get(code)?.[row] ?? NaN;
		// Own means carry their u in their unit, derived ones a share of themselves.
		return u === null ? null : averages.us.has(code) ? u : u * Math.abs(value);
	};
	const middle = Float64Array.from(plateaus, ({ from, to }) => (time[from]! + time[to - 1]!) / 2);
	const places = rowPlaces(table, METHOD, scatter, middle);
	const metrics = {
		...curveMetrics(places),
		...correctedMetrics(correcting, places, table, context.correction)
	};
	const points = toPoints(table, rows).map((point, row) =>
		describe(point, row, averages, plateaus[row]!, time)
	);
	return { metrics, points, curve: toCurve(table), findings: [...findings, ...correcting.findings] };
}

const SPREAD_OF = ['speed', 'torque', 'fuel_flow', 'air_flow'];

function describe(
	point: Point,
	row: number,
	averages: Averages,
	{ from, to }: Plateau,
	time: Float64Array
): Point {
	const full: Point = { ...point, n: to - from, time_from: time[from]!, time_to: time[to - 1]! };
	for (const code of SPREAD_OF) {
		const sd = averages.sds.get(code)?.[row];
		if (sd === undefined) continue;
		full[`sd_${code}`] = orNull(sd);
		full[`cov_${code}`] = orNull(sd / Math.abs(averages.means.get(code)![row]!));
	}
	return full;
}

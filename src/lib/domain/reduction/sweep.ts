import { quantile } from '../statistics/moments';
import type { Finding, RunContext } from '../model';
import { derive } from '../trace/derive';
import { figure } from '../trace/spans';
import { thinned } from '../trace/spikes';
import { binBySpeed, defaultBinWidth } from './bins';
import { correct, correctedMetrics } from './corrected';
import { curveMetrics } from './curve-metrics';
import { curvePlaces } from './curve-places';
import { torqueWithInertia } from './inertia';
import { centredMean } from './prepare';
import { findRamps, type Ramp } from './ramp';
import { toCurve, type Reduced } from './reduced';

const DEFAULTS = { minSamplesPerBin: 3, fullLoadShare: 0.95 };
/** Width of the mean that frees the speed of noise before samples are sorted into bins, s. */
const SORTING_S = 0.2;
/** Conditions of the room do not follow the engine's speed: one mean of the ramp is surer than one of each bin. */
const ROOM = ['barometer', 'ambient_temp', 'humidity', 'vapour_pressure'];
/** A second direction counts as the main one only where it carries this much more load. */
const CLEARLY_MORE = 1.25;

function meanPower(speed: Float64Array, torque: Float64Array, ramps: readonly Ramp[]): number {
	let sum = 0;
	let n = 0;
	for (const { from, to } of ramps)
		for (let i = from; i < to; i++) {
			const product = speed[i]! * torque[i]!;
			if (Number.isNaN(product)) continue;
			sum += product;
			n++;
		}
	return n > 0 ? sum / n : -Infinity;
}

function meanOver(values: Float64Array, rows: readonly number[]): number {
	let sum = 0;
	let n = 0;
	for (const row of rows)
		if (!Number.isNaN(values[row]!)) {
			sum += values[row]!;
			n++;
		}
	return n > 0 ? sum / n : NaN;
}

const spanOf = (ramp: Ramp) => ramp.speeds[1] - ramp.speeds[0];

/** The ramps that make the curve: one direction, up unless down carries clearly more; short attempts are left out. */
function chooseRamps(
	ramps: readonly Ramp[],
	speed: Float64Array,
	torque: Float64Array
): { used: Ramp[]; findings: Finding[] } {
	const widest = Math.max(...ramps.map(spanOf));
	const whole = ramps.filter((ramp) => spanOf(ramp) >= 0.5 * widest);
	const up = whole.filter((ramp) => ramp.direction === 'up');
	const down = whole.filter((ramp) => ramp.direction === 'down');
	const [powerUp, powerDown] = [meanPower(speed, torque, up), meanPower(speed, torque, down)];
	const useDown = up.length === 0 || (down.length > 0 && powerDown > CLEARLY_MORE * Math.max(powerUp, 0));
	const used = useDown ? down : up;
	const other = useDown ? up : down;
	const findings: Finding[] = [];
	const note = (code: string, message: string) =>
		findings.push({ code, severity: 'info', message, spans: [] });
	if (used.length > 1)
		note(
			'several_ramps',
			`The curve is made of ${used.length} ramps ${useDown ? 'down' : 'up'}; each bin holds samples of all.`
		);
	if (other.length > 0 && (useDown ? powerUp : powerDown) > 0.5 * (useDown ? powerDown : powerUp))
		note(
			'other_direction',
			`The run also has ${other.length === 1 ? 'a ramp' : `${other.length} ramps`} ${useDown ? 'up' : 'down'} under load; up and down are kept apart and the figures are of the ${useDown ? 'down' : 'up'} ramp.`
		);
	return { used, findings };
}

/** Samples of the ramps at full load: throttle at or above the share of its highest; without a throttle channel every one. */
function fullLoadRows(ramps: readonly Ramp[], throttle: Float64Array | undefined, share: number): number[] {
	const limit = throttle ? share * quantile(thinned(throttle), 0.995) : 0;
	const rows: number[] = [];
	for (const { from, to } of ramps)
		for (let i = from; i < to; i++) if (!(limit > 0) || throttle![i]! >= limit) rows.push(i);
	return rows;
}

/** Speeds that were measured at full load, by the ends of the ramps unless the throttle cut them shorter. */
function measuredRange(
	ramps: readonly Ramp[],
	rows: readonly number[],
	sorting: Float64Array
): [number, number] {
	let lo = Infinity;
	let hi = -Infinity;
	for (const row of rows) {
		const value = sorting[row]!;
		if (value < lo) lo = value;
		if (value > hi) hi = value;
	}
	const rampLo = Math.min(...ramps.map((ramp) => ramp.speeds[0]));
	const rampHi = Math.max(...ramps.map((ramp) => ramp.speeds[1]));
	return [Math.max(lo, rampLo), Math.min(hi, rampHi)];
}

function inertiaFindings(
	ramps: readonly Ramp[],
	corrected: ReturnType<typeof torqueWithInertia>,
	context: RunContext
): Finding[] {
	const rate = ramps.reduce((sum, ramp) => sum + ramp.rateRpmS, 0) / ramps.length;
	const say = (code: string, message: string): Finding => ({ code, severity: 'info', message, spans: [] });
	if (corrected) {
		const missing =
			corrected.missing.length > 0 ? ` Unknown and not in it: ${corrected.missing.join(', ')}.` : '';
		return [
			say(
				'inertia_corrected',
				`Torque and what follows from it include I·dω/dt with I = ${figure(corrected.inertiaKgM2)} kg·m² (${corrected.counted.join(', ')}) at ${figure(rate)} rev/min per s. The torque channel of the trace is as recorded.${missing}`
			)
		];
	}
	if (context.engine.inertiaKgM2 !== null) return [];
	return [
		say(
			'inertia_unknown',
			`The engine's inertia is not known, so the torque of this ramp of ${figure(rate)} rev/min per s is not corrected for it.`
		)
	];
}

/**
 * Reduces a power sweep to a full-load curve and its figures.
 *
 * @param time s @param columns canonical channels per sample, spikes left out; needs `speed` and `torque`
 * @returns curve over bins of speed, figures by local fit. Bins, shares and fits by engineering settings of the run.
 */
export function reduceSweep(
	time: Float64Array,
	columns: ReadonlyMap<string, Float64Array>,
	context: RunContext
): Reduced {
	const settings = { ...DEFAULTS, ...stated(context.settings) };
	const speed = columns.get('speed')!;
	const recorded = columns.get('torque')!;
	const findings: Finding[] = [];
	let ramps = findRamps(time, speed);
	if (ramps.length === 0) {
		findings.push({
			code: 'no_ramp',
			severity: 'warning',
			message: `No ramp was found: the speed spans less than a tenth of its highest value. Every sample is taken; check that this is a power sweep.`,
			spans: []
		});
		ramps = [wholeTrace(speed)];
	}
	const chosen = chooseRamps(ramps, speed, recorded);
	const { used } = chosen;
	findings.push(...chosen.findings);
	const corrected = torqueWithInertia(time, speed, recorded, context);
	findings.push(...inertiaFindings(used, corrected, context));
	const full = new Map(columns);
	if (corrected) full.set('torque', corrected.torque);

	const sorting = Float64Array.from(speed);
	for (const { from, to } of used)
		sorting.set(centredMean(time, speed, from, to, SORTING_S).subarray(from, to), from);
	const rows = fullLoadRows(used, full.get('throttle'), settings.fullLoadShare);
	const width = settings.speedBinRpm ?? defaultBinWidth(sorting, rows, settings.minSamplesPerBin);
	if (settings.speedBinRpm === undefined && width !== 100)
		findings.push({
			code: 'bin_width',
			severity: 'info',
			message: `Bins of ${width} rev/min are used in place of 100, to suit the ramp and the sample rate.`,
			spans: []
		});
	const binned = binBySpeed(full, sorting, rows, width, settings.minSamplesPerBin);
	const count = binned.n.length;
	const curve = new Map(binned.columns);
	for (const code of ROOM) {
		const values = curve.get(code);
		if (values) curve.set(code, new Float64Array(count).fill(meanOver(full.get(code)!, rows)));
	}
	for (const [code, values] of derive(curve, count, context)) curve.set(code, values);
	const correcting = correct(curve, count, context);
	for (const [code, values] of correcting.columns) curve.set(code, values);
	if (count < 4)
		findings.push({
			code: 'few_bins',
			severity: 'warning',
			message: `Only ${count} speed bins of ${width} rev/min hold ${settings.minSamplesPerBin} samples or more; the figures are rough. Choose wider bins or record faster.`,
			spans: []
		});
	const places = curvePlaces(curve, binned.n, measuredRange(used, rows, sorting));
	const metrics = {
		...curveMetrics(places),
		...correctedMetrics(correcting, places, curve, context.correction)
	};
	curve.set('n', binned.n);
	return { metrics, points: [], curve: toCurve(curve), findings: [...findings, ...correcting.findings] };
}

function wholeTrace(speed: Float64Array): Ramp {
	let [lo, hi] = [Infinity, -Infinity];
	for (const value of speed) {
		if (value < lo) lo = value;
		if (value > hi) hi = value;
	}
	return { direction: 'up', from: 0, to: speed.length, rateRpmS: 0, speeds: [lo, hi] };
}

/** Settings that are given; a key that is undefined leaves the default. */
export function stated<T extends object>(settings: T): { [K in keyof T]?: NonNullable<T[K]> } {
	return Object.fromEntries(Object.entries(settings).filter(([, value]) => value !== undefined)) as {
		[K in keyof T]?: NonNullable<T[K]>;
	};
}

import type { Finding, RunContext } from '../model';
import { brakePowerKw } from '../formulas/performance';
import type { Reduced } from '../reduction/reduced';
import { median, quantile } from '../statistics/moments';
import { figure, spansWhere } from '../trace/spans';
import { thinned } from '../trace/spikes';
import { columnOf, type Trace } from '../trace/trace';
import { suggestFuelUnit } from './fuel-unit';

const BTE_SUSPECT = 0.55;
const BTE_IMPLAUSIBLE = 0.65;
const BTE_LEAST = 0.18;
const FEW_SHARE = 0.2;
/** Points below this are part load, where a low efficiency is no wonder. */
const LOADED_BMEP_KPA = 500;
const LAMBDA_APART = 0.03;
const POWER_APART = 0.01;

type Values = Record<'bte' | 'lambda_flow' | 'lambda_sensor', number[]>;

const isReducedTo = (curve: Reduced['curve']) => Object.keys(curve).length > 0;

/** Values under load: of the reduced curve or points where there are any, else of the samples above half the highest power. */
function underLoad(trace: Trace, reduced: Reduced): Values {
	const { curve } = reduced;
	if (isReducedTo(curve)) {
		const of = (code: string) => (curve[code] ?? []).map((value) => value ?? NaN);
		return { bte: of('bte'), lambda_flow: of('lambda_flow'), lambda_sensor: of('lambda_sensor') };
	}
	const power = columnOf(trace, 'power')?.values;
	const limit = power ? 0.5 * quantile(thinned(power), 0.98) : 0;
	const rows: number[] = [];
	const stride = Math.max(1, Math.floor(trace.rows / 50_000));
	for (let i = 0; i < trace.rows; i += stride) if (!power || power[i]! > limit) rows.push(i);
	const of = (code: string) => {
		const values = columnOf(trace, code)?.values;
		return values ? rows.map((row) => values[row]!) : [];
	};
	return { bte: of('bte'), lambda_flow: of('lambda_flow'), lambda_sensor: of('lambda_sensor') };
}

const known = (values: readonly number[]) => values.filter(Number.isFinite);
const percent = (value: number) => `${(100 * value).toFixed(1)} %`;

function efficiencyFindings(
	values: Values,
	trace: Trace,
	context: RunContext,
	reduced: boolean,
	bmepMax: number
): Finding[] {
	const bte = known(values.bte);
	if (bte.length === 0) return [];
	// Samples scatter; means of bins and points do not, so there the highest counts.
	const top = reduced ? bte.reduce((a, b) => Math.max(a, b)) : quantile(bte, 0.95);
	const low = reduced && top < BTE_LEAST && (context.kind === 'power_sweep' || bmepMax >= LOADED_BMEP_KPA);
	if (top <= BTE_SUSPECT && !low) return [];
	const implausible = low || top > BTE_IMPLAUSIBLE;
	// Where few stick out, a wrong unit is not the cause, but a bad reading.
	const above = bte.filter((value) => value > BTE_SUSPECT).length;
	const some =
		!low && reduced && above <= FEW_SHARE * bte.length ? ` in ${above} of ${bte.length} points` : '';
	const suggestion =
		implausible && some === ''
			? suggestFuelUnit(columnOf(trace, 'fuel_flow'), top, medianRatio(values), context.fuel)
			: null;
	const cause = suggestion
		? ` If the column “${suggestion.header}” were in ${suggestion.unit} instead of ${suggestion.mappedUnit}, it would be ${percent(suggestion.bte)}: the unit is probably wrong.`
		: some !== ''
			? ' The others are plausible: look for a bad reading of the fuel or the torque there.'
			: implausible
				? ' A unit, the heating value or a calibration is probably wrong.'
				: ' Check the fuel meter, the heating value and the torque.';
	return [
		{
			code: implausible ? 'bte_implausible' : 'bte_suspect',
			severity: 'warning',
			message: `The brake thermal efficiency ${low ? 'reaches only' : 'comes to'} ${percent(top)}${some}, ${
				low
					? 'too low for full load'
					: implausible
						? 'more than an engine can reach'
						: 'more than an engine usually reaches'
			}.${cause}`,
			spans: [],
			channel: 'fuel_flow'
		}
	];
}

/** Lambda by flow over lambda by sensor, in the middle of all pairs; NaN without both. */
function medianRatio(values: Values): number {
	return median(values.lambda_flow.map((flow, i) => flow / (values.lambda_sensor[i] ?? NaN)));
}

function lambdaFindings(values: Values): Finding[] {
	const ratio = medianRatio(values);
	if (!(Math.abs(ratio - 1) > LAMBDA_APART)) return [];
	return [
		{
			code: 'lambda_disagrees',
			severity: 'warning',
			message: `Lambda by flow (middle ${figure(median(values.lambda_flow))}) and by sensor (middle ${figure(median(values.lambda_sensor))}) are ${percent(Math.abs(ratio - 1))} apart; more than 3 % is no scatter. Check the units and meters of fuel and air, and the sensor.`,
			spans: [],
			channel: 'lambda_flow'
		}
	];
}

function powerFindings(trace: Trace): Finding[] {
	const power = columnOf(trace, 'power');
	const [speed, torque] = [columnOf(trace, 'speed')?.values, columnOf(trace, 'torque')];
	if (!power || power.index === null || !speed || !torque || torque.index === null) return [];
	const limit = 0.2 * quantile(thinned(power.values), 0.98);
	const ratios: number[] = [];
	const stride = Math.max(1, Math.floor(trace.rows / 20_000));
	for (let i = 0; i < trace.rows; i += stride)
		if (power.values[i]! > limit) ratios.push(power.values[i]! / brakePowerKw(speed[i]!, torque.values[i]!));
	const ratio = median(ratios);
	if (!(Math.abs(ratio - 1) > POWER_APART)) return [];
	return [
		{
			code: 'power_disagrees',
			severity: 'warning',
			message: `The recorded power is ${ratio.toFixed(4)} times 2π·N·T of the recorded speed and torque; more than 1 % apart. The figures use 2π·N·T; look whether the recorded power is corrected, or in another unit.`,
			spans: [],
			channel: 'power'
		}
	];
}

function fuelFindings(trace: Trace, spikes: ReadonlyMap<string, readonly number[]>): Finding[] {
	const fuel = columnOf(trace, 'fuel_flow')?.values;
	const torque = columnOf(trace, 'torque')?.values;
	if (!fuel || !torque) return [];
	const limit = 0.1 * quantile(thinned(torque), 0.98);
	if (!(limit > 0)) return [];
	const left = new Set([...(spikes.get('fuel_flow') ?? []), ...(spikes.get('torque') ?? [])]);
	const bad = (i: number) => torque[i]! > limit && fuel[i]! <= 0 && !left.has(i);
	let count = 0;
	for (let i = 0; i < trace.rows; i++) if (bad(i)) count++;
	if (count === 0) return [];
	return [
		{
			code: 'fuel_not_positive',
			severity: 'warning',
			message: `The fuel flow is at or below zero in ${count} of ${trace.rows} rows while the engine delivers torque. Check the fuel meter and its zero.`,
			spans: spansWhere(trace.time, bad, trace.rows),
			channel: 'fuel_flow'
		}
	];
}

/** Checks that need several channels or the reduced figures: efficiency, mixture, power, fuel under load. */
export function figureFindings(
	trace: Trace,
	reduced: Reduced,
	spikes: ReadonlyMap<string, readonly number[]>,
	context: RunContext
): Finding[] {
	const values = underLoad(trace, reduced);
	const isReduced = isReducedTo(reduced.curve);
	return [
		...efficiencyFindings(values, trace, context, isReduced, reduced.metrics['bmep_max']?.value ?? 0),
		...lambdaFindings(values),
		...powerFindings(trace),
		...fuelFindings(trace, spikes)
	];
}

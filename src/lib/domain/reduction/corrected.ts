import { correctionFactor, fuelPerCycleMgL, type CorrectionOutcome } from '../formulas/corrections';
import { revolutionsPerCycle } from '../formulas/performance';
import type { Correction, Finding, Metrics, RunContext } from '../model';
import { atmosphereOf, knownSources, type Columns } from '../trace/atmosphere';
import type { Places, PlacedValue } from './places';

const METHOD: Record<Exclude<Correction, 'none'>, string> = {
	sae_j1349: 'sae-j1349.1',
	iso_1585: 'iso-1585.1',
	din_70020: 'din-70020.1',
	iso_3046: 'iso-3046.1'
};

const LABEL: Record<Exclude<Correction, 'none'>, string> = {
	sae_j1349: 'SAE J1349',
	iso_1585: 'ISO 1585',
	din_70020: 'DIN 70020',
	iso_3046: 'ISO 3046-1'
};

export interface Correcting {
	/** `power_corrected`, `torque_corrected` and `correction_factor` for each row that can be corrected; empty where none can. */
	columns: Map<string, Float64Array>;
	/** Why a row is outside the method's range. */
	reasons: Map<number, string>;
	findings: Finding[];
}

const none = (findings: Finding[] = []): Correcting => ({ columns: new Map(), reasons: new Map(), findings });

/** Corrects power and torque row by row (bins of a curve, points) by the method chosen for the run. */
export function correct(columns: Columns, rows: number, context: RunContext): Correcting {
	const { correction, engine, ambient } = context;
	const power = columns.get('power');
	const torque = columns.get('torque');
	if (correction === 'none' || !power || !torque || rows === 0) return none();
	const air = atmosphereOf(columns, ambient, rows);
	const known = knownSources(columns, ambient);
	const nR = revolutionsPerCycle(engine.strokesPerCycle);
	const [fuel, speed] = [columns.get('fuel_flow'), columns.get('speed')];
	const boost = columns.get('boost_pressure') ?? columns.get('boost_pressure.1');
	const factor = new Float64Array(rows).fill(NaN);
	const reasons = new Map<number, string>();
	let refused: string | null = null;
	for (let i = 0; i < rows; i++) {
		const outcome: CorrectionOutcome = correctionFactor(correction, {
			ignition: engine.ignition,
			induction: engine.induction,
			pressureKpa: air.inletKpa[i]!,
			// Without any humidity the methods that need it must refuse, not take the air for dry.
			vapourKpa: known.humidity ? air.inletVapourKpa[i]! : NaN,
			temperatureC: air.inletC[i]!,
			fuelMgL: fuel && speed ? fuelPerCycleMgL(fuel[i]!, engine.displacementL, speed[i]!, nR) : null,
			boostRatio: boost ? boost[i]! / air.inletKpa[i]! : null
		});
		if ('refused' in outcome) refused ??= outcome.refused;
		else {
			factor[i] = outcome.factor;
			if (!outcome.inRange) reasons.set(i, outcome.reason ?? 'Outside the range of the method.');
		}
	}
	if (!factor.some(Number.isFinite))
		return none([
			{
				code: 'correction_refused',
				severity: 'warning',
				message: `No figures by the formula of ${LABEL[correction]}. ${refused ?? ''}`.trim(),
				spans: []
			}
		]);
	return {
		columns: new Map([
			['correction_factor', factor],
			['power_corrected', power.map((value, i) => value * factor[i]!)],
			['torque_corrected', torque.map((value, i) => value * factor[i]!)]
		]),
		reasons,
		findings: []
	};
}

/** The row nearest to a place, to say whether the figure there is outside the method's range. */
function reasonAt(
	{ reasons }: Correcting,
	places: Places,
	columns: Columns,
	at: PlacedValue
): string | undefined {
	if (reasons.size === 0) return undefined;
	const speed = columns.get('speed');
	const wanted = at.at.speed;
	if (!speed || wanted === undefined) return [...reasons.values()][0];
	let best = 0;
	for (let i = 1; i < speed.length; i++)
		if (Math.abs(speed[i]! - wanted) < Math.abs(speed[best]! - wanted)) best = i;
	return reasons.get(places.codes().includes('speed') ? best : 0);
}

/** Corrected figures and the factor at the corrected peak power; marked where it is outside the method's range. */
export function correctedMetrics(
	correcting: Correcting,
	places: Places,
	columns: Columns,
	correction: Correction
): Metrics {
	if (correction === 'none' || correcting.columns.size === 0) return {};
	const method = `${METHOD[correction]} ${places.method}`;
	const metrics: Metrics = {};
	const add = (code: string, unit: string, found: PlacedValue | null) => {
		if (!found) return;
		const outsideRange = reasonAt(correcting, places, columns, found);
		metrics[code] = {
			value: found.value,
			unit,
			u: found.u,
			at: found.at,
			method,
			...(outsideRange ? { outsideRange } : {})
		};
	};
	const power = places.peak('power_corrected', 1);
	add('peak_power_corrected', 'kW', power);
	add('peak_torque_corrected', 'N·m', places.peak('torque_corrected', 1));
	const factor = power ? places.valueAt('correction_factor', power) : null;
	if (power && factor) add('correction_factor', '-', { ...power, value: factor.value, u: factor.u });
	return metrics;
}

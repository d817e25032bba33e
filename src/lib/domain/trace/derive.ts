import { volumetricEfficiency } from '../formulas/breathing';
import { combinedPowerKw } from '../formulas/electrical';
import { batchAfrStoich, fuelDensityKgM3, massFlowKgH } from '../formulas/fuel';
import { airDensityKgM3 } from '../formulas/humid-air';
import {
	airFuelRatio,
	bmepKpa,
	brakePowerKw,
	brakeThermalEfficiency,
	bsfcGKwh,
	fuelEnergyFlowMjH,
	lambdaFromAfr,
	revolutionsPerCycle,
	torqueFromPowerNm
} from '../formulas/performance';
import type { RunContext } from '../model';
import { atmosphereOf, type Columns } from './atmosphere';

type Facts = Pick<RunContext, 'engine' | 'fuel' | 'ambient'>;

/** Least share of the run's highest torque under which a ratio to power says nothing: it is only noise over noise there. */
const IDLE_SHARE = 0.02;

function each(rows: number, value: (i: number) => number): Float64Array {
	const values = new Float64Array(rows);
	for (let i = 0; i < rows; i++) {
		const made = value(i);
		// A ratio to next to nothing has no value that means anything.
		values[i] = Number.isFinite(made) ? made : NaN;
	}
	return values;
}

/** Fuel mass flow: measured, else from the volume flow and the batch's density at the fuel's temperature (15 °C where unknown). */
function fuelMassFlow(columns: Columns, fuel: Facts['fuel'], rows: number): Float64Array | null {
	const measured = columns.get('fuel_flow') ?? columns.get('fuel_flow.1');
	if (measured) return measured;
	const volume = columns.get('fuel_flow_volume') ?? columns.get('fuel_flow_volume.1');
	const density = fuel.densityKgM3?.value;
	if (!volume || density === undefined) return null;
	const temperature = columns.get('fuel_temp') ?? columns.get('fuel_temp.1');
	const expansion = fuel.expansionPerK?.value;
	return each(rows, (i) => {
		const at = temperature?.[i] ?? 15;
		return massFlowKgH(volume[i]!, Number.isNaN(at) ? density : fuelDensityKgM3(density, at, expansion));
	});
}

/**
 * Every quantity that follows row by row from the columns at hand: per sample, per bin of a curve, or per point.
 * Ratios are of the row's own values, so that for bins and points they are ratios of means, never means of ratios.
 *
 * @param columns canonical channels in internal units
 * @returns the derived channels that can be made, by code; a code that was measured is not returned, except those that are
 * always computed (`bmep bsfc bte afr lambda_flow` …)
 */
export function derive(columns: Columns, rows: number, facts: Facts): Map<string, Float64Array> {
	const { engine, fuel } = facts;
	const derived = new Map<string, Float64Array>();
	const nR = revolutionsPerCycle(engine.strokesPerCycle);
	const volumeL = engine.displacementL;
	const speed = columns.get('speed');
	let torque = columns.get('torque');
	let power = columns.get('power');
	if (!torque && power && speed) {
		const recorded = power;
		torque = each(rows, (i) => torqueFromPowerNm(recorded[i]!, speed[i]!));
		derived.set('torque', torque);
	}
	if (torque && speed) {
		const [t, n] = [torque, speed];
		// Power is always 2πNT, so that one figure does not stand on two instruments; a recorded power is only compared.
		power = each(rows, (i) => brakePowerKw(n[i]!, t[i]!));
		derived.set('power', power);
	}
	if (torque) {
		const t = torque;
		derived.set(
			'bmep',
			each(rows, (i) => bmepKpa(t[i]!, volumeL, nR))
		);
	}
	const fuelFlow = fuelMassFlow(columns, fuel, rows);
	if (fuelFlow && !columns.has('fuel_flow')) derived.set('fuel_flow', fuelFlow);
	if (fuelFlow) deriveFuel(derived, rows, facts, fuelFlow, power, torque);
	const air = columns.get('air_flow') ?? columns.get('air_flow.1');
	if (air) deriveAir(derived, columns, rows, facts, air, fuelFlow);
	deriveStations(derived, columns, rows, facts);
	const electrical = columns.get('electrical_power');
	if (electrical && power) {
		const p = power;
		derived.set(
			'combined_power',
			each(rows, (i) => combinedPowerKw(p[i]!, electrical[i]!, false))
		);
	}
	return derived;
}

function deriveFuel(
	derived: Map<string, Float64Array>,
	rows: number,
	{ fuel }: Facts,
	fuelFlow: Float64Array,
	power: Float64Array | undefined,
	torque: Float64Array | undefined
): void {
	const lhv = fuel.lhvMjKg?.value;
	if (lhv !== undefined)
		derived.set(
			'fuel_energy_flow',
			each(rows, (i) => fuelEnergyFlowMjH(fuelFlow[i]!, lhv))
		);
	if (!power) return;
	const floor = IDLE_SHARE * highest(power);
	const loaded = (i: number) => power[i]! > floor && (!torque || torque[i]! > 0);
	derived.set(
		'bsfc',
		each(rows, (i) => (loaded(i) ? bsfcGKwh(fuelFlow[i]!, power[i]!) : NaN))
	);
	if (lhv !== undefined)
		derived.set(
			'bte',
			each(rows, (i) => (loaded(i) ? brakeThermalEfficiency(power[i]!, fuelFlow[i]!, lhv) : NaN))
		);
}

function highest(values: Float64Array): number {
	let most = 0;
	for (const value of values) if (value > most) most = value;
	return most;
}

function deriveAir(
	derived: Map<string, Float64Array>,
	columns: Columns,
	rows: number,
	facts: Facts,
	air: Float64Array,
	fuelFlow: Float64Array | null
): void {
	const { engine, fuel, ambient } = facts;
	if (fuelFlow) {
		const afr = each(rows, (i) => airFuelRatio(air[i]!, fuelFlow[i]!));
		derived.set('afr', afr);
		const stoich = batchAfrStoich(fuel)?.value;
		if (stoich !== undefined)
			derived.set(
				'lambda_flow',
				each(rows, (i) => lambdaFromAfr(afr[i]!, stoich))
			);
	}
	const speed = columns.get('speed');
	if (!speed) return;
	const nR = revolutionsPerCycle(engine.strokesPerCycle);
	const { inletKpa, inletC, inletVapourKpa } = atmosphereOf(columns, ambient, rows);
	const inlet = each(rows, (i) =>
		volumetricEfficiency(
			air[i]!,
			airDensityKgM3(inletKpa[i]!, inletVapourKpa[i]!, inletC[i]!),
			engine.displacementL,
			speed[i]!,
			nR
		)
	);
	if (inlet.some(Number.isFinite)) derived.set('ve_inlet', inlet);
	const [pressure, temperature] = [columns.get('manifold_pressure'), columns.get('manifold_temp')];
	if (!pressure || !temperature) return;
	// The vapour share of the inlet air is that of the plenum's.
	derived.set(
		've_manifold',
		each(rows, (i) => {
			const share = inletKpa[i]! > 0 ? inletVapourKpa[i]! / inletKpa[i]! : 0;
			const density = airDensityKgM3(pressure[i]!, pressure[i]! * share, temperature[i]!);
			return volumetricEfficiency(air[i]!, density, engine.displacementL, speed[i]!, nR);
		})
	);
}

/** How far the intake air is above the room: at the plenum where there is one measured, else at the inlet. */
function deriveStations(
	derived: Map<string, Float64Array>,
	columns: Columns,
	rows: number,
	facts: Facts
): void {
	const intake = columns.get('manifold_temp') ?? columns.get('inlet_temp');
	if (!intake) return;
	const room = atmosphereOf(columns, facts.ambient, rows).ambientC;
	const rise = each(rows, (i) => intake[i]! - room[i]!);
	if (rise.some(Number.isFinite)) derived.set('inlet_over_ambient', rise);
}

/** Codes that `derive` computes from others; a recorded column of the same name gives way. */
export const ALWAYS_COMPUTED: ReadonlySet<string> = new Set([
	'bmep',
	'bsfc',
	'bte',
	'afr',
	'lambda_flow',
	'fuel_energy_flow',
	've_inlet',
	've_manifold',
	'inlet_over_ambient',
	'combined_power',
	'electrical_energy_net'
]);

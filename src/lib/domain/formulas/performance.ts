/** Crank revolutions per working cycle: 2 for a four-stroke, 1 for a two-stroke engine. */
export function revolutionsPerCycle(strokesPerCycle: 2 | 4): 1 | 2 {
	return strokesPerCycle === 4 ? 2 : 1;
}

/**
 * Brake power `P = 2π·N·T/60 000`.
 * @param speedRpm crank speed, rev/min @param torqueNm brake torque, N·m (negative when motored)
 * @returns kW; NaN where an input is unknown. Source: definition of power.
 */
export function brakePowerKw(speedRpm: number, torqueNm: number): number {
	return (2 * Math.PI * speedRpm * torqueNm) / 60_000;
}

/**
 * Torque that a power needs at a speed: the same equation turned over.
 * @param powerKw kW @param speedRpm rev/min, above 0 @returns N·m; NaN at or below zero speed
 */
export function torqueFromPowerNm(powerKw: number, speedRpm: number): number {
	return speedRpm > 0 ? (60_000 * powerKw) / (2 * Math.PI * speedRpm) : NaN;
}

/**
 * Brake mean effective pressure `2π·n_R·T/V_d`.
 * @param torqueNm N·m @param displacementL swept volume of all cylinders, L, above 0 @param nR revolutions per cycle
 * @returns kPa; NaN without a displacement. Source: definition (work per cycle over swept volume).
 */
export function bmepKpa(torqueNm: number, displacementL: number, nR: 1 | 2): number {
	return displacementL > 0 ? (2 * Math.PI * nR * torqueNm) / displacementL : NaN;
}

/**
 * Brake specific fuel consumption `1000·ṁ_f/P`.
 * @param fuelFlowKgH kg/h @param powerKw kW @returns g/kWh; NaN where no power is delivered (it has no finite value there)
 */
export function bsfcGKwh(fuelFlowKgH: number, powerKw: number): number {
	return powerKw > 0 ? (1000 * fuelFlowKgH) / powerKw : NaN;
}

/** Fuel energy flow `ṁ_f·LHV`. @param fuelFlowKgH kg/h @param lhvMjKg net (lower) heating value, MJ/kg @returns MJ/h */
export function fuelEnergyFlowMjH(fuelFlowKgH: number, lhvMjKg: number): number {
	return fuelFlowKgH * lhvMjKg;
}

/** Fuel power `ṁ_f·LHV/3.6`. @param fuelFlowKgH kg/h @param lhvMjKg net heating value, MJ/kg @returns kW */
export function fuelPowerKw(fuelFlowKgH: number, lhvMjKg: number): number {
	return (fuelFlowKgH * lhvMjKg) / 3.6;
}

/**
 * Brake thermal efficiency: brake power over fuel power.
 * @param powerKw kW @param fuelFlowKgH kg/h @param lhvMjKg net heating value, MJ/kg
 * @returns a fraction; negative when motored; NaN where no fuel flows. Source: definition.
 */
export function brakeThermalEfficiency(powerKw: number, fuelFlowKgH: number, lhvMjKg: number): number {
	const fuelKw = fuelPowerKw(fuelFlowKgH, lhvMjKg);
	return fuelKw > 0 ? powerKw / fuelKw : NaN;
}

/** Air-fuel ratio by mass. @param dryAirFlowKgH dry air, kg/h @param fuelFlowKgH kg/h @returns –; NaN where no fuel flows */
export function airFuelRatio(dryAirFlowKgH: number, fuelFlowKgH: number): number {
	return fuelFlowKgH > 0 ? dryAirFlowKgH / fuelFlowKgH : NaN;
}

/** Lambda `AFR/AFR_st`. @param afr – @param afrStoich of the fuel burnt, – (a sensor's display: of the display) @returns – */
export function lambdaFromAfr(afr: number, afrStoich: number): number {
	return afrStoich > 0 ? afr / afrStoich : NaN;
}

/**
 * Swept volume of all cylinders.
 * @param boreMm mm @param strokeMm mm @param cylinders count @returns L
 */
export function displacementL(boreMm: number, strokeMm: number, cylinders: number): number {
	return ((Math.PI / 4) * boreMm ** 2 * strokeMm * cylinders) / 1e6;
}

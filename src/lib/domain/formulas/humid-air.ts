import { kelvin, MOLAR_MASS, R_DRY, R_VAPOUR } from './constants';

/** Mass of water per mass of dry air at equal partial pressure; 0.62195, in handbooks rounded to 0.622. */
const EPSILON = MOLAR_MASS.water / MOLAR_MASS.dryAir;
const TRIPLE_POINT_K = 273.16;

/**
 * Saturation vapour pressure over liquid water, 40 CFR 1065.645(a)(1) (Goff 1957).
 * @param temperatureC °C, 0 to 100 in the regulation; below 0 over supercooled water
 * @returns kPa; about 0.09 % below IAPWS-IF97 at 20 to 30 °C
 */
export function saturationOverWaterKpa(temperatureC: number): number {
	const t = kelvin(temperatureC);
	const log =
		10.79574 * (1 - TRIPLE_POINT_K / t) -
		5.028 * Math.log10(t / TRIPLE_POINT_K) +
		1.50475e-4 * (1 - 10 ** (-8.2969 * (t / TRIPLE_POINT_K - 1))) +
		0.42873e-3 * (10 ** (4.76955 * (1 - TRIPLE_POINT_K / t)) - 1) -
		0.2138602;
	return 10 ** log;
}

/**
 * Saturation vapour pressure over ice, 40 CFR 1065.645(a)(2) (Goff 1957).
 * @param temperatureC °C, −100 to 0 @returns kPa
 */
export function saturationOverIceKpa(temperatureC: number): number {
	const t = kelvin(temperatureC);
	const log =
		-9.096853 * (TRIPLE_POINT_K / t - 1) -
		3.566506 * Math.log10(TRIPLE_POINT_K / t) +
		0.876812 * (1 - t / TRIPLE_POINT_K) -
		0.2138602;
	return 10 ** log;
}

/**
 * Saturation vapour pressure: over water at and above 0 °C, over ice below, as 40 CFR 1065.645 has it.
 * @param temperatureC °C, −100 to 100 @returns kPa; NaN outside that range
 */
export function saturationPressureKpa(temperatureC: number): number {
	if (!(temperatureC >= -100 && temperatureC <= 100)) return NaN;
	return temperatureC < 0 ? saturationOverIceKpa(temperatureC) : saturationOverWaterKpa(temperatureC);
}

/**
 * Vapour pressure from relative humidity.
 * @param humidityPct % RH, 0 to 100 @param temperatureC °C, at the hygrometer (not at the engine's inlet)
 * @returns kPa; NaN outside the ranges
 */
export function vapourPressureKpa(humidityPct: number, temperatureC: number): number {
	if (!(humidityPct >= 0 && humidityPct <= 100)) return NaN;
	return (humidityPct / 100) * saturationPressureKpa(temperatureC);
}

/**
 * Vapour pressure carried to a place of another total pressure (a throttled inlet): the mole fraction stays, so `e_in = e·p_in/p_baro`.
 * @param vapourKpa at the barometer's place, kPa @param pressureKpa there, kPa absolute @param barometerKpa kPa absolute
 * @returns kPa
 */
export function vapourPressureAtKpa(vapourKpa: number, pressureKpa: number, barometerKpa: number): number {
	return barometerKpa > 0 ? (vapourKpa * pressureKpa) / barometerKpa : NaN;
}

/**
 * Humidity ratio `ω = ε·e/(p − e)`, ε = M_water/M_air of 40 CFR 1065.1005 (0.62195).
 * @param vapourKpa e, kPa, 0 up to below p @param pressureKpa p, kPa absolute @returns kg water per kg dry air; NaN outside the range
 */
export function humidityRatio(vapourKpa: number, pressureKpa: number): number {
	return vapourKpa >= 0 && vapourKpa < pressureKpa ? (EPSILON * vapourKpa) / (pressureKpa - vapourKpa) : NaN;
}

/** Mole fraction of water, 40 CFR 1065.645. @param vapourKpa kPa @param pressureKpa kPa absolute, above 0 @returns mol/mol */
export function waterMoleFraction(vapourKpa: number, pressureKpa: number): number {
	return pressureKpa > 0 ? vapourKpa / pressureKpa : NaN;
}

/**
 * Density of moist air as a mixture of two ideal gases, R_d 287.05 and R_v 461.5 J/(kg·K).
 * @param pressureKpa total, kPa absolute @param vapourKpa kPa (0 gives dry air) @param temperatureC °C
 * @returns kg moist air per m³; NaN where the vapour pressure is not between 0 and the total
 */
export function airDensityKgM3(pressureKpa: number, vapourKpa: number, temperatureC: number): number {
	if (!(vapourKpa >= 0 && vapourKpa <= pressureKpa)) return NaN;
	const t = kelvin(temperatureC);
	return (1000 * (pressureKpa - vapourKpa)) / (R_DRY * t) + (1000 * vapourKpa) / (R_VAPOUR * t);
}

/** Dry part of a moist air flow, `ṁ/(1+ω)`. @param moistKgH kg/h @param omega humidity ratio, kg/kg @returns kg/h */
export function dryAirFlowKgH(moistKgH: number, omega: number): number {
	return moistKgH / (1 + omega);
}

/** Moist air flow that carries a dry one, `ṁ·(1+ω)`. @param dryKgH kg/h @param omega humidity ratio, kg/kg @returns kg/h */
export function moistAirFlowKgH(dryKgH: number, omega: number): number {
	return dryKgH * (1 + omega);
}

import type { Correction, Ignition, Induction } from '../model';
import { kelvin } from './constants';

/**
 * Atmospheric corrections: `corrected = observed × factor`, for power and torque (not for BSFC or BTE). They are computed *by the formula
 * of* the standard named; conformity also needs its test conditions. T in K is °C + 273.15 and the references are 298.15 K (DIN
 * 293.15 K), so that each factor is 1 at its reference; printed forms with t + 273 differ by less than 2e-5 between 10 and 35 °C.
 */
export interface Corrected {
	factor: number;
	/** False: show the factor, mark the figure, keep it out of limits, trends and best-of. */
	inRange: boolean;
	/** Why it is outside, as a sentence. */
	reason?: string;
}

const REFERENCE_DRY_KPA = 99;
const REFERENCE_K = 298.15;

const within = (value: number, lo: number, hi: number) => value >= lo && value <= hi;
const outside = (factor: number, reason: string): Corrected => ({ factor, inRange: false, reason });
const checked = (factor: number, lo: number, hi: number, method: string): Corrected =>
	within(factor, lo, hi)
		? { factor, inRange: true }
		: outside(factor, `The factor ${factor.toFixed(4)} is outside the ${lo} to ${hi} of ${method}.`);

/**
 * SAE J1349, spark ignition, with its built-in mechanical efficiency of 85 %: `1.18·(99/p_s)·(T/298.15)^0.5 − 0.18`.
 * @param dryKpa dry inlet (else barometric) pressure, kPa: total less vapour pressure @param temperatureC inlet air, °C
 * @returns in range within 7 % of 1, 15 to 35 °C and 90 to 105 kPa dry. Source: SAE J1349 as published in several places.
 */
export function saeJ1349(dryKpa: number, temperatureC: number): Corrected {
	const factor = 1.18 * (REFERENCE_DRY_KPA / dryKpa) * Math.sqrt(kelvin(temperatureC) / REFERENCE_K) - 0.18;
	if (!within(temperatureC, 15, 35))
		return outside(
			factor,
			`The inlet air is at ${temperatureC.toFixed(1)} °C; SAE J1349 holds from 15 to 35 °C.`
		);
	if (!within(dryKpa, 90, 105))
		return outside(
			factor,
			`The dry pressure is ${dryKpa.toFixed(2)} kPa; SAE J1349 holds from 90 to 105 kPa.`
		);
	return checked(factor, 0.93, 1.07, 'SAE J1349');
}

/**
 * ISO 1585 / UN R85, spark ignition: `α_a = (99/p_s)^1.2·(T/298.15)^0.6`.
 * @param dryKpa dry pressure, kPa @param temperatureC inlet air, °C @returns in range from 0.93 to 1.07
 */
export function iso1585Spark(dryKpa: number, temperatureC: number): Corrected {
	const factor = (REFERENCE_DRY_KPA / dryKpa) ** 1.2 * (kelvin(temperatureC) / REFERENCE_K) ** 0.6;
	return checked(factor, 0.93, 1.07, 'ISO 1585 for spark ignition');
}

/**
 * Atmospheric factor `f_a` of ISO 1585 / UN R85 / 30 CFR 7.87 for compression ignition: `(99/p_s)·(T/298.15)^0.7` natural or mechanically
 * charged, `(99/p_s)^0.7·(T/298.15)^1.5` turbocharged, with or without a cooler.
 * @param dryKpa dry pressure, kPa @param temperatureC inlet air, °C
 */
export function atmosphericFactor(dryKpa: number, temperatureC: number, induction: Induction): number {
	const pressure = REFERENCE_DRY_KPA / dryKpa;
	const heat = kelvin(temperatureC) / REFERENCE_K;
	return induction === 'natural' || induction === 'mechanical'
		? pressure * heat ** 0.7
		: pressure ** 0.7 * heat ** 1.5;
}

/**
 * Engine factor `f_m = 0.036·q_c − 1.14` from q_c 40 to 65; 0.3 below, 1.2 above.
 * The lower clamp is that of 80/1269/EEC and UN R85, where the line reaches 0.3 at q_c 40. Later editions of ISO 1585 go on to
 * q_c 37.2 and hold 0.2 below it: between and below the two the factors differ.
 * @param qc corrected fuel delivery, mg per litre and cycle
 */
export function engineFactor(qc: number): number {
	if (qc < 40) return 0.3;
	return qc > 65 ? 1.2 : 0.036 * qc - 1.14;
}

/**
 * Fuel per displacement and cycle: `q = 60 000·n_R·ṁ_f[g/s]/(V_d·N)`.
 * @param fuelFlowKgH kg/h @param displacementL L @param speedRpm rev/min @param nR revolutions per cycle
 * @returns mg/(L·cycle); NaN at standstill
 */
export function fuelPerCycleMgL(
	fuelFlowKgH: number,
	displacementL: number,
	speedRpm: number,
	nR: 1 | 2
): number {
	const swept = displacementL * speedRpm;
	return swept > 0 ? (60_000 * nR * (fuelFlowKgH / 3.6)) / swept : NaN;
}

/**
 * ISO 1585 / UN R85, compression ignition: `α_c = f_a^f_m` with `q_c = q/r`.
 * @param dryKpa dry pressure, kPa @param temperatureC inlet air, °C @param fuelMgL q, `fuelPerCycleMgL`
 * @param boostRatio r: compressor outlet over inlet pressure, both absolute, at least 1; 1 where natural
 * @returns in range from 0.9 to 1.1
 */
export function iso1585Compression(
	dryKpa: number,
	temperatureC: number,
	induction: Induction,
	fuelMgL: number,
	boostRatio: number
): Corrected {
	const fm = engineFactor(fuelMgL / boostRatio);
	const factor = atmosphericFactor(dryKpa, temperatureC, induction) ** fm;
	return checked(factor, 0.9, 1.1, 'ISO 1585 for compression ignition');
}

/**
 * DIN 70020 (withdrawn; for comparison with old records): `(p_0/p)·(T/293.15)^0.5` with the **total** pressure.
 * @param totalKpa inlet (else barometric) pressure with its vapour, kPa @param temperatureC inlet air, °C
 * @param referenceKpa 101.325 by default; the standard prints 1013 mbar (101.3 kPa), 0.025 % lower
 * @returns always in range: the standard states none
 */
export function din70020(totalKpa: number, temperatureC: number, referenceKpa = 101.325): Corrected {
	return { factor: (referenceKpa / totalKpa) * Math.sqrt(kelvin(temperatureC) / 293.15), inRange: true };
}

export interface CorrectionInputs {
	ignition: Ignition;
	induction: Induction | null;
	/** At the inlet, else the barometer, kPa absolute, vapour included. */
	pressureKpa: number;
	vapourKpa: number;
	/** Inlet air, else ambient, °C; never after a cooler. */
	temperatureC: number;
	/** Compression ignition: `fuelPerCycleMgL`. */
	fuelMgL?: number | null | undefined;
	/** Compression ignition, charged: compressor outlet over inlet pressure, absolute. */
	boostRatio?: number | null | undefined;
}

/** A correction, or the sentence that says why there is none. */
export type CorrectionOutcome = Corrected | { refused: string };

const refuse = (refused: string): CorrectionOutcome => ({ refused });

function compressionIgnition(dryKpa: number, inputs: CorrectionInputs): CorrectionOutcome {
	const { induction, fuelMgL, temperatureC } = inputs;
	if (induction === null)
		return refuse(
			'ISO 1585 for compression ignition needs the induction: natural, mechanical, turbo or turbo_cooled.'
		);
	if (!(fuelMgL! > 0)) return refuse('ISO 1585 for compression ignition needs the fuel flow at this point.');
	const ratio = induction === 'natural' ? 1 : inputs.boostRatio;
	if (!(ratio! > 0))
		return refuse(
			'ISO 1585 for a charged compression-ignition engine needs the pressure at the compressor outlet.'
		);
	return iso1585Compression(dryKpa, temperatureC, induction, fuelMgL!, Math.max(1, ratio!));
}

/**
 * The factor of the method chosen for a run.
 *
 * @returns the factor with its range, or a refusal: SAE J1349 for compression ignition, α_c without induction or fuel, ISO 3046-1 (it
 * rates an engine for a site: `siteRating`), and an atmosphere that is unknown or impossible
 */
export function correctionFactor(method: Correction, inputs: CorrectionInputs): CorrectionOutcome {
	if (method === 'none') return { factor: 1, inRange: true };
	const { pressureKpa, vapourKpa, temperatureC, ignition } = inputs;
	if (!within(pressureKpa, 30, 130) || !within(temperatureC, -60, 80))
		return refuse(
			'The inlet pressure or temperature is unknown or not that of an atmosphere; enter the barometer and the air temperature.'
		);
	if (method === 'din_70020') return din70020(pressureKpa, temperatureC);
	if (!(vapourKpa >= 0 && vapourKpa < pressureKpa))
		return refuse(
			'The humidity is unknown; enter the relative humidity, since this method uses the dry pressure.'
		);
	const dryKpa = pressureKpa - vapourKpa;
	switch (method) {
		case 'sae_j1349':
			return ignition === 'compression'
				? refuse(
						'SAE J1349 in the form used here is for spark ignition; choose ISO 1585 for a compression-ignition engine.'
					)
				: saeJ1349(dryKpa, temperatureC);
		case 'iso_1585':
			return ignition === 'spark' ? iso1585Spark(dryKpa, temperatureC) : compressionIgnition(dryKpa, inputs);
		case 'iso_3046':
			return refuse(
				'ISO 3046-1 rates an engine for a site and needs its mechanical efficiency and exponents; it does not correct a run here.'
			);
	}
}

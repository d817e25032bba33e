import { volumetricEfficiency } from '../../../src/lib/domain/formulas/breathing';
import { airDensityKgM3 } from '../../../src/lib/domain/formulas/humid-air';
import * as perf from '../../../src/lib/domain/formulas/performance';
import { massFlowKgH } from '../../../src/lib/domain/formulas/fuel';
import { input, type Check, type Entry } from '../entries';

/** The entries' gas constant of dry air, 287 J/(kg·K), for our 287.05. */
const BOOK_GAS = 287.05 / 287;

/** The gas constant that 40 CFR 1065.1005 makes of its molar values, for our 287.05. */
const CFR_GAS = 287.05 / (8314.472 / 28.96559);

const v8 = (e: Entry) => {
	const torqueNm = input(e, 'load') * input(e, 'g') * input(e, 'arm');
	const speedRpm = input(e, 'n');
	const litres = perf.displacementL(1000 * input(e, 'bore'), 1000 * input(e, 'stroke'), input(e, 'cyl'));
	const fuelKgH = massFlowKgH((3.6 * input(e, 'fuel')) / input(e, 'time'), 1000 * input(e, 'sg'));
	const airKgH = 60 * input(e, 'air');
	const powerKw = perf.brakePowerKw(speedRpm, torqueNm);
	const density = airDensityKgM3(input(e, 'p'), 0, input(e, 'T') - 273.15) * BOOK_GAS;
	return {
		torque: torqueNm,
		power: powerKw,
		bmep: perf.bmepKpa(torqueNm, litres, 2),
		'fuel-flow': fuelKgH,
		bsfc: perf.bsfcGKwh(fuelKgH, powerKw),
		afr: perf.airFuelRatio(airKgH, fuelKgH),
		bte: perf.brakeThermalEfficiency(powerKw, fuelKgH, input(e, 'CV')),
		ve: volumetricEfficiency(airKgH, density, litres, speedRpm, 2)
	};
};

export const PERFORMANCE_CHECKS: readonly Check[] = [
	{
		match: /^perf-v8-(power|bmep|fuel-flow|bsfc|afr)$/,
		run: (e) => v8(e)[e.id.slice('perf-v8-'.length) as keyof ReturnType<typeof v8>]
	},
	{ match: /^perf-bmep-4-stroke$/, run: (e) => perf.bmepKpa(input(e, 'T'), input(e, 'Vd'), 2) },
	{ match: /^perf-bmep-2-stroke$/, run: (e) => perf.bmepKpa(input(e, 'T'), input(e, 'Vd'), 1) },
	{ match: /^perf-power$/, run: (e) => perf.brakePowerKw(input(e, 'n'), input(e, 'T')) },
	// At 1 kW the fuel flow in kg/h is BSFC/1000.
	{
		match: /^perf-bte$/,
		run: (e) => perf.brakeThermalEfficiency(1, input(e, 'bsfc') / 1000, input(e, 'LHV'))
	},
	{
		match: /^perf-ve-dry$/,
		run: (e) => {
			const vapour = (input(e, 'RH') * input(e, 'psat')) / 1000;
			const dry = airDensityKgM3(input(e, 'p') - vapour, 0, input(e, 'T')) * CFR_GAS;
			return volumetricEfficiency(input(e, 'mairDry'), dry, input(e, 'Vd'), input(e, 'n'), 2);
		}
	}
];

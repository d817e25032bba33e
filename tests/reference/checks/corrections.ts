import * as correct from '../../../src/lib/domain/formulas/corrections';
import { siteRating } from '../../../src/lib/domain/formulas/site-rating';
import { input, type Check, type Entry } from '../entries';

/**
 * The entries follow the printed forms, T = t + 273 over 298 (DIN: 293); ours are t + 273.15 over 298.15 (293.15). The
 * temperature handed over has the printed ratio, so that the formula is compared and not the convention.
 */
const sameRatio = (celsius: number, printed: number) =>
	((celsius + 273) / printed) * (printed + 0.15) - 273.15;
const at298 = (e: Entry) => sameRatio(input(e, 'T'), 298);

const REFERENCE_K = 298;
const site = (e: Entry) => {
	const has = (name: string) => name in e.inputs;
	const rating = siteRating(
		{
			pressureKpa: input(e, 'px'),
			temperatureK: input(e, 'Tx'),
			humidity: has('phix') ? input(e, 'phix') : 0,
			saturationKpa: has('psx') ? input(e, 'psx') : 0,
			coolantK: has('Tcx') ? input(e, 'Tcx') : REFERENCE_K
		},
		{
			pressureKpa: has('pra') ? input(e, 'pra') : has('pr') ? input(e, 'pr') : 100,
			temperatureK: has('Tra') ? input(e, 'Tra') : REFERENCE_K,
			humidity: has('phir') ? input(e, 'phir') : 0,
			saturationKpa: has('psr') ? input(e, 'psr') : 0,
			coolantK: REFERENCE_K
		},
		{ a: 1, m: input(e, 'm'), n: input(e, 'n'), s: input(e, 's') },
		input(e, 'etaM') / 100
	);
	return { ...rating, powerKw: rating.alpha * input(e, 'Pr') };
};

export const CORRECTION_CHECKS: readonly Check[] = [
	{ match: /^j1349-\d/, run: (e) => correct.saeJ1349(input(e, 'Pd'), at298(e)).factor },
	{ match: /^iso1585si-\d/, run: (e) => correct.iso1585Spark(input(e, 'Pd'), at298(e)).factor },
	{ match: /^faNA-/, run: (e) => correct.atmosphericFactor(input(e, 'Ps'), at298(e), 'natural') },
	{ match: /^faTC-/, run: (e) => correct.atmosphericFactor(input(e, 'Ps'), at298(e), 'turbo') },
	{
		match: /^din-\d/,
		run: (e) => correct.din70020(input(e, 'p') / 10, sameRatio(input(e, 'T'), 293), 101.3).factor
	},
	{ match: /^fm-(40|50|60|65|70|30|80|20)$/, run: (e) => correct.engineFactor(input(e, 'qc')) },
	{
		match: /^alpha_d-turbo$/,
		run: (e) => {
			const fuelMgL = correct.fuelPerCycleMgL(3.6 * input(e, 'fuel'), input(e, 'Vd'), input(e, 'n'), 2);
			return correct.iso1585Compression(input(e, 'Pd'), at298(e), 'turbo', fuelMgL, input(e, 'r')).factor;
		}
	},
	{ match: /^iso3046-NA-k$/, run: (e) => site(e).k },
	{ match: /^iso3046-NA-alpha$/, run: (e) => site(e).alpha },
	{ match: /^iso3046-(NA-Px|TC-)/, run: (e) => site(e).powerKw }
];

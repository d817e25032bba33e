import * as air from '../../../src/lib/domain/formulas/humid-air';
import { input, type Check } from '../entries';

const kpa = (pa: number) => pa / 1000;

export const HUMID_AIR_CHECKS: readonly Check[] = [
	{ match: /^cfr1065\.645-psat-/, run: (e) => air.saturationPressureKpa(input(e, 'T')) },
	{ match: /^psat-goff-/, run: (e) => 1000 * air.saturationPressureKpa(input(e, 'T')) },
	{
		match: /^cfr1065\.645-x-dew$/,
		run: (e) => air.waterMoleFraction(air.saturationPressureKpa(input(e, 'Tdew')), input(e, 'pabs'))
	},
	{
		match: /^cfr1065\.645-x-rh$/,
		run: (e) =>
			air.waterMoleFraction(air.vapourPressureKpa(100 * input(e, 'RH'), input(e, 'T')), input(e, 'pabs'))
	},
	// The entry gives the saturation pressure of 20 °C from the case before it.
	{
		match: /^cfr1065\.645-pscaled$/,
		run: (e) => 1000 * air.vapourPressureKpa(100 * input(e, 'RH'), 20)
	},
	{
		match: /^cfr1066\.615-humidity$/,
		run: (e) => 1000 * air.humidityRatio(input(e, 'pd') * input(e, 'RH'), input(e, 'patmos'))
	},
	{
		match: /^ashrae-Ws-50$/,
		run: (e) => air.humidityRatio(air.saturationPressureKpa(input(e, 'T')), kpa(input(e, 'p')))
	},
	{
		match: /^ashrae-v-dry-25$/,
		run: (e) => 1 / air.airDensityKgM3(kpa(input(e, 'p')), 0, input(e, 'T'))
	},
	{
		match: /^psychrolib-rho-moist$/,
		run: (e) => {
			const [w, p] = [input(e, 'W'), kpa(input(e, 'p'))];
			const vapour = (w * p) / (air.humidityRatio(p / 2, p) + w);
			return air.airDensityKgM3(p, vapour, input(e, 'T'));
		}
	}
];

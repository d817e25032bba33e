import type { Dimension } from './dimensions';

/**
 * Every unit that is read. `measure` is what the units library makes of it: a bare name where the library's own
 * constant is exact, a number with SI or exact inch/pound names where the library carries a rounded one (pound-force, psi,
 * the mercury and water columns, metric horsepower, gallon). Exact by definition: 1 in = 25.4 mm, 1 lb = 0.45359237 kg,
 * standard gravity 9.80665 m/s², so 1 lbf = 4.4482216152605 N; conventional mercury 13 595.1 kg/m³, conventional water
 * 1000 kg/m³; 1 Btu (IT) = 1055.05585262 J; 1 cal (IT) = 4.1868 J; 1 US gal = 231 in³ = 3.785411784 L.
 */
export interface UnitRow {
	dimension: Dimension;
	/** Canonical label, as it is printed. */
	unit: string;
	measure: string;
	/** Other ways it is written; case, blanks, dots, stars, hyphens and carets do not matter. */
	spellings: readonly string[];
	/** Letter case decides (mW is not MW). */
	exactCase?: true;
}

const row = (
	dimension: Dimension,
	unit: string,
	measure: string,
	spellings: readonly string[] = [],
	exactCase?: true
): UnitRow => ({ dimension, unit, measure, spellings, ...(exactCase ? { exactCase } : {}) });

export const UNIT_ROWS: readonly UnitRow[] = [
	row('time', 's', '1 s', ['sec', 'secs', 'second', 'seconds', 'sek', 'sekunden']),
	row('time', 'ms', '1 ms', ['msec', 'millisecond', 'milliseconds']),
	row('time', 'µs', '1 us', ['us', 'usec', 'microseconds']),
	row('time', 'min', '1 min', ['mins', 'minute', 'minutes', 'minuten']),
	row('time', 'h', '1 h', ['hr', 'hrs', 'hour', 'hours', 'std']),
	row('time', 'd', '1 day', ['day', 'days']),

	row('rotational_speed', 'rev/min', '1 rpm', [
		'rpm',
		'r/min',
		'1/min',
		'min-1',
		'/min',
		'U/min',
		'Umin',
		'rev per min',
		'revs/min'
	]),
	row('rotational_speed', 'krpm', '1000 rpm', ['1000 rpm', 'x1000 rpm', 'rpm x1000', 'krev/min']),
	row('rotational_speed', 'rad/s', '1 rad/s', ['radps', 'rad/sec', 'rads']),
	row('rotational_speed', 'rev/s', '60 rpm', ['rps', 'r/s', '1/s', 's-1', 'Hz', 'rev/sec']),

	row('torque', 'N·m', '1 N*m', ['Nm', 'newton metre', 'newton meter', 'newton metres', 'newton meters']),
	row('torque', 'kN·m', '1000 N*m', ['kNm']),
	row('torque', 'lbf·ft', '4.4482216152605 N*ft', [
		'lb-ft',
		'ft-lb',
		'lbf-ft',
		'ft-lbf',
		'lbs-ft',
		'ft-lbs',
		'lbft',
		'ftlb',
		'pound feet',
		'foot pounds',
		'lb.ft'
	]),
	row('torque', 'lbf·in', '4.4482216152605 N*in', ['in-lb', 'lb-in', 'in-lbf', 'in-lbs', 'inlb']),
	row('torque', 'kgf·m', '9.80665 N*m', ['kgf-m', 'kgm', 'kg-m', 'kpm', 'mkg', 'kp-m', 'mkp']),

	row('power', 'kW', '1 kW', ['kilowatt', 'kilowatts']),
	row('power', 'W', '1 W', ['watt', 'watts']),
	row('power', 'MW', '1000 kW', [], true),
	row('power', 'hp', '2446.521888393275 N*ft/s', ['bhp', 'HP', 'horsepower', 'hp(I)', 'imperial hp', 'shp']),
	row('power', 'PS', '735.49875 W', ['metric hp', 'metrichorsepower', 'cv', 'ch', 'pk', 'hp(M)']),

	row('energy_flow', 'MJ/h', '1 MJ/h', ['MJ/hr', 'MJ/hour']),
	row('energy_flow', 'kJ/s', '1 kW', ['kJ/sec']),
	row('energy_flow', 'kJ/h', '1 kJ/h', ['kJ/hr']),
	row('energy_flow', 'kJ/min', '60 kJ/h'),
	row('energy_flow', 'kcal/min', '251.208 kJ/h'),
	row('energy_flow', 'Btu/h', '1055.05585262 J/h', ['btu/hr', 'btuh']),
	row('energy_flow', 'kcal/h', '4186.8 J/h', ['kcal/hr']),

	row('energy', 'MJ', '1 MJ'),
	row('energy', 'mJ', '0.001 J', [], true),
	row('energy', 'kJ', '1 kJ'),
	row('energy', 'J', '1 J', ['joule', 'joules']),
	row('energy', 'kWh', '3.6 MJ', ['kW.h', 'kWhr']),
	row('energy', 'Wh', '3.6 kJ', ['W.h']),
	row('energy', 'Btu', '1055.05585262 J'),
	row('energy', 'kcal', '4186.8 J'),

	row('mass', 'kg', '1 kg', ['kilogram', 'kilograms']),
	row('mass', 'g', '1 g', ['gram', 'grams']),
	row('mass', 'mg', '1 mg', ['milligram', 'milligrams']),
	row('mass', 'lb', '0.45359237 kg', ['lbs', 'lbm', 'pound', 'pounds']),

	row('mass_flow', 'kg/h', '1 kg/h', ['kg/hr', 'kg/hour', 'kgph', 'kg h-1', 'kg/std']),
	row('mass_flow', 'kg/min', '1 kg/min'),
	row('mass_flow', 'kg/s', '1 kg/s', ['kg/sec', 'kgps', 'kg s-1']),
	row('mass_flow', 'g/s', '1 g/s', ['g/sec', 'gps', 'gm/s', 'gm/sec', 'g s-1']),
	row('mass_flow', 'mg/s', '1 mg/s', ['mg/sec']),
	row('mass_flow', 'g/min', '1 g/min'),
	row('mass_flow', 'g/h', '1 g/h', ['g/hr']),
	row('mass_flow', 't/h', '1000 kg/h'),
	row('mass_flow', 'lb/h', '0.45359237 kg/h', [
		'lb/hr',
		'lbs/hr',
		'lbs/h',
		'lbm/h',
		'lbm/hr',
		'pph',
		'lb/hour'
	]),
	row('mass_flow', 'lb/min', '0.45359237 kg/min', ['lbs/min', 'lbm/min']),
	row('mass_flow', 'lb/s', '0.45359237 kg/s', ['lbs/s', 'lb/sec', 'lbm/s']),

	row('volume', 'L', '1 l', ['litre', 'liter', 'litres', 'liters', 'dm3']),
	row('volume', 'mL', '0.001 l', ['cc', 'cm3', 'ccm']),
	row('volume', 'm³', '1000 l', ['m3', 'cbm']),
	row('volume', 'in³', '0.016387064 l', ['cu in', 'in3', 'cid', 'inch3']),
	row('volume', 'US gal', '3.785411784 l', ['gal', 'gallon', 'gallons']),

	row('volume_flow', 'L/h', '1 l/h', ['l/hr', 'lph', 'litre/h', 'liter/h', 'litres/h', 'l/std', 'dm3/h']),
	row('volume_flow', 'L/min', '1 l/min', ['lpm', 'litre/min', 'liter/min']),
	row('volume_flow', 'L/s', '1 l/s', ['l/sec']),
	row('volume_flow', 'mL/min', '0.001 l/min', ['cc/min', 'ccm/min', 'cm3/min', 'ccpm']),
	row('volume_flow', 'mL/s', '0.001 l/s', ['cc/s', 'cc/sec', 'cm3/s']),
	row('volume_flow', 'm³/h', '1000 l/h', ['m3/h', 'm3/hr', 'cbm/h']),
	row('volume_flow', 'm³/min', '1000 l/min', ['m3/min']),
	row('volume_flow', 'm³/s', '1000 l/s', ['m3/s', 'm3/sec']),
	row('volume_flow', 'ft³/min', '28.316846592 l/min', ['cfm', 'ft3/min', 'cu ft/min', 'cuft/min']),
	row('volume_flow', 'US gal/h', '3.785411784 l/h', ['gph', 'gal/h', 'gal/hr']),
	row('volume_flow', 'US gal/min', '3.785411784 l/min', ['gpm', 'gal/min']),

	row('pressure', 'kPa', '1 kPa', ['kilopascal']),
	row('pressure', 'Pa', '1 Pa', ['pascal']),
	row('pressure', 'hPa', '1 hPa', ['hectopascal']),
	row('pressure', 'MPa', '1000 kPa', [], true),
	row('pressure', 'bar', '1 bar'),
	row('pressure', 'mbar', '0.1 kPa', ['millibar', 'mb']),
	row('pressure', 'psi', '4.4482216152605 N/in^2', ['lbf/in2', 'lb/in2', 'lbs/in2']),
	row('pressure', 'inHg', '3.386388640341 kPa', ['inches Hg', 'inch Hg', 'in of Hg', '"Hg', 'in. Hg']),
	row('pressure', 'mmHg', '0.133322387415 kPa', ['mm of Hg']),
	row('pressure', 'torr', '0.13332236842105263 kPa'),
	row('pressure', 'inH2O', '0.24908891 kPa', ['inWC', 'in wg', 'inches H2O', 'iwc', 'inH20', '"H2O']),
	row('pressure', 'mmH2O', '9.80665 Pa', ['mmWC', 'mm wg', 'mmWS', 'mmH20', 'mm of water', 'mm of H2O']),
	row('pressure', 'cmH2O', '98.0665 Pa', ['cmWC', 'cmH20']),
	row('pressure', 'atm', '101.325 kPa', ['atmosphere', 'atmospheres']),
	row('pressure', 'kgf/cm²', '98.0665 kPa', ['kgf/cm2', 'kg/cm2', 'at', 'kp/cm2']),

	row('temperature', '°C', '1 degC', ['C', 'degC', 'deg C', 'celsius', 'grad C', '°Cel', 'oC', 'gradC']),
	row('temperature', '°F', '1 degF', ['F', 'degF', 'deg F', 'fahrenheit', 'oF']),
	row('temperature', 'K', '1 degK', ['degK', 'deg K', '°K', 'kelvin']),
	row('temperature', '°R', '1 degR', ['degR', 'rankine']),

	row('percent', '%', '1 %', [
		'pct',
		'percent',
		'% RH',
		'%RH',
		'%rF',
		'% r.F.',
		'vol%',
		'%vol',
		'Vol.-%',
		'% vol.',
		'prozent'
	]),
	row('ratio', '-', '1', ['1', 'lambda', 'λ', 'ratio', '[-]', 'none', 'dimensionless', ':1', 'kg/kg']),
	row('concentration', 'ppm', '1 ppm', [
		'ppmv',
		'vppm',
		'ppm vol',
		'ppmC1',
		'ppm C1',
		'µmol/mol',
		'umol/mol'
	]),

	row('crank_angle', '°CA', '1 deg', [
		'deg',
		'°',
		'degree',
		'degrees',
		'degCA',
		'CAD',
		'°KW',
		'grad KW',
		'°BTDC',
		'deg BTDC',
		'degBTDC',
		'CA'
	]),

	row('specific_consumption', 'g/kWh', '1 g/kW*h', ['g/(kW·h)', 'g/kW-hr', 'g/kW/h', 'g/kWhr', 'g/(kWh)']),
	row('specific_consumption', 'kg/kWh', '1000 g/kW*h', ['kg/(kW·h)', 'kg/kW-hr']),
	row('specific_consumption', 'lb/(hp·h)', '608.277387841761 g/kW*h', [
		'lb/hp-hr',
		'lb/hp-h',
		'lb/bhp-hr',
		'lbs/hp-hr',
		'lb/hph',
		'lb/(hp hour)'
	]),
	row('specific_consumption', 'g/(PS·h)', '1.35962161730390 g/kW*h', ['g/PSh', 'g/PS-h']),

	row('specific_energy', 'MJ/kg', '1 MJ/kg'),
	row('specific_energy', 'kJ/kg', '1 kJ/kg', ['J/g']),
	row('specific_energy', 'Btu/lb', '2.326 kJ/kg', ['btu/lbm']),
	row('specific_energy', 'kcal/kg', '4.1868 kJ/kg', ['cal/g']),

	row('energy_density', 'MJ/L', '1 MJ/l', ['MJ/dm3']),
	row('energy_density', 'Btu/gal', '278.716269939102 J/l'),

	row('density', 'kg/m³', '1 kg/m^3', ['kg/m3', 'g/L', 'g/l']),
	row('density', 'kg/L', '1000 kg/m^3', ['kg/l', 'g/cm3', 'g/mL', 'g/cc', 'kg/dm3', 't/m3']),

	row('inertia', 'kg·m²', '1 kg*m^2', ['kgm2', 'kg-m2']),
	row('inertia', 'lb·ft²', '0.45359237 kg*ft^2', ['lb-ft2', 'lbm-ft2']),

	row('voltage', 'V', '1 V', ['volt', 'volts', 'VDC']),
	row('voltage', 'mV', '0.001 V', [], true),
	row('current', 'A', '1 A', ['amp', 'amps', 'ampere', 'ADC']),
	row('current', 'mA', '0.001 A', [], true),

	row('velocity', 'km/h', '1 km/h', ['kph', 'kmh', 'km/hr', 'kmph']),
	row('velocity', 'mph', '1609.344 m/h', ['mi/h', 'miles/h']),
	row('velocity', 'm/s', '1 m/s', ['m/sec']),
	row('velocity', 'mm/s', '0.001 m/s', ['mm/sec']),

	row('force', 'N', '1 N', ['newton', 'newtons']),
	row('force', 'kN', '1 kN'),
	row('force', 'lbf', '4.4482216152605 N'),
	row('force', 'kgf', '9.80665 N', ['kp'])
];

/**
 * What a column of each channel is called, in English and German, in the form that `wordsOf` makes of a header: lower case, ö as
 * oe, words apart. Blanks do not matter: `oil temp` is also `OilTemp` and `oil_temp`.
 */
const NAMES: Readonly<Record<string, string>> = {
	time: 'time, zeit, t s, time s, elapsed time, elapsed, timestamp, test time, messzeit, laufzeit, relative time, clock, uhrzeit, log time',
	speed:
		'speed, engine speed, rpm, engine rpm, n, n eng, n mot, n engine, eng spd, eng speed, drehzahl, motordrehzahl, n motor, omega, rev min, 1 min, crank speed, dyno speed, shaft speed',
	torque:
		'torque, trq, engine torque, brake torque, m dyn, m d, m, m eff, drehmoment, motordrehmoment, shaft torque, dyno torque, tq, nm, lb ft, ft lb, m brake, moment, m eng, m mot, bremsmoment',
	power:
		'power, brake power, engine power, leistung, p eff, pe, bhp, kw, shaft power, motorleistung, hp, measured power',
	throttle:
		'throttle, throttle position, tps, throttle pos, pedal, pedal position, alpha, drosselklappe, dk, gaspedal, fahrpedal, throttle angle, app, accelerator, drosselklappenstellung',
	fuel_flow:
		'fuel flow, fuelrate, fuel mass flow, mf, fuel consumption, fc, kraftstoff, kraftstoffmasse, kraftstoffmassenstrom, kraftstoffverbrauch, fuel, mass of fuel, mdot fuel, mass flow fuel, m fuel, fuel mass, b, be abs, mkst',
	fuel_flow_volume:
		'fuel volume flow, fuel flow volume, kraftstoffvolumen, kraftstoffvolumenstrom, total volume of fuel, volume of fuel, fuel volume',
	air_flow:
		'air flow, airrate, air mass flow, ma, maf, luftmasse, luftmassenstrom, air mass, mdot air, m air, m luft, mass air flow, intake air flow, intake air mass flow, air, air consumption, ansaugluftmasse',
	air_flow_volume: 'air volume flow, air flow volume, luftvolumen, luftvolumenstrom, volume air flow',
	lambda_sensor:
		'lambda, lambda sensor, lambda measured, lam, lambdasonde, lambda 1, wideband, lambda exhaust sensor, uego, uego lambda',
	afr_sensor:
		'afr, air fuel ratio, a f, afr sensor, air fuel, af ratio, wideband afr, air fuel ratio measured',
	manifold_pressure:
		'map, manifold pressure, manifold absolute pressure, intake manifold pressure, inlet manifold pressure, p man, p manifold, saugrohrdruck, p saugrohr, plenum pressure, p plenum, p im',
	manifold_temp:
		'manifold temp, manifold temperature, intake manifold temp, intake manifold temperature, t saugrohr, saugrohrtemperatur, t man, t manifold, plenum temp, plenum temperature, charge temp, charge temperature, charge air temperature, mat, t im, t plenum, manifold, inlet manifold temp',
	ambient_temp:
		'ambient, ambient temp, ambient temperature, t amb, t ambient, room temp, room temperature, cell temp, cell temperature, umgebungstemperatur, t umgebung, raumtemperatur, t raum, air temp ambient, dry bulb, dry bulb temperature',
	barometer:
		'barometer, p baro, baro, barometric pressure, atmospheric pressure, p atm, p amb, ambient pressure, luftdruck, umgebungsdruck, p umgebung, baro pressure, barometerstand, p ambient',
	humidity:
		'humidity, relative humidity, rh, rel humidity, hum, luftfeuchte, feuchte, rel feuchte, relative feuchte, luftfeuchtigkeit, phi amb, rf, relative luftfeuchte',
	vapour_pressure:
		'vapour pressure, vapor pressure, water vapour pressure, water vapor pressure, dampfdruck, p vap',
	coolant_temp:
		'coolant, coolant temp, coolant temperature, ect, water temp, water temperature, t coolant, t water, kuehlmitteltemperatur, kuehlwasser, kuehlwassertemperatur, t kuehlmittel, t wasser, clt, t cool, t cw, kuehlmittel, engine coolant temperature, coolant out, coolant outlet temp',
	oil_temp:
		'oil temp, oil temperature, t oil, t oel, oeltemperatur, engine oil temp, engine oil temperature, oil sump temp',
	oil_pressure: 'oil pressure, p oil, p oel, oeldruck, oil press, engine oil pressure',
	fuel_temp: 'fuel temp, fuel temperature, t fuel, t kraftstoff, kraftstofftemperatur',
	fuel_pressure:
		'fuel pressure, p fuel, kraftstoffdruck, p kraftstoff, fuel rail pressure, rail pressure, raildruck, fuel press',
	exhaust_temp:
		'egt, exhaust temp, exhaust temperature, t exh, exhaust gas temperature, exhaust gas temp, temperature exhaust manifold, abgastemperatur, abgastemp, t abgas, t exhaust, exhaust, exhaust manifold temp, exhaust manifold temperature, turbine inlet temperature',
	exhaust_pressure:
		'exhaust pressure, exhaust back pressure, back pressure, p exh, abgasgegendruck, p abgas, ebp, abgasdruck, exhaust manifold pressure',
	ignition_advance:
		'ignition, ignition advance, ignition timing, spark advance, spark, ign, ign adv, zuendwinkel, zuendzeitpunkt, zzp, spark timing, advance, ignition angle, zw',
	knock: 'knock, knock level, knock intensity, klopfen, knock signal, knk',
	co2: 'co2, carbon dioxide',
	co: 'co, carbon monoxide',
	o2: 'o2, oxygen, sauerstoff',
	hc: 'hc, thc, hydrocarbons, uhc',
	nox: 'nox',
	turbo_speed:
		'turbo speed, turbocharger speed, turbine speed, n turbo, ntc, n atl, turbo rpm, laderdrehzahl, atl drehzahl',
	electrical_power:
		'electrical power, electric power, p el, elektrische leistung, p elec, motor power electrical, inverter power, dc power, e power, mgu power, elektr leistung, machine power',
	state_of_charge: 'soc, state of charge, battery soc, ladezustand',
	blowby: 'blowby, blow by flow, crankcase flow',
	vibration: 'vibration, vib, vibration level, schwingung',
	bsfc: 'bsfc, be, specific fuel consumption, sfc, brake specific fuel consumption, spez verbrauch, spezifischer kraftstoffverbrauch',
	bmep: 'bmep, pme, p mi, brake mean effective pressure, mitteldruck',
	bte: 'bte, brake thermal efficiency, eta e, thermal efficiency, wirkungsgrad'
};

const NUMBERED = 'A numbered station is a custom of each laboratory; say where it is taken.';

/** Names that are a custom rather than a definition: worth less, with what is to be asked. */
const CUSTOMS: readonly { code: string; names: string; atMost: number; because?: string }[] = [
	{
		code: 'boost_pressure',
		names:
			'boost, boost pressure, ladedruck, charge pressure, charge air pressure, compressor outlet pressure, p boost, ladedruck abs',
		atMost: 0.75,
		because: 'Boost may be taken before the cooler or at the plenum; the header does not say which.'
	},
	{
		code: 'inlet_pressure',
		names:
			'inlet pressure, intake pressure, air inlet pressure, compressor inlet pressure, p inlet, intake depression, ansaugdruck, p ansaug',
		atMost: 0.85
	},
	{
		code: 'inlet_temp',
		names:
			'inlet temp, inlet temperature, intake air temp, intake air temperature, inlet air temp, inlet air temperature, iat, air inlet temperature, ansauglufttemperatur, t ansaug, t inlet, compressor inlet temperature, intake temp, intake temperature, air intake temp',
		atMost: 0.85
	},
	{ code: 'inlet_pressure', names: 'p 1', atMost: 0.4, because: NUMBERED },
	{ code: 'inlet_temp', names: 't 1', atMost: 0.4, because: NUMBERED },
	{ code: 'boost_pressure', names: 'p 2', atMost: 0.4, because: NUMBERED },
	{ code: 'manifold_temp', names: 't 2', atMost: 0.4, because: NUMBERED },
	{ code: 'exhaust_pressure', names: 'p 3', atMost: 0.4, because: NUMBERED },
	{ code: 'exhaust_temp', names: 't 3', atMost: 0.4, because: NUMBERED },
	{
		code: 'vehicle_speed',
		names: 'vehicle speed, road speed, roller speed, v, geschwindigkeit, fahrgeschwindigkeit, v veh',
		atMost: 0.9
	},
	{
		code: 'battery_voltage',
		names: 'battery voltage, u bat, v bat, dc voltage, u dc, batteriespannung, bus voltage, voltage',
		atMost: 0.9
	},
	{
		code: 'battery_current',
		names: 'battery current, i bat, dc current, i dc, batteriestrom, bus current, current',
		atMost: 0.9
	}
];

const TEMP = 'temp temperature t temperatur';
const PRESS = 'pressure press p druck';
const FUEL = 'fuel kraftstoff kst benzin diesel';
const FLOW = 'flow rate consumption mass durchfluss massenstrom verbrauch masse volume volumenstrom';

/** Words that together say it: one of each group must be there. */
const WORDS: readonly (readonly [code: string, atMost: number, ...groups: string[]])[] = [
	['time', 0.7, 'time zeit'],
	['fuel_flow', 0.85, FUEL, FLOW],
	['air_flow', 0.85, 'air luft airflow', FLOW],
	['manifold_pressure', 0.85, 'manifold saugrohr plenum', PRESS],
	['manifold_temp', 0.85, 'manifold saugrohr plenum', TEMP],
	['coolant_temp', 0.85, 'coolant water kuehlwasser kuehlmittel', TEMP],
	['oil_temp', 0.85, 'oil oel', TEMP],
	['oil_pressure', 0.85, 'oil oel', PRESS],
	['fuel_temp', 0.85, FUEL, TEMP],
	['fuel_pressure', 0.85, FUEL + ' rail', PRESS],
	['exhaust_temp', 0.85, 'exhaust exh egt abgas', TEMP + ' egt']
];

/** Names that look like a channel and are not one: why, and what to do. */
const NOT_A_CHANNEL: readonly (readonly [names: string, because: string])[] = [
	[
		'phi, eqr, equivalence ratio, equivalence, fuel air equivalence ratio',
		'An equivalence ratio is 1/lambda; map it only after turning it over.'
	],
	[
		'load, brake load, dynamometer load, scale, weight, last',
		'A brake load becomes torque only with the length of its arm; give the torque.'
	],
	[
		'injected fuel mass, injected mass, fuel per stroke, fuel mass per stroke, einspritzmenge',
		'An injected mass is an amount per stroke, not a flow.'
	],
	[
		'absolute humidity, specific humidity, humidity ratio, moisture',
		'This is not relative humidity; give relative humidity or vapour pressure.'
	]
];

export interface NamedChannel {
	code: string;
	/** How sure the name alone makes it, 0–1. */
	score: number;
	/** The whole header is a known name, not only words of one. */
	exact: boolean;
	because?: string;
}

const joined = (name: string) => name.replaceAll(' ', '');
const listOf = (names: string) => names.split(', ').map(joined);

const EXACT = new Map<string, NamedChannel>();
for (const [code, names] of Object.entries(NAMES))
	for (const name of listOf(names)) EXACT.set(name, { code, score: 0.95, exact: true });
for (const { code, names, atMost, because } of CUSTOMS)
	for (const name of listOf(names))
		EXACT.set(name, { code, score: atMost, exact: true, ...(because ? { because } : {}) });

const NOT = new Map(
	NOT_A_CHANNEL.flatMap(([names, because]) => listOf(names).map((name) => [name, because]))
);

/** Why these words name no channel although they look like one; null where they may. */
export const noChannelBecause = (words: readonly string[]): string | null => NOT.get(words.join('')) ?? null;

/** The channels that these words may name, the surest first. */
export function namedBy(words: readonly string[]): NamedChannel[] {
	const exact = EXACT.get(words.join(''));
	const found: NamedChannel[] = exact ? [exact] : [];
	for (const [code, atMost, ...groups] of WORDS)
		if (groups.every((group) => group.split(' ').some((word) => words.includes(word))))
			found.push({ code, score: words.length <= 4 ? atMost : Math.min(atMost, 0.7), exact: false });
	return found.sort((a, b) => b.score - a.score);
}

/**
 * What a column of each channel is called, in English and German, as whole header (`exact`) or as the words it must hold
 * (`words`: every group needs one of its words). Written in the form `wordsOf` makes of a header: lower case, no accents (ö → oe), words apart.
 */
export interface AliasRow {
	code: string;
	exact: readonly string[];
	words?: readonly (readonly string[])[];
	/** Most that the name alone is worth, where the name is a custom and not a definition; default 0.95. */
	atMost?: number;
	because?: string;
}

const TEMP = ['temp', 'temperature', 't', 'temperatur'];
const PRESS = ['pressure', 'press', 'p', 'druck'];
const FUEL = ['fuel', 'kraftstoff', 'kst', 'benzin', 'diesel'];
const AIR = ['air', 'luft', 'airflow'];
const FLOW = [
	'flow',
	'rate',
	'consumption',
	'mass',
	'durchfluss',
	'massenstrom',
	'verbrauch',
	'masse',
	'volume',
	'volumenstrom'
];

const NUMBERED = 'A numbered station is a custom of each laboratory; say where it is taken.';

export const ALIASES: readonly AliasRow[] = [
	{
		code: 'time',
		exact: [
			'time',
			'zeit',
			't s',
			'time s',
			'elapsed time',
			'elapsed',
			'timestamp',
			'time stamp',
			'test time',
			'messzeit',
			'laufzeit',
			'relative time',
			'clock',
			'uhrzeit',
			'log time'
		]
	},
	{ code: 'time', exact: [], words: [['time', 'zeit']], atMost: 0.7 },
	{
		code: 'speed',
		exact: [
			'speed',
			'engine speed',
			'rpm',
			'engine rpm',
			'n',
			'n eng',
			'n mot',
			'n engine',
			'eng spd',
			'engspd',
			'eng speed',
			'drehzahl',
			'motordrehzahl',
			'n motor',
			'omega',
			'rev min',
			'1 min',
			'crank speed',
			'dyno speed',
			'nmot',
			'neng',
			'shaft speed'
		]
	},
	{
		code: 'torque',
		exact: [
			'torque',
			'trq',
			'engine torque',
			'brake torque',
			'm dyn',
			'm d',
			'md',
			'm',
			'm eff',
			'drehmoment',
			'motordrehmoment',
			'shaft torque',
			'dyno torque',
			'tq',
			'nm',
			'lb ft',
			'ft lb',
			'm brake',
			'moment',
			'm eng',
			'm mot',
			'bremsmoment'
		]
	},
	{
		code: 'power',
		exact: [
			'power',
			'brake power',
			'engine power',
			'leistung',
			'p eff',
			'pe',
			'p e',
			'bhp',
			'kw',
			'shaft power',
			'motorleistung',
			'hp',
			'measured power'
		]
	},
	{
		code: 'throttle',
		exact: [
			'throttle',
			'throttle position',
			'tps',
			'throttle pos',
			'pedal',
			'pedal position',
			'alpha',
			'drosselklappe',
			'dk',
			'gaspedal',
			'fahrpedal',
			'throttle angle',
			'app',
			'accelerator',
			'drosselklappenstellung'
		]
	},
	{
		code: 'fuel_flow',
		exact: [
			'fuel flow',
			'fuelrate',
			'fuel rate',
			'fuelflow',
			'fuel mass flow',
			'mf',
			'm f',
			'fuel consumption',
			'fc',
			'kraftstoff',
			'kraftstoffmasse',
			'kraftstoffmassenstrom',
			'kraftstoffverbrauch',
			'fuel',
			'mass of fuel',
			'mdot fuel',
			'mass flow fuel',
			'm fuel',
			'fuel mass',
			'b',
			'be abs',
			'mkst',
			'm kst'
		]
	},
	{ code: 'fuel_flow', exact: [], words: [FUEL, FLOW], atMost: 0.85 },
	{
		code: 'fuel_flow_volume',
		exact: [
			'fuel volume flow',
			'fuel flow volume',
			'kraftstoffvolumen',
			'kraftstoffvolumenstrom',
			'total volume of fuel',
			'volume of fuel',
			'fuel volume'
		]
	},
	{
		code: 'air_flow',
		exact: [
			'air flow',
			'airrate',
			'air rate',
			'airflow',
			'air mass flow',
			'ma',
			'm a',
			'maf',
			'luftmasse',
			'luftmassenstrom',
			'air mass',
			'mdot air',
			'm air',
			'm luft',
			'mass air flow',
			'intake air flow',
			'intake air mass flow',
			'air',
			'air consumption',
			'ansaugluftmasse'
		]
	},
	{ code: 'air_flow', exact: [], words: [AIR, FLOW], atMost: 0.85 },
	{
		code: 'air_flow_volume',
		exact: ['air volume flow', 'air flow volume', 'luftvolumen', 'luftvolumenstrom', 'volume air flow']
	},
	{
		code: 'lambda_sensor',
		exact: [
			'lambda',
			'lambda sensor',
			'lambda measured',
			'lam',
			'lambdasonde',
			'lambda 1',
			'wideband',
			'lambda exhaust sensor',
			'uego',
			'uego lambda'
		]
	},
	{
		code: 'afr_sensor',
		exact: [
			'afr',
			'air fuel ratio',
			'a f',
			'afr sensor',
			'air fuel',
			'af ratio',
			'wideband afr',
			'air fuel ratio measured'
		]
	},

	{
		code: 'manifold_pressure',
		exact: [
			'map',
			'manifold pressure',
			'manifold absolute pressure',
			'intake manifold pressure',
			'inlet manifold pressure',
			'p man',
			'p manifold',
			'saugrohrdruck',
			'p saugrohr',
			'plenum pressure',
			'p plenum',
			'p im',
			'pman'
		]
	},
	{ code: 'manifold_pressure', exact: [], words: [['manifold', 'saugrohr', 'plenum'], PRESS], atMost: 0.9 },
	{
		code: 'manifold_temp',
		exact: [
			'manifold temp',
			'manifold temperature',
			'intake manifold temp',
			'intake manifold temperature',
			't saugrohr',
			'saugrohrtemperatur',
			't man',
			't manifold',
			'plenum temp',
			'plenum temperature',
			'charge temp',
			'charge temperature',
			'charge air temperature',
			'mat',
			't im',
			't plenum',
			'manifold',
			'inlet manifold temp'
		]
	},
	{ code: 'manifold_temp', exact: [], words: [['manifold', 'saugrohr', 'plenum'], TEMP], atMost: 0.9 },
	{
		code: 'boost_pressure',
		exact: [
			'boost',
			'boost pressure',
			'ladedruck',
			'charge pressure',
			'charge air pressure',
			'compressor outlet pressure',
			'p boost',
			'ladedruck abs',
			'pboost'
		],
		atMost: 0.75,
		because: 'Boost may be taken before the cooler or at the plenum; the header does not say which.'
	},
	{
		code: 'inlet_pressure',
		exact: [
			'inlet pressure',
			'intake pressure',
			'air inlet pressure',
			'compressor inlet pressure',
			'p inlet',
			'intake depression',
			'ansaugdruck',
			'p ansaug'
		],
		atMost: 0.85
	},
	{
		code: 'inlet_temp',
		exact: [
			'inlet temp',
			'inlet temperature',
			'intake air temp',
			'intake air temperature',
			'inlet air temp',
			'inlet air temperature',
			'iat',
			'air inlet temperature',
			'ansauglufttemperatur',
			't ansaug',
			't inlet',
			'compressor inlet temperature',
			'intake temp',
			'intake temperature',
			'air intake temp'
		],
		atMost: 0.85
	},
	{
		code: 'ambient_temp',
		exact: [
			'ambient',
			'ambient temp',
			'ambient temperature',
			't amb',
			't ambient',
			'tamb',
			'room temp',
			'room temperature',
			'cell temp',
			'cell temperature',
			'umgebungstemperatur',
			't umgebung',
			'raumtemperatur',
			't raum',
			'air temp ambient',
			'dry bulb',
			'dry bulb temperature'
		]
	},
	{
		code: 'barometer',
		exact: [
			'barometer',
			'p baro',
			'baro',
			'barometric pressure',
			'atmospheric pressure',
			'p atm',
			'p amb',
			'ambient pressure',
			'patm',
			'pamb',
			'pbaro',
			'luftdruck',
			'umgebungsdruck',
			'p umgebung',
			'baro pressure',
			'barometerstand',
			'p ambient'
		]
	},
	{
		code: 'humidity',
		exact: [
			'humidity',
			'relative humidity',
			'rh',
			'rel humidity',
			'hum',
			'r h',
			'luftfeuchte',
			'feuchte',
			'rel feuchte',
			'relative feuchte',
			'luftfeuchtigkeit',
			'phi amb',
			'rf',
			'r f',
			'relative luftfeuchte'
		]
	},
	{
		code: 'vapour_pressure',
		exact: [
			'vapour pressure',
			'vapor pressure',
			'water vapour pressure',
			'water vapor pressure',
			'dampfdruck',
			'p vap'
		]
	},

	{ code: 'inlet_pressure', exact: ['p 1', 'p1'], atMost: 0.4, because: NUMBERED },
	{ code: 'inlet_temp', exact: ['t 1', 't1'], atMost: 0.4, because: NUMBERED },
	{ code: 'boost_pressure', exact: ['p 2', 'p2'], atMost: 0.4, because: NUMBERED },
	{ code: 'manifold_temp', exact: ['t 2', 't2'], atMost: 0.4, because: NUMBERED },
	{ code: 'exhaust_pressure', exact: ['p 3', 'p3'], atMost: 0.4, because: NUMBERED },
	{ code: 'exhaust_temp', exact: ['t 3', 't3'], atMost: 0.4, because: NUMBERED },

	{
		code: 'coolant_temp',
		exact: [
			'coolant',
			'coolant temp',
			'coolant temperature',
			'ect',
			'water temp',
			'water temperature',
			't coolant',
			't water',
			'kuehlmitteltemperatur',
			'kuehlwasser',
			'kuehlwassertemperatur',
			't kuehlmittel',
			't wasser',
			'clt',
			't cool',
			't cw',
			'kuehlmittel',
			'engine coolant temperature',
			'coolant out',
			'coolant outlet temp'
		]
	},
	{
		code: 'coolant_temp',
		exact: [],
		words: [['coolant', 'water', 'kuehlwasser', 'kuehlmittel'], TEMP],
		atMost: 0.85
	},
	{
		code: 'oil_temp',
		exact: [
			'oil temp',
			'oil temperature',
			't oil',
			't oel',
			'oeltemperatur',
			'oiltemp',
			'engine oil temp',
			'engine oil temperature',
			'toil',
			'oil sump temp'
		]
	},
	{
		code: 'oil_pressure',
		exact: [
			'oil pressure',
			'p oil',
			'p oel',
			'oeldruck',
			'oil press',
			'oilpressure',
			'engine oil pressure',
			'poil'
		]
	},
	{
		code: 'fuel_temp',
		exact: ['fuel temp', 'fuel temperature', 't fuel', 't kraftstoff', 'kraftstofftemperatur', 'tfuel']
	},
	{
		code: 'fuel_pressure',
		exact: [
			'fuel pressure',
			'p fuel',
			'kraftstoffdruck',
			'p kraftstoff',
			'fuel rail pressure',
			'rail pressure',
			'raildruck',
			'fuel press'
		]
	},
	{
		code: 'exhaust_temp',
		exact: [
			'egt',
			'exhaust temp',
			'exhaust temperature',
			't exh',
			'exhaust gas temperature',
			'exhaust gas temp',
			'temperature exhaust manifold',
			'texh',
			'abgastemperatur',
			'abgastemp',
			't abgas',
			't exhaust',
			'exhaust',
			'exhaust manifold temp',
			'exhaust manifold temperature',
			'turbine inlet temperature'
		]
	},
	{
		code: 'exhaust_temp',
		exact: [],
		words: [
			['exhaust', 'exh', 'egt', 'abgas'],
			[...TEMP, 'egt']
		],
		atMost: 0.85
	},
	{ code: 'oil_temp', exact: [], words: [['oil', 'oel'], TEMP], atMost: 0.85 },
	{ code: 'oil_pressure', exact: [], words: [['oil', 'oel'], PRESS], atMost: 0.85 },
	{ code: 'fuel_temp', exact: [], words: [FUEL, TEMP], atMost: 0.85 },
	{ code: 'fuel_pressure', exact: [], words: [[...FUEL, 'rail'], PRESS], atMost: 0.85 },
	{
		code: 'exhaust_pressure',
		exact: [
			'exhaust pressure',
			'exhaust back pressure',
			'exhaust backpressure',
			'back pressure',
			'p exh',
			'abgasgegendruck',
			'p abgas',
			'ebp',
			'abgasdruck',
			'exhaust manifold pressure'
		]
	},
	{
		code: 'ignition_advance',
		exact: [
			'ignition',
			'ignition advance',
			'ignition timing',
			'spark advance',
			'spark',
			'ign',
			'ign adv',
			'zuendwinkel',
			'zuendzeitpunkt',
			'zzp',
			'spark timing',
			'advance',
			'ignition angle',
			'zw'
		]
	},
	{ code: 'knock', exact: ['knock', 'knock level', 'knock intensity', 'klopfen', 'knock signal', 'knk'] },
	{ code: 'co2', exact: ['co2', 'co 2', 'carbon dioxide'] },
	{ code: 'co', exact: ['co', 'carbon monoxide'] },
	{ code: 'o2', exact: ['o2', 'o 2', 'oxygen', 'sauerstoff'] },
	{ code: 'hc', exact: ['hc', 'thc', 'hydrocarbons', 'uhc'] },
	{ code: 'nox', exact: ['nox', 'no x', 'n ox'] },
	{
		code: 'turbo_speed',
		exact: [
			'turbo speed',
			'turbocharger speed',
			'turbine speed',
			'n turbo',
			'ntc',
			'n tc',
			'n atl',
			'turbo rpm',
			'laderdrehzahl',
			'atl drehzahl'
		]
	},
	{
		code: 'vehicle_speed',
		exact: [
			'vehicle speed',
			'road speed',
			'roller speed',
			'v',
			'geschwindigkeit',
			'fahrgeschwindigkeit',
			'v veh'
		],
		atMost: 0.9
	},
	{
		code: 'electrical_power',
		exact: [
			'electrical power',
			'electric power',
			'p el',
			'pel',
			'elektrische leistung',
			'p elec',
			'motor power electrical',
			'inverter power',
			'dc power',
			'e power',
			'mgu power',
			'elektr leistung',
			'machine power'
		]
	},
	{
		code: 'battery_voltage',
		exact: [
			'battery voltage',
			'u bat',
			'ubat',
			'v bat',
			'vbat',
			'dc voltage',
			'u dc',
			'batteriespannung',
			'bus voltage',
			'voltage'
		],
		atMost: 0.9
	},
	{
		code: 'battery_current',
		exact: [
			'battery current',
			'i bat',
			'ibat',
			'dc current',
			'i dc',
			'batteriestrom',
			'bus current',
			'current'
		],
		atMost: 0.9
	},
	{ code: 'state_of_charge', exact: ['soc', 'state of charge', 'battery soc', 'ladezustand'] },
	{ code: 'blowby', exact: ['blowby', 'blow by', 'blow by flow', 'crankcase flow'] },
	{ code: 'vibration', exact: ['vibration', 'vib', 'vibration level', 'schwingung'] },
	{
		code: 'bsfc',
		exact: [
			'bsfc',
			'be',
			'b e',
			'specific fuel consumption',
			'sfc',
			'brake specific fuel consumption',
			'spez verbrauch',
			'spezifischer kraftstoffverbrauch'
		]
	},
	{ code: 'bmep', exact: ['bmep', 'pme', 'p me', 'p mi', 'brake mean effective pressure', 'mitteldruck'] },
	{ code: 'bte', exact: ['bte', 'brake thermal efficiency', 'eta e', 'thermal efficiency', 'wirkungsgrad'] }
];

/** Names that look like a channel and are not one: why, and what to do. */
export const NOT_A_CHANNEL: readonly { words: readonly string[]; because: string }[] = [
	{
		words: ['phi', 'eqr', 'equivalence ratio', 'equivalence', 'fuel air equivalence ratio'],
		because: 'An equivalence ratio is 1/lambda; map it only after turning it over.'
	},
	{
		words: ['load', 'brake load', 'dynamometer load', 'scale', 'weight', 'last'],
		because: 'A brake load becomes torque only with the length of its arm; give the torque.'
	},
	{
		words: [
			'injected fuel mass',
			'injected mass',
			'fuel per stroke',
			'fuel mass per stroke',
			'einspritzmenge'
		],
		because: 'An injected mass is an amount per stroke, not a flow.'
	},
	{
		words: ['absolute humidity', 'specific humidity', 'humidity ratio', 'moisture'],
		because: 'This is not relative humidity; give relative humidity or vapour pressure.'
	}
];

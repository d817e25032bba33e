/**
 * Figures in the units that a reader prefers. Values are kept and answered in internal units everywhere; only what is printed
 * on a screen passes through here. The factors stand here and not in the units library, so that a page need not carry that;
 * a test holds the two together, and both to NIST SP 811.
 */
export type UnitSystem = 'si' | 'us';

interface Custom {
	unit: string;
	/** How many internal units one of these is. */
	size: number;
	/** The internal value of this unit's zero: 0 °F is −17.8 °C. */
	zero?: number;
	/** Decimals added, or taken away, so that a step of the last one stays about as large. */
	moreDecimals?: number;
}

/** By internal unit. What is not here is read alike by all: rev/min, s, %, lambda, MJ, V, A. */
const US: Readonly<Record<string, Custom>> = {
	kW: { unit: 'hp', size: 0.745_699_871_582_270_2 },
	'N·m': { unit: 'lbf·ft', size: 1.355_817_948_331_4 },
	kPa: { unit: 'psi', size: 6.894_757_293_168_361, moreDecimals: 1 },
	'°C': { unit: '°F', size: 5 / 9, zero: -160 / 9 },
	K: { unit: '°F', size: 5 / 9 },
	kg: { unit: 'lb', size: 0.453_592_37 },
	'kg/h': { unit: 'lb/h', size: 0.453_592_37 },
	'g/kWh': { unit: 'lb/(hp·h)', size: 608.277_387_841_761, moreDecimals: 3 },
	L: { unit: 'in³', size: 0.016_387_064, moreDecimals: -2 },
	'L/h': { unit: 'US gal/h', size: 3.785_411_784 },
	'km/h': { unit: 'mph', size: 1.609_344 }
};
/** A barometer is read in inches of mercury (conventional, 13 595.1 kg/m³). */
const BAROMETER: Custom = { unit: 'inHg', size: 3.386_388_640_341, moreDecimals: 1 };

interface Shown {
	unit: string;
	value(internal: number): number;
	/** A difference, a scatter or an uncertainty: scaled, and never moved to another zero. */
	difference(internal: number): number;
	moreDecimals: number;
}

const same = (value: number) => value;

/**
 * How a quantity is shown to this reader.
 *
 * @param code of the channel or metric: a standard deviation is a difference, and a barometer has its own custom
 * @param unit the internal unit, as labels print it
 */
export function shownAs(system: UnitSystem, code: string, unit: string): Shown {
	const custom = system === 'us' ? customOf(code, unit) : undefined;
	if (!custom) return { unit, value: same, difference: same, moreDecimals: 0 };
	const { size, zero = 0, moreDecimals = 0 } = custom;
	const difference = (internal: number) => internal / size;
	const isDifference = code.startsWith('sd_');
	const value = isDifference ? difference : (internal: number) => (internal - zero) / size;
	return { unit: custom.unit, value, difference, moreDecimals };
}

function customOf(code: string, unit: string): Custom | undefined {
	if (unit === 'kPa' && /(^|_)barometer$/.test(code)) return BAROMETER;
	return US[unit];
}

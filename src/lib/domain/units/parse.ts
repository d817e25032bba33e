import Qty from 'js-quantities';
import { DIMENSIONS, type Dimension } from './dimensions';
import { UNIT_ROWS, type UnitRow } from './table';

/** How a pressure's unit says that it is measured: from a perfect vacuum, or from the air outside. */
type PressureReference = 'absolute' | 'gauge';

export interface Unit {
	/** Canonical label, e.g. `lbf·ft`. */
	unit: string;
	dimension: Dimension;
	/** Set where the unit itself says it: psia, psig, bar(g), `kPa abs`. */
	reference?: PressureReference;
	/** A value in this unit → the dimension's internal unit (`DIMENSIONS`). Gauge stays gauge: only a barometer makes it absolute. */
	toInternal(value: number): number;
	/** Back from the internal unit. */
	fromInternal(value: number): number;
	/** A difference of two values (a rise, a tolerance, an uncertainty): the factor alone, never a temperature's offset. */
	differenceToInternal(difference: number): number;
}

/** °C at 0 of the scale, exact by definition of the scales. */
const ZERO_IN_CELSIUS: Record<string, number> = { '°C': 0, K: -273.15, '°F': -160 / 9, '°R': -273.15 };

function makeUnit(row: UnitRow): Unit {
	const internal = DIMENSIONS[row.dimension];
	// Fifteen digits drop the library's last-bit noise (3.5999999999999996 for g/s), so that whole factors are whole.
	const factor =
		row.unit === internal.unit ? 1 : Number(Qty(row.measure).to(internal.measure).scalar.toPrecision(15));
	const base = { unit: row.unit, dimension: row.dimension, differenceToInternal: (d: number) => d * factor };
	if (row.unit === '°F')
		// (F − 32)/1.8 rather than a rounded offset, so that 77 °F is 25 °C exactly.
		return { ...base, toInternal: (v) => (v - 32) / 1.8, fromInternal: (v) => v * 1.8 + 32 };
	const offset = row.dimension === 'temperature' ? (ZERO_IN_CELSIUS[row.unit] ?? 0) : 0;
	return { ...base, toInternal: (v) => v * factor + offset, fromInternal: (v) => (v - offset) / factor };
}

/** One spelling for the many ways a character arrives: mojibake, superscripts, middle dots, odd blanks. */
function clean(text: string): string {
	return text
		.replace(/[º˚]/g, '°')
		.replace(/Â/g, '')
		.replace(/\uFFFD/g, '°')
		.normalize('NFKC')
		.replace(/μ/g, 'µ')
		.replace(/\s+/g, ' ')
		.trim();
}

const keyOf = (text: string) =>
	clean(text)
		.replace(/[\s·∙•⋅⋆×*^._\-−–]/g, '')
		.replace(/µ/g, 'u');

const exact = new Map<string, Unit>();
const anyCase = new Map<string, Unit>();
for (const row of UNIT_ROWS) {
	const unit = makeUnit(row);
	for (const spelling of [row.unit, ...row.spellings]) {
		const key = keyOf(spelling);
		if (key === '') continue;
		if (!exact.has(key)) exact.set(key, unit);
		if (!row.exactCase && !anyCase.has(key.toLowerCase())) anyCase.set(key.toLowerCase(), unit);
	}
}
const DIMENSIONLESS = makeUnit(UNIT_ROWS.find((row) => row.unit === '-')!);

function lookUp(text: string): Unit | null {
	if (/^[-–—−]+$/.test(text)) return DIMENSIONLESS;
	const key = keyOf(text);
	return exact.get(key) ?? anyCase.get(key.toLowerCase()) ?? null;
}

const REFERENCE_MARK = /^(.*?)[\s(]*\b(a|abs|absolute?|absolut|g|ga|gage|gauge|rel|ü)\)?\.?$/i;
const GLUED_MARK = /^(psi|bar|mbar|kpa|hpa)(a|g|abs|ü)$/i;

/**
 * Reads a unit as a file or a person writes it.
 *
 * @param text any spelling: `Nm`, `N·m`, `lb-ft`, `1/min`, `Â°C`, `psia`, `kPa (abs)` …, with or without brackets
 * @returns the unit with its conversion to the internal unit of its dimension; null where the text is empty, unknown or
 * refused (`refusedUnit` then has the sentence)
 * Source of the factors: `table.ts`; checked against GNU `units` figures in the reference tests.
 */
export function parseUnit(text: string | null | undefined): Unit | null {
	if (text == null) return null;
	const bare = clean(text).replace(/^[[({<]\s*(.*?)\s*[\])}>]$/, '$1');
	if (bare === '') return null;
	const plain = lookUp(bare);
	if (plain) return plain;
	const marked = GLUED_MARK.exec(bare) ?? REFERENCE_MARK.exec(bare);
	const inner = marked?.[1] ? lookUp(marked[1].trim()) : null;
	if (inner?.dimension !== 'pressure') return null;
	return { ...inner, reference: /^a/i.test(marked?.[2] ?? '') ? 'absolute' : 'gauge' };
}

const REFUSALS: readonly (readonly [pattern: RegExp, sentence: string])[] = [
	[
		/^(mg|g|mm3|cc|cm3|ul)(\/|per)?(stroke|str|cyc|cycle|inj|injection|hub|asp|arbeitsspiel)$/,
		'An amount per stroke needs the number of cylinders and the speed to become a flow; give the flow itself in g/s, kg/h, lb/h or L/h.'
	],
	[
		/^(cc|ml|cm3)in\d+(\.\d+)?(s|sec|seconds?)?$|^s(ec)?(per|\/)\d+(cc|ml|cm3)$/,
		'A burette reading is a volume and a time; divide them first and give the flow in L/h, or the fuel mass flow in kg/h.'
	],
	[
		/^(nl|sl|scc|scf|nm3|sm3)(\/)?(m|min|h|hr|s|pm)$|^(slpm|sccm|scfm|nlpm)$/,
		'A standard-condition gas flow must name its reference temperature (0, 20 or 25 °C); give the mass flow in kg/h or g/s.'
	]
];

/** Why a unit cannot be read as a flow or a level here, as a sentence that says what to give instead; null where it is not one of those. */
export function refusedUnit(text: string | null | undefined): string | null {
	if (text == null) return null;
	const key = keyOf(text.replace(/^[[({<]\s*(.*?)\s*[\])}>]$/, '$1')).toLowerCase();
	return REFUSALS.find(([pattern]) => pattern.test(key))?.[1] ?? null;
}

import { converter } from '../../../src/lib/domain/units/convert';
import { parseUnit } from '../../../src/lib/domain/units/parse';
import { input, type Check, type Entry } from '../entries';

function convert(value: number, from: string, to: string): number {
	const [source, target] = [parseUnit(from), parseUnit(to)];
	const change = source && target && converter(source, target);
	if (!change) throw new Error(`no way from ${from} to ${to}`);
	return change(value);
}

/** Spellings of GNU units that nobody types into a test sheet, as ours. */
const OURS: Record<string, string> = { 'g/(kW hour)': 'g/(kW·h)' };

const fromGnu = (entry: Entry) => {
	const [text, quantity] = Object.entries(entry.inputs)[0]!;
	const temperature = /^temp([FCK])\((\d+)\)$/.exec(text);
	if (temperature)
		return convert(Number(temperature[2]), temperature[1]!, entry.output.unit.replace('temp', 'deg '));
	return convert(quantity.value as number, text, OURS[entry.output.unit] ?? entry.output.unit);
};

export const UNIT_CHECKS: readonly Check[] = [
	{ match: /^units-/, run: fromGnu },
	{ match: /^cfr1065\.20-hp$/, run: (e) => convert(input(e, 'hp'), 'hp', 'kW') },
	{ match: /^afdc-(LHV|HHV)vol-/, run: (e) => convert(input(e, 'btu_per_gal'), 'Btu/gal', 'MJ/L') },
	{ match: /^afdc-(LHV|HHV)-/, run: (e) => convert(input(e, 'btu_per_lb'), 'Btu/lb', 'MJ/kg') }
];

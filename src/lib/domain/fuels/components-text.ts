import { typedNumber } from '../display/typed-number';
import { sumProblem, type FuelComponent } from './blend-of';

const LONGEST_NAME = 80;
const MOST = 50;
/** What follows a component's name on its line, with the bounds that catch a wrong unit. */
const COLUMNS = [
	{ name: 'volume', low: 0, high: 100, needed: true },
	{ name: 'density', low: 0.05, high: 2000, needed: false },
	{ name: 'heating value', low: 1, high: 142, needed: false },
	{ name: 'H/C', low: 0, high: 10, needed: false },
	{ name: 'O/C', low: 0, high: 4, needed: false }
] as const;

/** Ten decimals undo what a division by 100 leaves. */
const fractionOf = (percent: number) => Number((percent / 100).toFixed(10));

/**
 * Components as typed, one a line with semicolons or tabs: name; volume in %; then, where known, density in kg/m³, net heating
 * value in MJ/kg, H/C and O/C by atoms. What is wrong is said line by line; nothing typed is cut.
 */
export function componentsOf(text: string): { components: FuelComponent[]; problems: string[] } {
	const problems: string[] = [];
	const lines = text
		.split(/\r?\n/)
		.map((line) => line.trim())
		.filter(Boolean);
	if (lines.length > MOST) problems.push(`At most ${MOST} components; these are ${lines.length}.`);
	const components = lines.map((line, at): FuelComponent => {
		const [name = '', ...cells] = line.split(/[;\t]/).map((cell) => cell.trim());
		if (!name || name.length > LONGEST_NAME)
			problems.push(`Line ${at + 1}: begin with a name of at most ${LONGEST_NAME} characters.`);
		if (cells.length > COLUMNS.length) problems.push(`Line ${at + 1} has more than six entries.`);
		const values = COLUMNS.map(({ name: what, low, high, needed }, column) => {
			const value = typedNumber((cells[column] ?? '').replace(/\s*%$/, ''));
			const wrong = value === null ? needed : !(value >= low && value <= high);
			if (wrong) problems.push(`Line ${at + 1}: the ${what} must be a number from ${low} to ${high}.`);
			return wrong ? null : value;
		});
		const [percent, densityKgM3, lhvMjKg, hydrogenCarbonRatio, oxygenCarbonRatio] = values;
		return {
			name,
			volumeFraction: fractionOf(percent ?? 0),
			...(densityKgM3 == null ? {} : { densityKgM3 }),
			...(lhvMjKg == null ? {} : { lhvMjKg }),
			...(hydrogenCarbonRatio == null ? {} : { hydrogenCarbonRatio }),
			...(oxygenCarbonRatio == null ? {} : { oxygenCarbonRatio })
		};
	});
	const sum = problems.length === 0 && components.length > 0 ? sumProblem(components) : null;
	return { components, problems: sum ? [sum] : problems };
}

export const componentsText = (components: readonly FuelComponent[] | null): string =>
	(components ?? [])
		.map((part) =>
			[
				part.name,
				String(Number((part.volumeFraction * 100).toFixed(8))),
				part.densityKgM3 ?? '',
				part.lhvMjKg ?? '',
				part.hydrogenCarbonRatio ?? '',
				part.oxygenCarbonRatio ?? ''
			]
				.join('; ')
				.replace(/[; ]+$/, '')
		)
		.join('\n');

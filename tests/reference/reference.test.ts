import { afterAll, describe, expect, it } from 'vitest';
import { CORRECTION_CHECKS } from './checks/corrections';
import { FUEL_CHECKS } from './checks/fuels';
import { HUMID_AIR_CHECKS } from './checks/humid-air';
import { PERFORMANCE_CHECKS } from './checks/performance';
import { STATISTICS_CHECKS } from './checks/statistics';
import { UNIT_CHECKS } from './checks/units';
import { textbookOutputs } from './checks/textbook';
import { allowed, ENTRIES, TEXTBOOK, type Entry } from './entries';
import { UNCOVERED } from './uncovered';

const CHECKS = [
	...UNIT_CHECKS,
	...HUMID_AIR_CHECKS,
	...CORRECTION_CHECKS,
	...FUEL_CHECKS,
	...STATISTICS_CHECKS,
	...PERFORMANCE_CHECKS
];

const checkOf = (entry: Entry) => CHECKS.find((check) => check.match.test(entry.id));
const isUncovered = (entry: Entry) => UNCOVERED.some((row) => row.match.test(entry.id));
const published = ENTRIES.filter((entry) => entry.kind.startsWith('published'));
const computed = ENTRIES.filter((entry) => entry.kind === 'computed from the formula');

const ran = { published: 0, computed: 0, textbook: 0 };

function verify(entry: Entry): void {
	const found = [checkOf(entry)!.run(entry)].flat();
	const wanted = [entry.output.value].flat() as number[];
	expect(found).toHaveLength(wanted.length);
	for (const [i, value] of wanted.entries()) {
		const apart = Math.abs(found[i]! - value);
		expect(apart, `${found[i]} for ${value} ${entry.output.unit}`).toBeLessThanOrEqual(allowed(entry, value));
	}
}

describe('published values', () => {
	for (const entry of published.filter(checkOf))
		it(`${entry.id}: ${entry.quantity} [${entry.source}]`, () => {
			verify(entry);
			ran.published++;
		});
});

// These catch slips and regressions; they come from the same formula and cannot show that it is the right one.
describe('values computed from the formula', () => {
	for (const entry of computed.filter(checkOf))
		it(`${entry.id}: ${entry.quantity} [${entry.source}]`, () => {
			verify(entry);
			ran.computed++;
		});
});

// Read in public transcriptions of the books' solutions, not in the books. Values are recomputed
// from the printed inputs; the coarsest constant among them (2544.43 Btu per hp·h) has six digits, hence 2e-6.
describe('textbook examples', () => {
	for (const example of TEXTBOOK.filter((candidate) => candidate.confidence === 'high'))
		for (const [name, found] of Object.entries(textbookOutputs(example))) {
			const { book, author, page, example: number } = example.source;
			it(`${example.id} ${name} [${author}, ${book}, example ${number}${page ? `, p. ${page}` : ''}]`, () => {
				const wanted = example.outputs[name]!.value;
				expect(Math.abs(found / wanted - 1), `${found} for ${wanted}`).toBeLessThanOrEqual(2e-6);
				ran.textbook++;
			});
		}
});

describe('nothing is left out in silence', () => {
	it.each([...published, ...computed].map((entry) => [entry.id, entry] as const))(
		'%s is checked or listed',
		(_, entry) => {
			expect([checkOf(entry) !== undefined, isUncovered(entry)].filter(Boolean)).toHaveLength(1);
		}
	);

	it('the list of what is not checked has no row that matches nothing', () => {
		for (const row of UNCOVERED)
			expect(
				ENTRIES.filter((entry) => row.match.test(entry.id)),
				row.reason
			).not.toHaveLength(0);
	});

	it('keeps at least as many checks as when it was written', () => {
		expect(ran.published).toBeGreaterThanOrEqual(100);
		expect(ran.computed).toBeGreaterThanOrEqual(71);
		expect(ran.textbook).toBeGreaterThanOrEqual(105);
	});

	afterAll(() => {
		console.log(
			`reference: ${ran.published} published, ${ran.computed} computed, ${ran.textbook} textbook entries checked`
		);
	});
});

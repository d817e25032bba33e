import { formatCount, plainNumber } from '$lib/domain/display/format';
import { labelOf } from '$lib/domain/display/labels';
import type { Relation, Rule } from '$lib/domain/model';

const RELATION_WORDS: Readonly<Record<Relation, string>> = {
	at_most: 'at most',
	at_least: 'at least',
	between: 'between'
};

/** What a rule judges, as read, and how its numbers are written. */
export function subjectOf({ subject }: Rule): {
	name: string;
	isExpression: boolean;
	number: (value: number) => string;
} {
	if ('expression' in subject) return { name: subject.expression, isExpression: true, number: plainNumber };
	const code = 'channel' in subject ? subject.channel : 'metric' in subject ? subject.metric : subject.fuel;
	const { label, unit, percent } = labelOf(code);
	// A power of ten would leave its error in the digits (0.28 × 100); a limit is read as it was typed.
	const shown = (value: number) => plainNumber(percent ? Number((value * 100).toPrecision(12)) : value);
	return {
		name: label,
		isExpression: false,
		number: (value) => `${shown(value)}${unit ? `\u00A0${unit}` : ''}`
	};
}

/** What follows the subject: `at most 110 °C, held 2 s`. */
export function ruleSentence(rule: Rule): string {
	const { number } = subjectOf(rule);
	const relation = RELATION_WORDS[rule.relation];
	const held = rule.holdS > 0 ? `, held ${plainNumber(rule.holdS)}\u00A0s` : '';
	const merged =
		rule.mergeGapS === undefined
			? ''
			: `, spans less than ${plainNumber(rule.mergeGapS)}\u00A0s apart taken as one`;
	return `${relation} ${limitText(rule, number)}${held}${merged}`;
}

function limitText({ limit }: Rule, number: (value: number) => string): string {
	if (typeof limit === 'number') return number(limit);
	if (Array.isArray(limit)) return `${number(limit[0])} and ${number(limit[1])}`;
	return `a table of ${formatCount(limit.table.length, 'point')} over ${labelOf(limit.over).label.toLowerCase()}`;
}

import { labelOf } from '../display/labels';
import { isEmptyPair, typedNumber, typedPairs, type TypedPair } from '../display/typed-number';
import { channelOf } from '../channels/catalogue';
import { FUEL_PROPERTIES, type FlagSeverity, type Relation, type Rule } from '../model';

/** A rule as it stands in a form: all that is typed is text, so that nothing wrong is lost. */
export interface RuleDraft {
	title: string;
	/** `channel:CODE`, `metric:CODE`, `fuel:PROPERTY`, or one of the kinds that are written out in `subjectText`. */
	subject: string;
	/** An expression, a column's own header, or a figure's code. */
	subjectText: string;
	relation: Relation;
	form: 'number' | 'table';
	limit: string;
	low: string;
	high: string;
	/** Channel that the table runs over. */
	over: string;
	table: TypedPair[];
	holdS: string;
	mergeGapS: string;
	severity: FlagSeverity;
}
export type RuleDraftField = keyof RuleDraft;

/** Subjects that are not on the list but written out. */
const WRITTEN_SUBJECTS = ['expression', 'column', 'figure'] as const;
const isWritten = (subject: string) => (WRITTEN_SUBJECTS as readonly string[]).includes(subject);

export const emptyRule = (): RuleDraft => ({
	title: '',
	subject: '',
	subjectText: '',
	relation: 'at_most',
	form: 'number',
	limit: '',
	low: '',
	high: '',
	over: 'speed',
	table: [],
	holdS: '0',
	mergeGapS: '',
	severity: 'review'
});

/** A value as it is typed: efficiencies are kept as fractions and typed in %. A product of ten leaves no error in the digits. */
const typedOf = (value: number, scale: number) => String(Number((value * scale).toPrecision(12)));
const keptOf = (value: number, scale: number) => Number((value / scale).toPrecision(15));

/** What the limit's numbers are typed in. */
export function limitUnit(draft: Pick<RuleDraft, 'subject' | 'subjectText'>): {
	unit: string;
	scale: number;
} {
	if (draft.subject === 'expression') return { unit: '', scale: 1 };
	const code = isWritten(draft.subject) ? draft.subjectText.trim() : draft.subject.replace(/^\w+:/, '');
	const { unit, percent } = labelOf(code);
	return { unit, scale: percent ? 100 : 1 };
}

/** A rule may be held against a table only along the trace's own clock. */
export const takesTable = ({ subject, relation }: Pick<RuleDraft, 'subject' | 'relation'>): boolean =>
	relation !== 'between' && !/^(metric|fuel):|^figure$/.test(subject);

function subjectDraft({ subject }: Rule, isListedMetric: (code: string) => boolean) {
	if ('expression' in subject) return { subject: 'expression', subjectText: subject.expression };
	if ('fuel' in subject) return { subject: `fuel:${subject.fuel}`, subjectText: '' };
	if ('metric' in subject)
		return isListedMetric(subject.metric)
			? { subject: `metric:${subject.metric}`, subjectText: '' }
			: { subject: 'figure', subjectText: subject.metric };
	return channelOf(subject.channel)?.code === subject.channel
		? { subject: `channel:${subject.channel}`, subjectText: '' }
		: { subject: 'column', subjectText: subject.channel };
}

/** A kept rule as a form's text. @param isListedMetric whether a figure's code is on the form's list */
export function draftOf(rule: Rule, isListedMetric: (code: string) => boolean): RuleDraft {
	const draft: RuleDraft = {
		...emptyRule(),
		title: rule.title,
		...subjectDraft(rule, isListedMetric),
		relation: rule.relation,
		holdS: String(rule.holdS),
		mergeGapS: rule.mergeGapS === undefined ? '' : String(rule.mergeGapS),
		severity: rule.severity
	};
	const { scale } = limitUnit(draft);
	const { limit } = rule;
	if (typeof limit === 'number') return { ...draft, limit: typedOf(limit, scale) };
	if (Array.isArray(limit))
		return { ...draft, low: typedOf(limit[0], scale), high: typedOf(limit[1], scale) };
	return {
		...draft,
		form: 'table',
		over: limit.over,
		table: typedPairs(limit.table.map(([x, y]) => [x, Number(typedOf(y, scale))]))
	};
}

export interface DraftError {
	field: RuleDraftField;
	/** Row and side of the table, where it is there. */
	row?: number;
	side?: 'x' | 'y';
	message: string;
}

const NUMBER = 'Give a number; a point for decimals, no mark between thousands.';

/** A form's text as a rule for the schema to judge, and what in the text is no number. */
export function ruleOf(draft: RuleDraft): { rule: unknown; errors: DraftError[] } {
	const errors: DraftError[] = [];
	const { scale } = limitUnit(draft);
	const number = (field: 'limit' | 'low' | 'high' | 'holdS' | 'mergeGapS', by = 1): number | undefined => {
		const value = typedNumber(draft[field]);
		if (value !== null && !Number.isNaN(value)) return keptOf(value, by);
		if (value !== null || field !== 'mergeGapS') errors.push({ field, message: NUMBER });
		return undefined;
	};
	const limit = () => {
		if (draft.relation === 'between') return [number('low', scale), number('high', scale)];
		if (draft.form !== 'table' || !takesTable(draft)) return number('limit', scale);
		return { over: draft.over, table: tableOf(draft.table, scale, errors) };
	};
	if (!draft.subject) errors.push({ field: 'subject', message: 'Choose what is judged.' });
	return {
		rule: {
			title: draft.title,
			subject: subjectOf(draft),
			relation: draft.relation,
			limit: limit(),
			holdS: number('holdS'),
			mergeGapS: number('mergeGapS'),
			severity: draft.severity
		},
		errors
	};
}

function subjectOf({ subject, subjectText }: RuleDraft): unknown {
	const text = subjectText.trim();
	if (subject === 'expression') return { expression: text };
	if (subject === 'column') return { channel: text };
	if (subject === 'figure') return { metric: text };
	const [kind = '', code = ''] = subject.split(/:(.*)/);
	return kind === 'fuel' && !(FUEL_PROPERTIES as readonly string[]).includes(code) ? {} : { [kind]: code };
}

function tableOf(rows: readonly TypedPair[], scale: number, errors: DraftError[]): [number, number][] {
	const points: [number, number][] = [];
	rows.forEach((pair, row) => {
		if (isEmptyPair(pair)) return;
		const [x, y] = [typedNumber(pair.x) ?? NaN, typedNumber(pair.y) ?? NaN];
		if (Number.isNaN(x)) errors.push({ field: 'table', row, side: 'x', message: NUMBER });
		if (Number.isNaN(y)) errors.push({ field: 'table', row, side: 'y', message: NUMBER });
		points.push([x, keptOf(y, scale)]);
	});
	if (points.length === 0) errors.push({ field: 'table', message: 'Give at least one point.' });
	return points;
}

/** Which field of the form a complaint of the schema about `rules.N.…` belongs to. @param path what follows `rules.N` */
export function fieldOfIssue(path: readonly PropertyKey[], draft: RuleDraft): RuleDraftField {
	const [first] = path;
	if (first === 'subject') return isWritten(draft.subject) ? 'subjectText' : 'subject';
	if (first === 'limit') {
		if (draft.relation === 'between') return path[1] === 1 ? 'high' : 'low';
		return draft.form === 'table' && takesTable(draft) ? (path[1] === 'over' ? 'over' : 'table') : 'limit';
	}
	return first !== undefined && first in draft ? (first as RuleDraftField) : 'title';
}

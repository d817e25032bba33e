import { setError, type SuperValidated } from 'sveltekit-superforms';
import { z } from 'zod';
import { fieldOfIssue, ruleOf, type RuleDraft } from '$lib/domain/limits/rule-draft';
import { FLAG_SEVERITIES, RELATIONS } from '$lib/domain/model';

const typed = (most = 60) => z.string().max(most, `At most ${most} characters.`);

/** A rule as the form has it: all that is typed is text, so that what is wrong stays as it was typed. */
const RuleForm = z.object({
	title: typed(200),
	subject: typed(200),
	subjectText: typed(1000),
	relation: z.enum(RELATIONS),
	form: z.enum(['number', 'table']),
	limit: typed(),
	low: typed(),
	high: typed(),
	over: typed(120),
	table: z.array(z.object({ x: typed(), y: typed() })).max(600, 'At most 500 points.'),
	holdS: typed(),
	mergeGapS: typed(),
	severity: z.enum(FLAG_SEVERITIES)
});
const rules = z.array(RuleForm).max(200, 'At most 200 rules.').default([]);

export const LimitSetForm = z.object({
	/** Empty: for all clients. */
	client: z.string().default(''),
	code: z.string().trim().default(''),
	title: z.string().trim().default(''),
	rules
});

export const VersionForm = z.object({
	/** The newest version when the form was opened. */
	version: z.number().default(0),
	/** Wall clock of the lab; empty: from now. */
	inForceFrom: z
		.string()
		.regex(/^(\d{4}-\d\d-\d\dT\d\d:\d\d(:\d\d)?)?$/, 'Give the date and time.')
		.default(''),
	rules
});

type WithRules = Record<string, unknown> & { rules: RuleDraft[] };

/**
 * Lets the use case's own schema judge the form, and puts each sentence at the field it is about.
 * @param rest what the schema takes beside the rules
 * @returns what the use case takes, or null where something was said
 */
export function judged<T extends WithRules, O>(
	form: SuperValidated<T>,
	schema: z.ZodType<O>,
	rest: Record<string, unknown>
): O | null {
	const drafts = form.data.rules as RuleDraft[];
	const said = new Set<string>();
	const say = (path: string, sentence: string) => {
		if (said.has(path)) return;
		said.add(path);
		setError(form, path as never, `${sentence.charAt(0).toUpperCase()}${sentence.slice(1)}`);
	};
	const read = drafts.map(ruleOf);
	read.forEach(({ errors }, at) => {
		for (const { field, row, side, message } of errors)
			say(ruleField(at, field, row === undefined ? '' : `[${row}].${side}`), message);
	});
	const result = schema.safeParse({ ...rest, rules: read.map(({ rule }) => rule) });
	if (!result.success)
		for (const { path, message } of result.error.issues) {
			const [first, at, ...inside] = path;
			const draft = typeof at === 'number' ? drafts[at] : undefined;
			const sentence = /[.!?]$/.test(message) ? message : `${message}.`;
			if (first !== 'rules') say(String(first ?? ''), sentence);
			else if (!draft || typeof at !== 'number') say('rules._errors', sentence);
			// A field that was no number is told so already.
			else if (!read[at]?.errors.some(({ field }) => field === fieldOfIssue(inside, draft)))
				say(ruleField(at, fieldOfIssue(inside, draft), ''), sentence);
		}
	return result.success && said.size === 0 ? result.data : null;
}

const ruleField = (at: number, field: string, inside: string) =>
	field === 'table' ? `rules[${at}].table${inside || '._errors'}` : `rules[${at}].${field}`;

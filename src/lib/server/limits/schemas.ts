import { z } from 'zod';
import { parseExpression } from '$lib/domain/limits/expression';
import { FLAG_SEVERITIES, FUEL_PROPERTIES, RELATIONS } from '$lib/domain/model';
import { fields } from '../api';

const name = fields.label(120);
/** Read here as the judge will read it, so that nobody learns from a run that a rule was never held against it. */
const Expression = z
	.string()
	.trim()
	.min(1, 'must not be empty')
	.max(400, 'at most 400 characters')
	.superRefine((text, check) => {
		const parsed = parseExpression(text);
		if (!parsed.ok) check.addIssue({ code: 'custom', message: parsed.error });
	});
const Subject = z.union(
	[
		z.strictObject({ channel: name }),
		z.strictObject({ metric: name }),
		z.strictObject({ fuel: z.enum(FUEL_PROPERTIES) }),
		z.strictObject({ expression: Expression })
	],
	{ error: 'name one of channel, metric, fuel or expression' }
);
const Limit = z.union(
	[
		z.number(),
		z.tuple([z.number(), z.number()]),
		z.object({
			over: name,
			table: z
				.array(z.tuple([z.number(), z.number()]))
				.min(1)
				.max(500)
				.refine(
					(rows) => rows.every((row, i) => i === 0 || row[0] > rows[i - 1]![0]),
					'the first column must rise'
				)
		})
	],
	{ error: 'give a number, [low, high], or {over, table}' }
);

const RuleBody = z
	.object({
		title: fields.label(120),
		subject: Subject,
		relation: z.enum(RELATIONS),
		limit: Limit,
		holdS: z.number().min(0, 'must not be negative').max(86_400).default(0),
		mergeGapS: z.number().min(0, 'must not be negative').max(3600).optional(),
		severity: z.enum(FLAG_SEVERITIES)
	})
	.refine((rule) => (rule.relation === 'between') === Array.isArray(rule.limit), {
		path: ['limit'],
		error: '`between` takes [low, high]; `at_most` and `at_least` take a number or a table'
	})
	.refine((rule) => !Array.isArray(rule.limit) || rule.limit[0] <= rule.limit[1], {
		path: ['limit'],
		error: 'the low limit comes first'
	})
	.refine(
		(rule) =>
			!(
				typeof rule.limit === 'object' &&
				'over' in rule.limit &&
				('metric' in rule.subject || 'fuel' in rule.subject)
			),
		{
			path: ['limit'],
			error: 'a table over a channel needs a channel or an expression as its subject'
		}
	);

const Rules = z.array(RuleBody).min(1, 'give at least one rule').max(200, 'at most 200 rules');
export const NewLimitSet = z.object({
	client: fields.ref.optional(),
	code: fields.code,
	title: fields.label(),
	rules: Rules
});
export const NewLimitSetVersion = z.object({ rules: Rules, inForceFrom: fields.instant.optional() });

export const LimitSetView = z.object({
	id: z.string(),
	client: z.string().nullable(),
	code: z.string(),
	title: z.string(),
	/** The newest version's number; also the set's ETag. */
	version: z.number(),
	inForceFrom: fields.instantOut,
	rules: z.array(z.unknown())
});

export const LimitSetVersionView = z.object({
	version: z.number(),
	inForceFrom: fields.instantOut,
	/** When runs are judged by it; null: another version with the same date overtook it. */
	inForce: z.object({ from: fields.instantOut.nullable(), to: fields.instantOut.nullable() }).nullable(),
	/** Null for a client where it was not one of theirs. */
	writtenBy: z.string().nullable(),
	writtenAt: fields.instantOut,
	rules: z.array(z.unknown())
});

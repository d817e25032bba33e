import { z } from 'zod';
import { fields } from '../api';

const CHECK_ANSWERS = ['done', 'not_applicable', 'not_done'] as const;

export const NewCheck = z
	.object({
		item: z.string().trim().min(1, 'name the item').max(60, 'is too long'),
		answer: z.enum(CHECK_ANSWERS),
		reason: fields.reason.optional()
	})
	.refine(({ answer, reason }) => answer !== 'not_applicable' || reason, {
		path: ['reason'],
		error: 'say why it does not apply'
	});

const Check = z.object({
	answer: z.enum(CHECK_ANSWERS),
	reason: z.string().nullable(),
	by: z.string(),
	at: fields.instantOut
});
export const ChecklistView = z.object({
	version: z.number(),
	items: z.array(
		z.object({
			item: z.string(),
			text: z.string(),
			look: z.string(),
			/** What holds: the newest answer; null before there is one. */
			holds: Check.nullable(),
			/** Earlier answers, newest first. */
			before: z.array(Check)
		})
	)
});
export type Checklist = z.input<typeof ChecklistView>;

/** Wide physical bounds: they catch a wrong unit (1013 hPa for 101.3 kPa), not a hard winter. */
export const Air = z.object({
	barometerKpa: z.number().min(50, 'is in kPa: 50 to 115').max(115, 'is in kPa: 50 to 115').optional(),
	temperatureC: z.number().min(-60, 'is in °C: −60 to 70').max(70, 'is in °C: −60 to 70').optional(),
	humidityPct: z.number().min(0, 'is in % RH: 0 to 100').max(100, 'is in % RH: 0 to 100').optional()
});

export const NewReading = Air.extend({
	at: fields.instant.optional(),
	supersedes: z.uuid().optional(),
	reason: fields.reason.optional()
});
export const ReadingView = z.object({
	id: z.string(),
	at: fields.instantOut,
	barometerKpa: z.number().nullable(),
	temperatureC: z.number().nullable(),
	humidityPct: z.number().nullable(),
	author: z.string(),
	supersedes: z.string().nullable(),
	reason: z.string().nullable()
});
export type Reading = z.input<typeof ReadingView>;

import { z } from 'zod';
import { partProblems } from '$lib/domain/builds/parts-text';

const title = z
	.string()
	.trim()
	.min(1, 'Say in a few words what this build is.')
	.max(200, 'At most 200 characters.');
/** One part a line: name, colon, value. */
const parts = z
	.string()
	.max(20_000, 'At most 20 000 characters.')
	.default('')
	.superRefine((text, check) => {
		for (const message of partProblems(text)) check.addIssue({ code: 'custom', message });
	});

export const NewBuildForm = z.object({
	engine: z.string().min(1, 'Choose the engine.'),
	number: z
		.string()
		.trim()
		.regex(/^[A-Z0-9][A-Z0-9.-]{0,31}$/, 'Use capital letters, digits, dots and hyphens, at most 32.'),
	title,
	parent: z.string().trim().max(64, 'At most 64 characters.').default(''),
	parts
});

export const BuildChangeForm = z.object({
	title,
	parts,
	/** Of the build as it was when the form was opened. */
	version: z.number().int()
});

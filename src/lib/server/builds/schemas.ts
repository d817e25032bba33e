import { z } from 'zod';
import { fields } from '../api';

const Part = z.object({
	name: fields.label(80),
	value: z.string().trim().max(500, 'at most 500 characters')
});
const State = z.enum(['in_preparation', 'ready', 'retired']);

export const NewBuild = z.object({
	client: fields.ref.optional(),
	engine: fields.ref,
	number: fields.code,
	title: fields.label(),
	parent: fields.ref.nullish(),
	parts: z.array(Part).max(200, 'at most 200 parts').default([])
});

export const BuildChange = z
	.object({ title: fields.label(), parts: z.array(Part).max(200, 'at most 200 parts'), state: State })
	.partial()
	.refine((change) => Object.keys(change).length > 0, 'name what to change: title, parts or state');

export const BuildView = z.object({
	id: z.string(),
	client: z.string(),
	engine: z.string(),
	engineName: z.string(),
	number: z.string(),
	title: z.string(),
	parent: z.string().nullable(),
	parentId: z.string().nullable(),
	parts: z.array(Part),
	state: State,
	following: z.boolean(),
	runs: z.number(),
	version: z.number()
});
export type Build = z.input<typeof BuildView>;

export const BuildQuery = z.object({ client: fields.ref.optional(), engine: fields.ref.optional() });

import { z } from 'zod';
import { ROLES } from '../access';
import { fields, PageQuery } from '../api';

const role = z.enum(ROLES, { error: `choose one of ${ROLES.join(', ')}` });
const PERSON_STATES = ['active', 'invited', 'disabled'] as const;
export const PERSON_SORTS = ['name', 'email', 'role', 'created'] as const;

export const NewPerson = z.object({
	email: z.string().trim().min(1, 'give a mail address').max(254, 'is too long for a mail address'),
	name: fields.label(120),
	role,
	client: fields.ref.optional()
});
export const PersonChange = z.object({
	name: fields.label(120).optional(),
	role: role.optional(),
	client: fields.ref.nullable().optional(),
	/** Said on purpose when an admin's change takes their own administration away. */
	ownRole: z.boolean().optional()
});
export const PersonDisable = z.object({ ownAccount: z.boolean().optional() });
export const PersonQuery = PageQuery.extend({
	role: role.optional(),
	client: fields.ref.optional(),
	state: z.enum(PERSON_STATES, { error: `choose one of ${PERSON_STATES.join(', ')}` }).optional(),
	sort: z
		.enum([...PERSON_SORTS, ...PERSON_SORTS.map((name) => `-${name}` as const)], {
			error: `choose one of ${PERSON_SORTS.join(', ')}, with a minus for the other way round`
		})
		.default('name')
});
export const PersonView = z.object({
	id: z.string(),
	email: z.string(),
	name: z.string(),
	role: z.enum(ROLES),
	client: z.string().nullable(),
	state: z.enum(PERSON_STATES),
	createdAt: fields.instantOut,
	/** Open sessions now. */
	sessions: z.number().int(),
	/** The last invitation, for who has not accepted one: when it went, and until when its link works. */
	invitation: z.object({ sentAt: fields.instantOut, worksUntil: fields.instantOut }).nullable(),
	version: z.number().int()
});
export type Person = z.input<typeof PersonView>;

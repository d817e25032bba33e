import { fail } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { ROLES, type Principal } from '$lib/server/access';
import { AuditQuery, readAudit } from '$lib/server/audit';
import { listClients } from '$lib/server/clients';
import { problemOf } from '$lib/server/db';
import type { Deps } from '$lib/server/deps';
import {
	changePerson,
	disablePerson,
	enablePerson,
	endSessions,
	getPerson,
	inviteAgain,
	PersonChange
} from '$lib/server/people';
import { pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad, RequestEvent } from './$types';

const PersonForm = z.object({
	name: z.string().trim().min(1, 'Give the person’s name.').max(120, 'At most 120 characters.'),
	role: z.string().refine((role) => (ROLES as readonly string[]).includes(role), 'Choose a role.'),
	client: z.string().max(64, 'Choose a client.').default(''),
	/** Said in the dialog that asks about one's own account. */
	ownRole: z.boolean().default(false),
	version: z.number().int()
});

export const load: PageServerLoad = async ({ locals, params }) => {
	const who = personMay(locals, 'person.admin');
	return pageData({ locals }, async () => {
		const person = await getPerson(locals.deps, who, params.id);
		const [clients, history] = await Promise.all([
			listClients(locals.deps, who),
			readAudit(locals.deps, who, AuditQuery.parse({ subject: 'person', subjectId: person.id, limit: '20' }))
		]);
		const { name, role, client, version } = person;
		return {
			account: person,
			isOwn: person.id === who.personId,
			history,
			clients: clients.map(({ code, name }) => ({ code, name })),
			form: await superValidate({ name, role, client: client ?? '', version }, zod4(PersonForm), {
				errors: false
			})
		};
	});
};

/** An action without fields of its own: what the use case refuses stands above the page. */
function plainly(work: (deps: Deps, who: Principal, id: string) => Promise<unknown>, done: string) {
	return async ({ locals, params }: RequestEvent) => {
		const who = personMay(locals, 'person.admin');
		try {
			await work(locals.deps, who, params.id);
		} catch (cause) {
			const problem = problemOf(cause);
			if (!problem || problem.status === 404) return pageData({ locals }, () => Promise.reject(cause));
			return fail(problem.status, { problem: problem.message });
		}
		return { done };
	};
}

export const actions: Actions = {
	change: async ({ request, locals, params }) => {
		const who = personMay(locals, 'person.admin');
		const form = await superValidate(request, zod4(PersonForm));
		if (!form.valid) return fail(400, { form });
		const { name, role, client, ownRole, version } = form.data;
		try {
			const asked = PersonChange.parse({
				name,
				role,
				client: role === 'client' && client ? client : null,
				ownRole
			});
			const after = await changePerson(locals.deps, who, params.id, asked, version);
			form.data = { ...form.data, version: after.version, ownRole: false };
		} catch (cause) {
			return refused(form, cause);
		}
		return { form, done: 'Saved. It holds from the person’s next step on.' };
	},
	invite: plainly(inviteAgain, 'Another invitation is on its way. Links of earlier ones work no more.'),
	disable: plainly(
		// The dialog has asked, and says so when the account is one's own.
		(deps, who, id) => disablePerson(deps, who, id, { ownAccount: true }),
		'The account is disabled: nobody signs in with it, and its tokens open nothing.'
	),
	enable: plainly(enablePerson, 'The account is open again.'),
	end: plainly(endSessions, 'The person is signed out everywhere.')
};

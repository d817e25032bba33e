import { fail, redirect, type RequestEvent } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { wallClock } from '$lib/domain/time';
import type { Action } from '$lib/server/access';
import { cancelBooking, confirmBooking, declineBooking, getBooking, moveBooking } from '$lib/server/bookings';
import { listCells } from '$lib/server/cells';
import { problemOf } from '$lib/server/db';
import { labInstant, pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

const moment = (sentence: string) => z.string().regex(/^\d{4}-\d\d-\d\dT\d\d:\d\d(:\d\d)?$/, sentence);
/** The version that the person saw, so that nobody decides on what has changed meanwhile. */
const version = z.coerce.number().int().nonnegative();

const MoveForm = z.object({
	cell: z.string().min(1, 'Choose the cell.'),
	from: moment('Give the day and time at which the test begins.'),
	to: moment('Give the day and time at which the test ends.'),
	version
});
const DecisionForm = z.object({
	reason: z.string().trim().max(1000, 'At most 1 000 characters.').default(''),
	version
});

export const load: PageServerLoad = async ({ locals, params }) => {
	const who = personMay(locals, 'booking.read');
	const { deps } = locals;
	return pageData({ locals }, async () => {
		const [booking, cells] = await Promise.all([getBooking(deps, who, params.id), listCells(deps, who)]);
		const zone = deps.config.labTimeZone;
		const now = {
			cell: booking.cell,
			from: wallClock(new Date(booking.from), zone),
			to: wallClock(new Date(booking.to), zone),
			version: booking.version
		};
		return {
			booking,
			cells: cells.map(({ code, name }) => ({ code, name })),
			form: await superValidate(now, zod4(MoveForm), { errors: false })
		};
	});
};

type On = 'confirm' | 'decline' | 'cancel';
type Decide = typeof confirmBooking;

/** A decision with its reason; a refusal comes back as a sentence beside what was typed. */
async function decide(
	event: Pick<RequestEvent, 'locals' | 'request'> & { params: { id: string } },
	on: On,
	action: Action,
	use: Decide,
	{ needsReason = false, done }: { needsReason?: boolean; done: (number: string) => string }
) {
	const who = personMay(event.locals, action);
	const given = Object.fromEntries(await event.request.formData());
	const typed = typeof given.reason === 'string' ? given.reason : '';
	const read = DecisionForm.safeParse(given);
	if (!read.success) {
		const { fieldErrors } = z.flattenError(read.error);
		return fail(400, { on, reason: typed, reasonError: fieldErrors.reason?.[0] ?? 'Load the page again.' });
	}
	const { reason, version: ifMatch } = read.data;
	if (needsReason && !reason)
		return fail(400, { on, reason: typed, reasonError: 'Say why: the one who asked is told.' });
	try {
		const booking = await use(event.locals.deps, who, event.params.id, { reason: reason || null, ifMatch });
		return { done: done(booking.number) };
	} catch (cause) {
		const problem = problemOf(cause);
		if (!problem) throw cause;
		const sentence = on === 'confirm' ? `Not confirmed. ${problem.message}` : problem.message;
		return fail(problem.status, { on, reason: typed, problem: sentence });
	}
}

export const actions: Actions = {
	confirm: (event) =>
		decide(event, 'confirm', 'booking.decide', confirmBooking, {
			done: (number) => `${number} is confirmed. The one who asked is mailed.`
		}),
	decline: (event) =>
		decide(event, 'decline', 'booking.decide', declineBooking, {
			needsReason: true,
			done: (number) => `${number} is declined. The one who asked is mailed.`
		}),
	cancel: (event) =>
		decide(event, 'cancel', 'booking.cancel', cancelBooking, {
			done: (number) => `${number} is cancelled; its time is free again.`
		}),
	move: async ({ request, locals, params }) => {
		const who = personMay(locals, 'booking.move');
		const { deps } = locals;
		const form = await superValidate(request, zod4(MoveForm));
		if (!form.valid) return fail(400, { form });
		const { cell, from, to, version: ifMatch } = form.data;
		let moved: Awaited<ReturnType<typeof moveBooking>>;
		let before: typeof moved;
		try {
			before = await getBooking(deps, who, params.id);
			const times = {
				from: labInstant(deps.config, from, 'from'),
				to: labInstant(deps.config, to, 'to')
			};
			moved = await moveBooking(deps, who, params.id, { cell, ...times }, ifMatch);
		} catch (cause) {
			return refused(form, cause);
		}
		// Not everyone may move a confirmed slot at once: for them a request to move it was made.
		if (moved.id !== before.id) redirect(303, `/bookings/${encodeURIComponent(moved.number)}`);
		return { form, done: `${moved.number} is moved.` };
	}
};

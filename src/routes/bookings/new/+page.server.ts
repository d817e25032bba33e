import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { RUN_KINDS } from '$lib/domain/model';
import { requestBooking } from '$lib/server/bookings';
import { listBuilds } from '$lib/server/builds';
import { listCells } from '$lib/server/cells';
import { listFuelBatches } from '$lib/server/fuels';
import { labInstant, pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

const LISTED = 200;
const WALL_CLOCK = /^\d{4}-\d\d-\d\dT\d\d:\d\d(:\d\d)?$/;
const wallClock = (sentence: string) => z.string().regex(WALL_CLOCK, sentence);

/** Flat, as a form is; text for what may be left empty. */
const BookingForm = z.object({
	build: z.string().min(1, 'Choose the build to be tested.'),
	cell: z.string().min(1, 'Choose the cell.'),
	from: wallClock('Give the day and time at which the test begins.'),
	to: wallClock('Give the day and time at which the test ends.'),
	fuelBatch: z.string().default(''),
	kind: z.enum(['', ...RUN_KINDS]).default(''),
	purpose: z.string().trim().max(2000, 'At most 2 000 characters.').default('')
});

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'booking.request');
	const { deps } = locals;
	return pageData({ locals }, async () => {
		const [builds, cells, batches] = await Promise.all([
			listBuilds(deps, who, { limit: LISTED }),
			listCells(deps, who),
			listFuelBatches(deps, who, { limit: LISTED })
		]);
		const asked = (name: string) => url.searchParams.get(name) ?? '';
		const askedTime = (name: string) => (WALL_CLOCK.test(asked(name)) ? asked(name) : '');
		const start = {
			build: builds.items.find(({ id, number }) => [id, number].includes(asked('build')))?.id ?? '',
			cell: cells.find(({ id, code }) => [id, code].includes(asked('cell')))?.id ?? '',
			from: askedTime('from'),
			to: askedTime('to')
		};
		return {
			form: await superValidate(start, zod4(BookingForm), { errors: false }),
			builds: builds.items.map(({ id, client, engine, number, title, state }) => ({
				id,
				client,
				engine,
				number,
				title,
				state
			})),
			cells: cells.map(({ id, code, name, rigUpMinutes, rigDownMinutes, fuels }) => ({
				id,
				code,
				name,
				rigUpMinutes,
				rigDownMinutes,
				fuels
			})),
			batches: batches.items.map(({ id, client, code, fuel }) => ({ id, client, code, fuel })),
			/** Of each, whether there are more than the form offers. */
			cut: { builds: builds.nextCursor !== null, batches: batches.nextCursor !== null, listed: LISTED }
		};
	});
};

export const actions: Actions = {
	default: async ({ request, locals }) => {
		const who = personMay(locals, 'booking.request');
		const { deps } = locals;
		const form = await superValidate(request, zod4(BookingForm));
		if (!form.valid) return fail(400, { form });
		const { build, cell, from, to, fuelBatch, kind, purpose } = form.data;
		let number: string;
		try {
			const booking = await requestBooking(deps, who, {
				build,
				cell,
				from: labInstant(deps.config, from, 'from'),
				to: labInstant(deps.config, to, 'to'),
				fuelBatch: fuelBatch || null,
				kind: kind || null,
				purpose: purpose || null
			});
			number = booking.number;
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/bookings/${encodeURIComponent(number)}`);
	}
};

import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { RUN_KINDS } from '$lib/domain/model';
import { wallClock as wallClockText } from '$lib/domain/time';
import { requestBooking } from '$lib/server/bookings';
import { listBuilds } from '$lib/server/builds';
import { listCells } from '$lib/server/cells';
import { listEngines } from '$lib/server/engines';
import { listFuelBatches } from '$lib/server/fuels';
import { findSlots } from '$lib/server/schedule';
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
	purpose: z.string().trim().max(2000, 'At most 2 000 characters.').default(''),
	/** The wish that slots are found for. */
	notBefore: z.string().default(''),
	notAfter: z.string().default(''),
	hours: z.coerce.number({ error: 'Give the length in hours.' }).default(4)
});

/** What finding slots asks of the same fields: the slot itself is what it is to find. */
const WishForm = z.object({
	...BookingForm.shape,
	cell: z.string().default(''),
	from: z.string().default(''),
	to: z.string().default(''),
	notBefore: wallClock('Give the day and time from which a slot would suit.'),
	notAfter: wallClock('Give the day and time up to which a slot would suit.'),
	hours: z.coerce
		.number({ error: 'Give the length in hours.' })
		.min(0.25, 'At least a quarter of an hour.')
		.max(744, 'At most 31 days.')
});

const WISHED_DAYS = 14;
const MINUTES_PER_HOUR = 60;

/** A wish to begin with: the two weeks from tomorrow morning on. */
function wishFrom(now: Date, zone: string) {
	const day = (days: number) => wallClockText(new Date(now.getTime() + days * 86_400_000), zone).slice(0, 10);
	return { notBefore: `${day(1)}T06:00`, notAfter: `${day(1 + WISHED_DAYS)}T20:00` };
}

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'booking.request');
	const { deps } = locals;
	return pageData({ locals }, async () => {
		const [builds, cells, batches, engines] = await Promise.all([
			listBuilds(deps, who, { limit: LISTED }),
			listCells(deps, who),
			listFuelBatches(deps, who, { limit: LISTED }),
			listEngines(deps, who)
		]);
		const asked = (name: string) => url.searchParams.get(name) ?? '';
		const askedTime = (name: string) => (WALL_CLOCK.test(asked(name)) ? asked(name) : '');
		const start = {
			build: builds.items.find(({ id, number }) => [id, number].includes(asked('build')))?.id ?? '',
			cell: cells.find(({ id, code }) => [id, code].includes(asked('cell')))?.id ?? '',
			from: askedTime('from'),
			to: askedTime('to'),
			...wishFrom(deps.now(), deps.config.labTimeZone)
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
			/** What each build’s engine is expected to give, for the look at the absorber. */
			engines: engines.map(({ client, code, maxSpeedRpm, expectedTorque }) => ({
				client,
				code,
				maxSpeedRpm,
				expectedTorque
			})),
			cells: cells.map(({ id, code, name, absorber, envelope, rigUpMinutes, rigDownMinutes, fuels }) => ({
				id,
				code,
				name,
				absorber: { ...absorber, envelope },
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
	fit: async ({ request, locals }) => {
		const who = personMay(locals, 'booking.request');
		const { deps } = locals;
		const form = await superValidate(request, zod4(WishForm));
		if (!form.valid) return fail(400, { form });
		const { build, kind, fuelBatch, notBefore, notAfter, hours } = form.data;
		const zone = deps.config.labTimeZone;
		try {
			const found = await findSlots(deps, who, {
				build,
				kind: kind || null,
				fuelBatch: fuelBatch || null,
				durationMinutes: Math.round(hours * MINUTES_PER_HOUR),
				notBefore: labInstant(deps.config, notBefore, 'notBefore'),
				notAfter: labInstant(deps.config, notAfter, 'notAfter')
			});
			const slots = found.slots.map(({ cell, cellName, from, to }) => ({
				cell,
				cellName,
				from: wallClockText(new Date(from), zone),
				to: wallClockText(new Date(to), zone)
			}));
			return { form, fit: { slots, refused: found.refused, note: found.note } };
		} catch (cause) {
			return refused(form, cause, { durationMinutes: 'hours' });
		}
	},
	request: async ({ request, locals }) => {
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

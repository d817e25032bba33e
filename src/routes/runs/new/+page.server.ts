import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { CORRECTIONS, RUN_KINDS } from '$lib/domain/model';
import { wallClock } from '$lib/domain/time';
import { getBooking } from '$lib/server/bookings';
import { listBuilds } from '$lib/server/builds';
import { listCells } from '$lib/server/cells';
import { listFuelBatches } from '$lib/server/fuels';
import { listLimitSets } from '$lib/server/limits';
import { NewRun, openRun, proposeLimitSet } from '$lib/server/runs';
import { labInstant, pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';

const optionalNumber = (low: number, high: number, unit: string) =>
	z
		.number({ error: 'Give a number.' })
		.min(low, `Between ${low} and ${high} ${unit}.`)
		.max(high, `Between ${low} and ${high} ${unit}.`)
		.nullable()
		.default(null);

/** Flat, as a form is; text for what may be left empty. */
const RunForm = z.object({
	/** Number of the booking that it is opened from; empty: alone. */
	booking: z.string().default(''),
	build: z.string().min(1, 'Choose the build that runs.'),
	cell: z.string().min(1, 'Choose the cell.'),
	fuelBatch: z.string().min(1, 'Choose the fuel batch.'),
	kind: z.enum(RUN_KINDS).default('power_sweep'),
	/** Wall clock of the lab, as `datetime-local` gives it. */
	startedAt: z.string().regex(/^\d{4}-\d\d-\d\dT\d\d:\d\d(:\d\d)?$/, 'Give the date and time of the start.'),
	limitSet: z.string().default(''),
	correction: z.enum(CORRECTIONS).default('none'),
	net: z.enum(['', 'net', 'gross']).default(''),
	barometerKpa: optionalNumber(50, 115, 'kPa'),
	temperatureC: optionalNumber(-60, 70, '°C'),
	humidityPct: optionalNumber(0, 100, '% RH')
});

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'run.open');
	const { deps } = locals;
	return pageData({ locals }, async () => {
		const [builds, cells, batches, limitSets] = await Promise.all([
			listBuilds(deps, who, { limit: 200 }),
			listCells(deps, who),
			listFuelBatches(deps, who, { limit: 200 }),
			listLimitSets(deps, who)
		]);
		const from = url.searchParams.get('booking');
		const booking = from ? await getBooking(deps, who, from) : null;
		const build = booking?.buildId ?? url.searchParams.get('build') ?? '';
		const start = {
			booking: booking?.number ?? '',
			build,
			cell: booking?.cell ?? url.searchParams.get('cell') ?? '',
			fuelBatch:
				batches.items.find(
					({ code, client }) => code === booking?.fuelBatch && (client === null || client === booking.client)
				)?.id ?? '',
			...(booking?.kind ? { kind: booking.kind } : {}),
			limitSet: build ? ((await proposeLimitSet(deps, who, build)) ?? '') : '',
			startedAt: wallClock(deps.now(), deps.config.labTimeZone)
		};
		return {
			form: await superValidate(start, zod4(RunForm), { errors: false }),
			builds: builds.items.map(({ id, client, number, title, state }) => ({
				id,
				client,
				number,
				title,
				state
			})),
			cells: cells.map(({ id, code, name, colour }) => ({ id, code, name, colour })),
			batches: batches.items.map(({ id, client, code, fuel }) => ({ id, client, code, fuel })),
			limitSets: limitSets.map(({ id, client, code, title, version }) => ({
				id,
				client,
				code,
				title,
				version
			}))
		};
	});
};

export const actions: Actions = {
	default: async ({ request, locals }) => {
		const who = personMay(locals, 'run.open');
		const form = await superValidate(request, zod4(RunForm));
		if (!form.valid) return fail(400, { form });
		const { startedAt, booking, limitSet, net, barometerKpa, temperatureC, humidityPct, ...rest } = form.data;
		let number: string;
		try {
			const run = await openRun(
				locals.deps,
				who,
				NewRun.parse({
					...rest,
					startedAt: labInstant(locals.deps.config, startedAt, 'startedAt').toISOString(),
					booking: booking || null,
					limitSet: limitSet || null,
					net: net === '' ? null : net === 'net',
					ambient: Object.fromEntries(
						Object.entries({ barometerKpa, temperatureC, humidityPct }).filter(([, value]) => value !== null)
					)
				})
			);
			number = run.number;
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/runs/${encodeURIComponent(number)}`);
	}
};

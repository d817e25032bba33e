import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { CORRECTIONS, RUN_KINDS } from '$lib/domain/model';
import { wallClock } from '$lib/domain/time';
import { listBuilds } from '$lib/server/builds';
import { listCells } from '$lib/server/cells';
import { listClients } from '$lib/server/clients';
import { listFuelBatches } from '$lib/server/fuels';
import { listLimitSets } from '$lib/server/limits';
import { benchNeeds, makeBench, readRunStart } from '$lib/server/run-start';
import { NewRun, openRun } from '$lib/server/runs';
import { labInstant, pageData, personMay, refused } from '$lib/server/web';
import type { Actions, PageServerLoad } from './$types';
import { BenchForm } from './bench-form';

const optionalNumber = (low: number, high: number, unit: string) =>
	z
		.number({ error: 'Give a number.' })
		.min(low, `Between ${low} and ${high} ${unit}.`)
		.max(high, `Between ${low} and ${high} ${unit}.`)
		.nullable()
		.default(null);

/** Flat, as a form is; text for what may be left empty. */
const RunForm = z.object({
	build: z.string().min(1, 'Choose the build that runs.'),
	cell: z.string().min(1, 'Choose the cell.'),
	fuelBatch: z.string().min(1, 'Choose the fuel batch.'),
	kind: z.enum(RUN_KINDS).default('power_sweep'),
	booking: z.string().default(''),
	/** Wall clock of the lab, as `datetime-local` gives it. */
	startedAt: z.string().regex(/^\d{4}-\d\d-\d\dT\d\d:\d\d(:\d\d)?$/, 'Give the date and time of the start.'),
	limitSet: z.string().default(''),
	correction: z.enum(CORRECTIONS).default('none'),
	net: z.enum(['', 'net', 'gross']).default(''),
	barometerKpa: optionalNumber(50, 115, 'kPa'),
	temperatureC: optionalNumber(-60, 70, '°C'),
	humidityPct: optionalNumber(0, 100, '% RH')
});

const LISTED = 200;

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'run.open');
	const { deps } = locals;
	return pageData({ locals }, async () => {
		const asked = (name: string) => url.searchParams.get(name) || undefined;
		const [builds, cells, batches, limitSets, clients, start] = await Promise.all([
			listBuilds(deps, who, { limit: LISTED }),
			listCells(deps, who),
			listFuelBatches(deps, who, { limit: LISTED }),
			listLimitSets(deps, who),
			listClients(deps, who),
			readRunStart(deps, who, {
				booking: asked('booking'),
				build: asked('build'),
				cell: asked('cell'),
				fuelBatch: asked('fuelBatch')
			})
		]);
		const given = {
			build: start.build ?? '',
			cell: start.cell ?? '',
			fuelBatch: start.fuelBatch ?? '',
			booking: start.booking?.id ?? '',
			...(start.kind ? { kind: start.kind } : {}),
			startedAt: wallClock(deps.now(), deps.config.labTimeZone)
		};
		return {
			form: await superValidate(given, zod4(RunForm), { errors: false, id: 'record' }),
			bench: await superValidate(clients.length === 1 ? { client: clients[0]!.code } : {}, zod4(BenchForm), {
				errors: false,
				id: 'bench'
			}),
			given: { build: given.build, cell: given.cell, fuelBatch: given.fuelBatch },
			start,
			needs: benchNeeds(who, {
				clients: clients.length,
				batches: batches.items.length,
				cells: cells.length
			}),
			clients: clients.map(({ code, name }) => ({ code, name })),
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
	open: async ({ request, locals }) => {
		const who = personMay(locals, 'run.open');
		const form = await superValidate(request, zod4(RunForm), { id: 'record' });
		if (!form.valid) return fail(400, { form });
		const { startedAt, limitSet, booking, net, barometerKpa, temperatureC, humidityPct, ...rest } = form.data;
		let number: string;
		try {
			const run = await openRun(
				locals.deps,
				who,
				NewRun.parse({
					...rest,
					startedAt: labInstant(locals.deps.config, startedAt, 'startedAt').toISOString(),
					limitSet: limitSet || null,
					booking: booking || null,
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
	},

	prepare: async ({ request, locals }) => {
		const who = personMay(locals, 'run.open');
		personMay(locals, 'engine.write');
		const form = await superValidate(request, zod4(BenchForm), { id: 'bench' });
		if (!form.valid) return fail(400, { form });
		let chosen: URLSearchParams;
		try {
			const made = await makeBench(locals.deps, who, {
				...form.data,
				displacementL: form.data.displacementL ?? 0,
				strokesPerCycle: Number(form.data.strokesPerCycle)
			});
			chosen = new URLSearchParams({
				build: made.build.id,
				...(made.cell ? { cell: made.cell.id } : {}),
				...(made.fuelBatch ? { fuelBatch: made.fuelBatch.id } : {})
			});
		} catch (cause) {
			return refused(form, cause);
		}
		redirect(303, `/runs/new?${chosen.toString()}`);
	}
};

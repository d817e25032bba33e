import { DateTime } from 'luxon';
import type { Page } from 'playwright-core';
import { setTimeout as sleep } from 'node:timers/promises';
import { ROLES } from '../../src/lib/server/access';
import type { Stack } from '../setup/stack';
import { bytesOf, truthOf } from '../traces/traces';
import { addMaker } from './people';

const TRACE = 'energy-flow-limit.csv';
const truth = truthOf(TRACE);

/** What a page's own script would send, as the person who is signed in there. */
const send = (page: Page, path: string, type: string, text: string) =>
	page.evaluate(
		async ([to, contentType, body]) => {
			const answer = await fetch(`/api/v1${to}`, {
				method: 'POST',
				headers: { 'content-type': contentType! },
				body: body!
			});
			return { status: answer.status, text: await answer.text() };
		},
		[path, type, text]
	);

export type StoryLab = Awaited<ReturnType<typeof furnishStory>>;

/** Two cells of which one is too small, a house with two builds and its rival, and everyone but the one who is invited. */
export async function furnishStory(stack: Stack, zone: string) {
	const staff = ROLES.filter((role) => role !== 'client');
	const makers = await Promise.all(
		staff.map((role) => addMaker(stack, { email: `${role}@fellmoor.example`, name: `Sam ${role}`, role }))
	);
	const make = makers[staff.indexOf('manager')]!;
	const cells = [];
	for (const [code, maxTorqueNm] of [
		['C1', 500],
		['C2', 30]
	])
		cells.push(
			await make('/cells', {
				code,
				name: 'Test cell',
				absorber: { kind: 'ac', maxPowerKw: 300, maxTorqueNm, maxSpeedRpm: 13_000 },
				rigUpMinutes: 30,
				rigDownMinutes: 0
			})
		);
	const fuel = await make('/fuels', { code: 'F1', name: 'Reference fuel' });
	const houses = [];
	for (const [code, name] of [
		['HB', 'Hallbeck Engines'],
		['TW', 'Tarnwick Works']
	] as const) {
		await make('/clients', { code, name });
		const engine = await make('/engines', {
			client: code,
			code: `${code}-E1`,
			name: 'Two litre four',
			displacementL: truth.engine.displacement_l,
			cylinders: 4,
			strokesPerCycle: 4,
			ignition: 'spark',
			maxSpeedRpm: 12_000,
			expectedTorque: [
				[1000, 40],
				[12_000, 55]
			]
		});
		const batch = await make('/fuel-batches', {
			client: code,
			fuel: 'F1',
			code: `${code}-Q1`,
			lhvMjKg: truth.engine.lhv_mj_per_kg,
			afrStoich: truth.engine.afr_stoich
		});
		const buildOf = (number: string, title: string) =>
			make('/builds', { client: code, engine: `${code}-E1`, number, title, parts: [] });
		const build = await buildOf(`${code}-B1`, 'As delivered');
		await buildOf(`${code}-B2`, 'Longer runners');
		houses.push({ engine, batch, build });
	}
	const limits = await make('/limit-sets', {
		client: 'HB',
		code: 'L1',
		title: 'Energy flow',
		rules: [
			{
				title: 'Fuel energy flow over speed',
				subject: { channel: 'fuel_energy_flow' },
				relation: 'at_most',
				limit: { over: 'speed', table: truth.limit!.table },
				holdS: truth.limit!.hold_s,
				severity: 'breach'
			}
		]
	});
	const rival = 'tom@tarnwick.example';
	const askRival = await addMaker(stack, {
		email: rival,
		name: 'Tom Reed',
		role: 'client',
		clientCode: 'TW'
	});
	const day = DateTime.now().setZone(zone).plus({ days: 2 }).startOf('day');
	const theirs = await askRival('/bookings', {
		cell: 'C1',
		build: 'TW-B1',
		from: day.set({ hour: 16 }).toUTC().toISO(),
		to: day.set({ hour: 18 }).toUTC().toISO()
	});
	await make(`/bookings/${theirs.id}/confirm`, {});
	const typed = (hour: number) => day.set({ hour }).toFormat("yyyy-MM-dd'T'HH:mm");
	const { build, engine, batch } = houses[0]!;

	return {
		build,
		rival,
		wish: { notBefore: typed(8), notAfter: typed(20) },
		changes: {
			build: `/builds/${build.id}/edit`,
			engine: `/builds/engines/${engine.id}/edit`,
			fuel: `/lab/fuels/${fuel.id}/edit`,
			batch: `/lab/fuels/batches/${batch.id}/edit`,
			cell: '/lab/cells/C1/edit',
			chain: '/lab/cells/C1/torque-chain/new',
			limits: `/lab/limits/${limits.id}/new-version`
		},
		/** The status of a post that a page of this person might send. */
		statusOf: async (page: Page, path: string) => (await send(page, path, 'application/json', '{}')).status,
		/** The first run of the build, with figures, last week. */
		async earlierRun(page: Page) {
			const opened = await send(
				page,
				'/runs',
				'application/json',
				JSON.stringify({
					build: build.id,
					cell: 'C1',
					fuelBatch: batch.id,
					kind: 'power_sweep',
					startedAt: day.minus({ days: 9 }).toUTC().toISO()
				})
			);
			if (opened.status !== 201) throw new Error(opened.text);
			const { id } = JSON.parse(opened.text) as { id: string };
			await send(
				page,
				`/runs/${id}/traces?filename=earlier.csv`,
				'text/csv',
				new TextDecoder().decode(bytesOf(TRACE))
			);
			for (const until = Date.now() + 60_000; Date.now() < until; await sleep(200)) {
				const answer = await page.request.get(`/api/v1/runs/${id}`);
				const { traces } = (await answer.json()) as { traces: { state: string }[] };
				if (traces[0]?.state === 'ready') return;
			}
			throw new Error('The earlier trace is not read within a minute.');
		}
	};
}

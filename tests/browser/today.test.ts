import type { Page } from 'playwright-core';
import { beforeAll, describe, expect, it } from 'vitest';
import { ROLES, type Role } from '../../src/lib/server/access';
import { useBrowser } from '../setup/browser';
import { useStack } from '../setup/stack';
import { expectAccessible } from './accessible';
import { addMaker, type Maker } from './people';
import { Complaints, openVisitor, signIn } from './visitor';

/** The board of one afternoon, as each of the six roles and a rival has it. */
const stack = useStack();
const browser = useBrowser();
const complaints = new Complaints();
const MINUTE_MS = 60_000;
const at = (minutes: number) => new Date(Date.now() + minutes * MINUTE_MS).toISOString();

const pages = {} as Record<Role | 'rival', Page>;
let lab: Maker;
let own = { id: '', number: '' };
let rivals = { id: '', number: '' };
let asked = { id: '', number: '' };
let unready = { id: '', number: '' };

beforeAll(async () => {
	const people = ROLES.filter((role) => role !== 'client').map((role) => ({
		email: `${role}@fellmoor.example`,
		name: `Sam ${role}`,
		role
	}));
	const makers = await Promise.all(people.map((person) => addMaker(stack.current, person)));
	lab = makers[people.findIndex(({ role }) => role === 'manager')]!;
	await lab('/cells', {
		code: 'C1',
		name: 'A cell with a name that is rather longer than cells have as a rule, to see where it goes',
		absorber: { kind: 'ac', maxPowerKw: 300, maxTorqueNm: 500, maxSpeedRpm: 9000 },
		rigUpMinutes: 30,
		rigDownMinutes: 15
	});
	await lab('/cells', {
		code: 'C2',
		name: 'Quiet cell',
		absorber: { kind: 'eddy_current', maxPowerKw: 200, maxTorqueNm: 400, maxSpeedRpm: 8000 }
	});
	const builds: { id: string; number: string }[] = [];
	for (const [code, role] of [
		['HB', 'client'],
		['TW', 'rival']
	] as const) {
		await lab('/clients', { code, name: `${code} Engines` });
		await addMaker(stack.current, {
			email: `${role}@${code.toLowerCase()}.example`,
			name: `Alex ${code}`,
			role: 'client',
			clientCode: code
		});
		await lab('/engines', {
			client: code,
			code: `E-${code}`,
			name: 'Engine',
			displacementL: 2,
			cylinders: 4,
			strokesPerCycle: 4,
			ignition: 'spark'
		});
		builds.push(
			await lab('/builds', {
				client: code,
				engine: `E-${code}`,
				number: `${code}.1`,
				title: `${code} long cam`
			})
		);
	}
	unready = builds[0]!;
	const slot = async (build: string, from: number, to: number) => {
		const booking = await lab('/bookings', { cell: 'C1', build, from: at(from), to: at(to) });
		await lab(`/bookings/${booking.id}/confirm`, {});
		return booking;
	};
	own = await slot(builds[0]!.id, -40, 60);
	rivals = await slot(builds[1]!.id, 110, 170);
	asked = await lab('/bookings', { cell: 'C2', build: builds[1]!.id, from: at(2000), to: at(2100) });
	for (const role of [...ROLES, 'rival'] as const) {
		pages[role] = await openVisitor(browser.current, stack.current.origin, complaints);
		const house = { client: 'hb', rival: 'tw' }[role as string] ?? 'fellmoor';
		await signIn(pages[role], `${role}@${house}.example`);
	}
});

const lane = (page: Page, cell: string) => page.getByRole('region', { name: cell, exact: true });

describe('the board', () => {
	it('is the page after sign-in, the first place of the rail, and what the first address leads to', async () => {
		for (const page of Object.values(pages)) expect(new URL(page.url()).pathname).toBe('/today');
		const places = pages.admin.getByRole('navigation', { name: 'Main' }).first().getByRole('listitem');
		expect((await places.first().innerText()).trim()).toBe('Today');
		await pages.admin.goto('/');
		expect(new URL(pages.admin.url()).pathname).toBe('/today');
	});

	it('shows every role of the lab who is on, that it is late, and what is still needed', async () => {
		for (const role of ROLES.filter((each) => each !== 'client')) {
			const c1 = lane(pages[role], 'C1');
			const text = await c1.innerText();
			expect(text, role).toContain(own.number);
			expect(text, role).toMatch(/Late by 4\d min\./);
			expect(text, role).toContain(`${rivals.number} of TW`);
			for (const need of ['Fuel batch not chosen', 'No record opened', 'still in preparation'])
				expect(text, `${role}: ${need}`).toContain(need);
			await c1.getByRole('link', { name: new RegExp(`^${own.number}, .* confirmed`) }).waitFor();
			expect(await lane(pages[role], 'C2').innerText()).toContain('Free');
		}
	});

	it('leads from each thing to where it is done', async () => {
		const target = (page: Page, name: string | RegExp) =>
			lane(page, 'C1').getByRole('link', { name }).first().getAttribute('href');
		expect(await target(pages.operator, 'No record opened')).toBe(`/runs/new?booking=${own.id}`);
		expect(await target(pages.builder, 'No record opened')).toBe(`/bookings/${own.id}`);
		expect(await target(pages.builder, /still in preparation/)).toBe(`/builds/${unready.id}`);
		const operator = pages.operator;
		await lane(operator, 'C1').getByRole('link', { name: 'No record opened' }).click();
		await operator
			.getByRole('heading', { name: /cannot open a record yet|Open a record/ })
			.first()
			.waitFor();
		await operator.goto('/today');
	});

	it('puts requests before the manager, and builds that are needed before the builder', async () => {
		const requests = pages.manager.getByRole('region', { name: /waits for your decision/ });
		await requests.getByRole('link', { name: asked.number }).click();
		await pages.manager.waitForURL(`**/bookings/${asked.id}`);
		await pages.manager.goto('/today');
		const needed = pages.builder.getByRole('region', { name: 'Builds needed this week, not ready' });
		expect(await needed.innerText()).toContain('HB.1');
		expect(await pages.builder.getByText('your decision').count()).toBe(0);
	});

	it('offers to read a file only to those who may open a record', async () => {
		for (const role of ROLES)
			expect(await pages[role].getByLabel('Choose files').count(), role).toBe(
				['manager', 'engineer', 'operator'].includes(role) ? 1 : 0
			);
	});

	it('shows a client own slots, and of the rival no more than taken time', async () => {
		const text = await pages.client.locator('main').innerText();
		expect(text).toContain(own.number);
		expect(text).toMatch(/Taken from \d\d:\d\d/);
		const html = await pages.client.content();
		for (const word of [rivals.number, rivals.id, asked.number, asked.id, 'TW'])
			expect(html.includes(word), word).toBe(false);
		const theirs = await pages.rival.locator('main').innerText();
		expect(theirs).toContain(rivals.number);
		expect(theirs).toMatch(/Taken, until/);
		expect(theirs).not.toContain(own.number);
	});

	it('is renewed when someone comes back to it', async () => {
		await lab(`/bookings/${asked.id}/confirm`, {});
		await pages.engineer.evaluate(() => document.dispatchEvent(new Event('visibilitychange')));
		await lane(pages.engineer, 'C2').getByRole('link', { name: asked.number }).first().waitFor();
	});

	it('is for everyone to read, on a phone and in the dark', async () => {
		await expectAccessible(pages.manager);
		await expectAccessible(pages.client);
		expect(complaints.said).toEqual([]);
	});
});

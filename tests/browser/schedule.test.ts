import { DateTime } from 'luxon';
import type { Locator, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { useBrowser } from '../setup/browser';
import { useStack } from '../setup/stack';
import { expectAccessible } from './accessible';
import { addMaker, type Maker } from './people';
import { Complaints, focused, openVisitor, signIn } from './visitor';

/** The schedule as people work on it: drawing, dragging and keys, with another person looking on. */
const ZONE = 'Europe/Stockholm';
const stack = useStack({ LAB_TIME_ZONE: ZONE });
const browser = useBrowser();
const complaints = new Complaints();

const day = DateTime.now().setZone(ZONE).plus({ weeks: 3 }).startOf('week');
const at = (hour: number, days = 0) => day.plus({ days }).set({ hour }).toUTC().toISO();
const VIEW = `/schedule?view=day&date=${day.toISODate()}`;
/** Half an hour of the day view. */
const SLOT_PX = 22;

let lab: Maker;
let asker: Maker;
let build = { id: '', number: '' };
let manager: Page;
let client: Page;

const open = (options = {}) => openVisitor(browser.current, stack.current.origin, complaints, options);

beforeAll(async () => {
	lab = await addMaker(stack.current, { email: 'mira@fellmoor.example', name: 'Mira Holt', role: 'manager' });
	for (const [code, maxTorqueNm] of [
		['C1', 500],
		['C2', 120]
	])
		await lab('/cells', {
			code,
			name: 'Test cell',
			absorber: { kind: 'ac', maxPowerKw: 300, maxTorqueNm, maxSpeedRpm: 9000 },
			rigUpMinutes: 60,
			rigDownMinutes: 0
		});
	await lab('/clients', { code: 'HB', name: 'Hallbeck Engines' });
	asker = await addMaker(stack.current, {
		email: 'asa@hallbeck.example',
		name: 'Asa Moor',
		role: 'client',
		clientCode: 'HB'
	});
	await lab('/engines', {
		client: 'HB',
		code: 'HB-E1',
		name: 'Two litre four',
		displacementL: 1.998,
		cylinders: 4,
		strokesPerCycle: 4,
		ignition: 'spark',
		maxSpeedRpm: 7000,
		expectedTorque: [
			[1000, 150],
			[7000, 180]
		]
	});
	build = await lab('/builds', {
		client: 'HB',
		engine: 'HB-E1',
		number: 'HB-B1',
		title: 'As delivered',
		parts: []
	});
	manager = await open();
	client = await open();
	await signIn(manager, 'mira@fellmoor.example');
	await signIn(client, 'asa@hallbeck.example');
});

afterAll(() => expect(complaints.said).toEqual([]));

/** A confirmed slot of the client's, made through the API. */
async function slot(
	from: number,
	to: number,
	days = 0,
	cell = 'C1'
): Promise<{ id: string; number: string }> {
	const made = await asker('/bookings', { cell, build: build.id, from: at(from, days), to: at(to, days) });
	await lab(`/bookings/${made.id}/confirm`, {});
	return made;
}

async function look(page: Page, address = VIEW) {
	await page.goto(address);
	await page.locator('.calendar .ec-body .ec-day').first().waitFor();
	// Only now is it known to be told of what others change.
	await page.waitForFunction(() => document.readyState === 'complete');
}
const bar = (page: Page, number: string) => page.locator('.calendar .ec-event.entry', { hasText: number });
const toast = (page: Page, text: string | RegExp) =>
	page.locator('.toasts').getByText(text).first().waitFor();
const told = (page: Page) => page.locator('.told');

/** Drags from a point inside by so many half hours, without letting go. */
async function pull(page: Page, what: Locator, halfHours: number, across = 0, from = { x: 24, y: 12 }) {
	await what.scrollIntoViewIfNeeded();
	const box = (await what.boundingBox())!;
	const [x, y] = [box.x + from.x, box.y + from.y];
	await page.mouse.move(x, y);
	await page.mouse.down();
	for (const part of [0.5, 1])
		await page.mouse.move(x + across * part, y + halfHours * SLOT_PX * part, { steps: 5 });
}

const wall = (hour: number, days = 0) => day.plus({ days }).set({ hour }).toFormat("yyyy-MM-dd'T'HH:mm");

describe('the schedule', () => {
	it('is moved on by its manager, told to the other at once, and moved back by undo', async () => {
		const { number } = await slot(9, 12);
		await look(manager);
		await look(client);
		await bar(client, number).waitFor();
		await pull(manager, bar(manager, number), 2);
		expect(await told(manager).innerText()).toMatch(new RegExp(`^${number}: C1, .*10:00–13:00. Free.$`));
		await manager.mouse.up();
		await toast(manager, `${number} is moved.`);
		expect(await bar(manager, number).innerText()).toMatch(/10:00\s*[–-]\s*13:00/);
		await client.locator('.news', { hasText: `${number} now stands in C1` }).waitFor();
		expect(await bar(client, number).innerText()).toMatch(/10:00\s*[–-]\s*13:00/);
		await manager.getByRole('button', { name: 'Undo' }).click();
		await toast(manager, `${number} stands where it stood.`);
		await manager.locator('.calendar .ec-event.entry', { hasText: /09:00\s*[–-]\s*12:00/ }).waitFor();
	});

	it('says with what a place clashes while it is dragged to, and puts it back when the server refuses', async () => {
		const [first, second] = [await slot(9, 11, 1), await slot(14, 16, 1)];
		await look(manager, VIEW.replace(day.toISODate()!, day.plus({ days: 1 }).toISODate()!));
		await pull(manager, bar(manager, second.number), -8);
		expect(await told(manager).innerText()).toContain(`Clashes with ${first.number}`);
		await manager.mouse.up();
		const alert = manager.getByRole('alert');
		await alert.waitFor();
		expect(await alert.innerText()).toMatch(
			new RegExp(`^Not moved\\. C1 is taken by ${first.number} from .*, rigging included`)
		);
		expect(await bar(manager, second.number).innerText()).toMatch(/14:00\s*[–-]\s*16:00/);
	});

	it('is asked by a client to move a slot, which stands until then', async () => {
		const { number } = await slot(9, 11, 2);
		const address = VIEW.replace(day.toISODate()!, day.plus({ days: 2 }).toISODate()!);
		await look(client, address);
		await pull(client, bar(client, number), 6);
		await client.mouse.up();
		await toast(client, new RegExp(`asks to move ${number}\\. ${number} stands until`));
		expect(await bar(client, number).innerText()).toMatch(/09:00\s*[–-]\s*11:00/);
		const asked = client.locator('.calendar .entry-requested');
		expect(await asked.innerText()).toMatch(/Requested\s+12:00\s*[–-]\s*14:00/);
		await client.getByRole('button', { name: 'Undo' }).click();
		await toast(client, 'is withdrawn');
		await asked.waitFor({ state: 'detached' });
	});

	it('is worked by keys alone: moved, made longer, put there, and taken back before', async () => {
		const { number } = await slot(9, 11, 3);
		await look(manager, VIEW.replace(day.toISODate()!, day.plus({ days: 3 }).toISODate()!));
		await bar(manager, number).focus();
		await manager.keyboard.press('Alt+ArrowDown');
		await manager.keyboard.press('Alt+ArrowRight');
		expect(await told(manager).innerText()).toMatch(/: C2, .*09:30–11:30\. Free\. Enter places it/);
		await manager.keyboard.press('Escape');
		expect(await told(manager).innerText()).toBe(`${number} stands where it stood.`);
		expect(await bar(manager, number).innerText()).toMatch(/09:00\s*[–-]\s*11:00/);
		await manager.keyboard.press('Alt+Shift+ArrowDown');
		await manager.keyboard.press('Alt+ArrowUp');
		await manager.keyboard.press('Enter');
		await toast(manager, `${number} is moved.`);
		expect(await bar(manager, number).innerText()).toMatch(/08:30\s*[–-]\s*11:00/);
		expect(await focused(manager)).toContain(number);
	});

	it('tells who moves what another has just moved how it stands now', async () => {
		const { id, number } = await slot(9, 11, 4);
		await look(manager, VIEW.replace(day.toISODate()!, day.plus({ days: 4 }).toISODate()!));
		const bars = bar(manager, number);
		await pull(manager, bars, 4);
		await move(id, 13, 15, 4);
		await manager.mouse.up();
		const alert = manager.getByRole('alert');
		await alert.waitFor();
		expect(await alert.innerText()).toMatch(
			new RegExp(`someone changed ${number} a moment ago\\. It stands in C1, .*13:00–15:00 now`)
		);
		expect(await bars.innerText()).toMatch(/13:00\s*[–-]\s*15:00/);
	});

	async function move(id: string, from: number, to: number, days: number) {
		const page = await open();
		await signIn(page, 'mira@fellmoor.example');
		const status = await page.evaluate(
			async ([path, body]) =>
				(
					await fetch(path!, {
						method: 'PATCH',
						headers: { 'content-type': 'application/json' },
						body: body!
					})
				).status,
			[`/api/v1/bookings/${id}`, JSON.stringify({ from: at(from, days), to: at(to, days) })]
		);
		expect(status).toBe(200);
		await page.context().close();
	}

	it('has a request confirmed and declined where it is read, with what it still needs', async () => {
		const [first, second] = [
			await asker('/bookings', { cell: 'C2', build: build.id, from: at(8, 5), to: at(10, 5) }),
			await asker('/bookings', { cell: 'C1', build: build.id, from: at(14, 5), to: at(16, 5) })
		];
		await look(manager, VIEW.replace(day.toISODate()!, day.plus({ days: 5 }).toISODate()!));
		await bar(manager, first.number).press('Enter');
		const panel = manager.getByRole('dialog', { name: first.number });
		await panel.getByText('the machine can hold 120 N·m there').waitFor();
		await panel.getByRole('button', { name: 'Decline…' }).click();
		await panel.getByRole('button', { name: 'Decline request' }).click();
		await panel.getByText('Say why').waitFor();
		await panel.getByLabel('Reason').fill('The machine is too small.');
		await panel.getByRole('button', { name: 'Decline request' }).click();
		await toast(manager, `${first.number} is declined`);
		await bar(manager, first.number).waitFor({ state: 'detached' });
		await bar(manager, second.number).press('Enter');
		await manager.getByRole('button', { name: 'Confirm slot' }).click();
		await toast(manager, `${second.number} is confirmed`);
		await manager.locator('.calendar .entry-confirmed', { hasText: second.number }).waitFor();
	});

	it('lets a manager close a cell by drawing, and open it again', async () => {
		await look(manager, VIEW.replace(day.toISODate()!, day.plus({ days: 6 }).toISODate()!));
		const column = manager.locator('.calendar .ec-body .ec-day').first();
		await pull(manager, column, 4, 0, { x: 24, y: 16.5 * SLOT_PX });
		await manager.mouse.up();
		const panel = manager.getByRole('dialog', { name: 'Free time in C1' });
		await panel.getByRole('link', { name: 'Close cell' }).click();
		await manager.waitForURL(/schedule\/close/);
		expect(await manager.getByLabel('Closed from').inputValue()).toBe(wall(8, 6));
		expect(await manager.getByLabel('Closed to').inputValue()).toBe(
			day.plus({ days: 6 }).set({ hour: 10, minute: 30 }).toFormat("yyyy-MM-dd'T'HH:mm")
		);
		await manager.getByLabel('What for').fill('Torque calibration');
		await manager.getByRole('button', { name: 'Close cell' }).click();
		await manager.waitForURL(/schedule\?view=week/);
		const closure = manager.locator('.calendar .ec-event.entry-closed');
		await closure.press('Enter');
		await manager.getByRole('button', { name: 'Remove closure' }).click();
		await toast(manager, 'C1 is open again.');
		await closure.waitFor({ state: 'detached' });
	});
});

describe('a request', () => {
	it('is led to a slot that fits, and told why other cells do not', async () => {
		await client.goto('/bookings/new', { waitUntil: 'networkidle' });
		await client.getByLabel('Build').selectOption({ index: 1 });
		await client.getByLabel('Not before').fill(wall(6, 7));
		await client.getByLabel('Not after').fill(wall(20, 8));
		await client.getByLabel('Length of the test').fill('3');
		await client.getByRole('button', { name: 'Find slots' }).click();
		const offer = client.getByRole('link', { name: /C1 .* Take this/ });
		await offer.waitFor();
		expect(await client.locator('.finder').innerText()).toMatch(
			/C2\s+The engine is expected to give 1\d\d N·m/
		);
		await offer.click();
		expect(await client.getByLabel('Test from').inputValue()).toBe(wall(6, 7));
		expect(await client.getByLabel('Test to').inputValue()).toBe(wall(9, 7));
		expect(await client.getByLabel('Cell').locator('option:checked').innerText()).toContain('C1');
		await client.getByLabel('Cell').selectOption({ label: 'C2 · Test cell' });
		await client.getByText('the machine can hold 120 N·m there').first().waitFor();
		await client.getByLabel('Cell').selectOption({ label: 'C1 · Test cell' });
		await client.getByText('can take up what the engine is expected to give').waitFor();
		await client.getByRole('button', { name: 'Request slot' }).click();
		await client.waitForURL(/\/bookings\/HB-/);
	});
});

describe('its pages', () => {
	it.each([VIEW, VIEW.replace('day', 'week')])(
		'%s is accessible with a booking read beside it',
		async (path) => {
			await look(manager, path);
			await manager.locator('.calendar .ec-event.entry').first().press('Enter');
			await manager.getByRole('dialog').getByRole('link', { name: 'Open booking' }).waitFor();
			await expectAccessible(manager);
		}
	);

	it.each(['/schedule/close', '/bookings/new'])('%s is accessible', async (path) => {
		await manager.goto(path, { waitUntil: 'networkidle' });
		await expectAccessible(manager);
	});
});

import { DateTime } from 'luxon';
import pg from 'pg';
import type { Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { useBrowser } from '../setup/browser';
import { useStack } from '../setup/stack';
import { addMaker, PASSWORD } from './people';
import { expectAccessible } from './accessible';
import { entryOf, mailTo } from './mails';
import { Complaints, focused, openVisitor, signIn, tabTo } from './visitor';

/** A slot from the wish to the calendar entry, as people of three houses go through it. */
const ZONE = 'Europe/Stockholm';
const stack = useStack({ LAB_TIME_ZONE: ZONE });
const browser = useBrowser();
const complaints = new Complaints();

/** Monday in two weeks, 09:00 to 13:00 on the lab's clock. */
const from = DateTime.now().setZone(ZONE).plus({ weeks: 2 }).startOf('week').set({ hour: 9 });
const to = from.plus({ hours: 4 });
const typed = (at: DateTime) => at.toFormat("yyyy-MM-dd'T'HH:mm");

let build = { id: '', number: '' };
let booking = '';
let rivals = { id: '', number: '' };
let manager: Page;
let client: Page;

const open = (options = {}) => openVisitor(browser.current, stack.current.origin, complaints, options);

beforeAll(async () => {
	const lab = await addMaker(stack.current, {
		email: 'mira@fellmoor.example',
		name: 'Mira Holt',
		role: 'manager'
	});
	await lab('/cells', {
		code: 'C1',
		name: 'Transient cell',
		absorber: { kind: 'ac', maxPowerKw: 300, maxTorqueNm: 500, maxSpeedRpm: 9000 },
		rigUpMinutes: 60,
		rigDownMinutes: 30
	});
	await lab('/fuels', { code: 'F1', name: 'Reference fuel' });
	const houses = [
		['HB', 'Hallbeck Engines', 'asa@hallbeck.example'],
		['TW', 'Tarnwick Works', 'tom@tarnwick.example']
	] as const;
	for (const [code, name, email] of houses) {
		await lab('/clients', { code, name });
		const asker = await addMaker(stack.current, {
			email,
			name: 'Alex Moor',
			role: 'client',
			clientCode: code
		});
		await lab('/engines', {
			client: code,
			code: `${code}-E1`,
			name: 'Two litre four',
			displacementL: 1.998,
			cylinders: 4,
			strokesPerCycle: 4,
			ignition: 'spark',
			maxSpeedRpm: 7000
		});
		const made = await lab('/builds', {
			client: code,
			engine: `${code}-E1`,
			number: `${code}-B1`,
			title: 'As delivered',
			parts: [{ name: 'Camshaft', value: 'A' }]
		});
		await lab('/fuel-batches', {
			client: code,
			fuel: 'F1',
			code: `${code}-Q1`,
			lhvMjKg: 42.7,
			afrStoich: 14.5
		});
		if (code === 'HB') build = made;
		else
			// An hour into the other's slot; requests may overlap.
			rivals = await asker('/bookings', {
				cell: 'C1',
				build: made.id,
				from: from.plus({ hours: 1 }).toUTC().toISO(),
				to: to.plus({ hours: 1 }).toUTC().toISO()
			});
	}
	await lab('/limit-sets', {
		client: 'HB',
		code: 'L1',
		title: 'Speed',
		rules: [
			{
				title: 'Overspeed',
				subject: { channel: 'speed' },
				relation: 'at_most',
				limit: 7000,
				holdS: 0,
				severity: 'review'
			}
		]
	});
	await lab('/closures', {
		cell: 'C1',
		from: to.plus({ days: 1 }).toUTC().toISO(),
		to: to.plus({ days: 1, hours: 2 }).toUTC().toISO(),
		title: 'Calibration of the torque measurement'
	});
	manager = await open();
	client = await open();
});

afterAll(() => expect(complaints.said).toEqual([]));

async function storedBooking(number: string) {
	const database = new pg.Client({ connectionString: stack.current.database.url('superuser') });
	await database.connect();
	try {
		const { rows } = await database.query<{ id: string; sequence: number }>(
			'select id, calendar_sequence as sequence from booking where number = $1',
			[number]
		);
		if (!rows[0]) throw new Error(`There is no booking ${number}.`);
		return rows[0];
	} finally {
		await database.end();
	}
}

describe('a slot', () => {
	it('is reached by a client who has a keyboard only', async () => {
		await client.goto('/bookings/new', { waitUntil: 'networkidle' });
		expect(new URL(client.url()).pathname).toBe('/sign-in');
		await tabTo(client, 'email');
		await client.keyboard.type('asa@hallbeck.example');
		await client.keyboard.press('Tab');
		expect(await focused(client)).toBe('password');
		await client.keyboard.type(PASSWORD);
		await client.keyboard.press('Enter');
		await client.waitForURL('**/bookings/new');
		await client.waitForLoadState('networkidle');
		// Past the rail in one step.
		await client.keyboard.press('Tab');
		expect(await focused(client)).toBe('Skip to content');
		await client.keyboard.press('Enter');
		await tabTo(client, 'build');
		await client.keyboard.type(`${build.number} `);
		await tabTo(client, 'cell');
		await client.keyboard.type('C1');
		await client.keyboard.press('Tab');
		expect(await focused(client)).toBe('from');
		// The order of the parts follows the browser's own language; a year may have six digits, so it has to be left.
		for (const order of ['MMddyyyy', 'ddMMyyyy']) {
			await client.keyboard.type(from.toFormat(order));
			await client.keyboard.press('ArrowRight');
			await client.keyboard.type(from.toFormat('HHmm'));
			// Morning, on clocks of twelve hours.
			await client.keyboard.type('a');
			if ((await client.getByLabel('Test from').inputValue()) === typed(from)) break;
			while ((await focused(client)) === 'from') await client.keyboard.press('Shift+Tab');
			await client.keyboard.press('Tab');
		}
		expect(await client.getByLabel('Build').inputValue()).toBe(build.id);
		expect(await client.getByLabel('Test from').inputValue()).toBe(typed(from));
	});

	it('that ends before it begins is refused at the field, with all that was typed kept', async () => {
		await client.getByLabel('Test to').fill(typed(from.minus({ hours: 2 })));
		await client.getByLabel('Purpose').fill('Full load curve before the camshaft is changed.');
		await client.getByRole('button', { name: 'Request slot' }).click();
		const until = client.getByLabel('Test to');
		await client.locator('[name=to][aria-invalid=true]').waitFor();
		const said = await until.evaluate((input) =>
			(input.getAttribute('aria-describedby') ?? '')
				.split(' ')
				.map((id) => document.getElementById(id)?.textContent ?? '')
				.join(' ')
		);
		expect(said).toMatch(/must be later than/i);
		expect(await until.inputValue()).toBe(typed(from.minus({ hours: 2 })));
		expect(await client.getByLabel('Test from').inputValue()).toBe(typed(from));
		expect(await client.getByLabel('Build').inputValue()).toBe(build.id);
		expect(await client.getByLabel('Purpose').inputValue()).toMatch(/camshaft/);
	});

	it('is then requested and seen as requested', async () => {
		await client.getByLabel('Test to').fill(typed(to));
		await client.getByRole('button', { name: 'Request slot' }).click();
		await client.waitForURL(/\/bookings\/HB-/);
		booking = decodeURIComponent(new URL(client.url()).pathname.split('/').pop() ?? '');
		const main = client.getByRole('main');
		await main.getByText('Requested', { exact: true }).first().waitFor();
		// The lab's clock, though this browser's is nine hours behind it.
		expect(await main.innerText()).toContain(
			`${from.toFormat('ccc d LLL yyyy, HH:mm')}–${to.toFormat('HH:mm')}`
		);
		expect(await main.getByRole('button', { name: 'Confirm slot' }).count()).toBe(0);
		expect(await main.innerText()).not.toContain(rivals.number);
		await client.goto('/bookings');
		const row = client.getByRole('row', { name: booking });
		expect(await row.innerText()).toContain('Requested');
		expect(await client.getByRole('row').count()).toBe(2);
	});

	it('is confirmed by a manager, who was mailed of it, and the client sees it', async () => {
		const asked = await mailTo(stack.current, 'mira@fellmoor.example', new RegExp(booking));
		expect(asked.text).toContain(booking);
		await signIn(manager, 'mira@fellmoor.example');
		await manager.goto(`/bookings/${booking}`, { waitUntil: 'networkidle' });
		await manager.getByRole('button', { name: 'Confirm slot' }).click();
		await manager.getByRole('status').getByText(`${booking} is confirmed`).waitFor();
		await client.goto(`/bookings/${booking}`);
		await client.getByRole('main').getByText('Confirmed', { exact: true }).first().waitFor();
	});

	it('comes to the client as a calendar entry of the same time', async () => {
		const mail = await mailTo(stack.current, 'asa@hallbeck.example', /confirmed/i);
		expect(mail.subject).toContain(booking);
		const { id, sequence } = await storedBooking(booking);
		expect(entryOf(mail)).toEqual({
			method: 'REQUEST',
			uid: `booking-${id}@localhost`,
			sequence,
			from: from.toUTC().toISO(),
			to: to.toUTC().toISO()
		});
	});

	it('cannot be given a second time: the manager reads with which booking it clashes', async () => {
		await manager.goto(`/bookings/${rivals.number}`, { waitUntil: 'networkidle' });
		const main = manager.getByRole('main');
		await main.getByRole('button', { name: 'Confirm slot' }).click();
		const refusal = main.getByRole('alert');
		await refusal.waitFor();
		expect(await refusal.innerText()).toMatch(
			new RegExp(`^Not confirmed\\. C1 is taken by ${booking} from .*, rigging included`)
		);
		expect(await main.getByText('Requested', { exact: true }).count()).toBeGreaterThan(0);
	});

	it('is only "taken" to a rival', async () => {
		const rival = await open();
		await signIn(rival, 'tom@tarnwick.example');
		await rival.goto(`/bookings/${rivals.number}`);
		const text = await rival.getByRole('main').innerText();
		expect(text).toContain('C1 is taken');
		const html = await rival.content();
		for (const secret of [booking, build.id, build.number, 'Hallbeck', 'camshaft'])
			expect(html, secret).not.toContain(secret);
		await rival.goto(`/schedule?view=day&date=${from.toISODate()}`, { waitUntil: 'networkidle' });
		expect(await rival.getByRole('region', { name: /^The same as a list/ }).innerText()).toContain('Taken');
		await rival.locator('.calendar .entry-taken').first().waitFor();
		for (const secret of [booking, build.id, build.number, 'Hallbeck'])
			expect(await rival.content(), secret).not.toContain(secret);
		await rival.goto('/bookings');
		expect(await rival.content()).not.toContain(booking);
		await rival.context().close();
	});
});

describe('the schedule', () => {
	it('shows a slot where the lab’s clock has it, and leads to its booking', async () => {
		await client.goto(`/schedule?view=day&date=${from.toISODate()}`, { waitUntil: 'networkidle' });
		const drawn = client.locator('.calendar .entry-confirmed');
		await drawn.waitFor();
		expect(await drawn.innerText()).toMatch(new RegExp(`${booking}\\s+Confirmed\\s+09:00.*13:00`));
		await client.getByRole('link', { name: 'Week', exact: true }).click();
		await client.waitForURL(/view=week/);
		await drawn.focus();
		await client.keyboard.press('Enter');
		await client.getByRole('dialog', { name: booking }).getByRole('link', { name: 'Open booking' }).click();
		await client.waitForURL(/\/bookings\/[0-9a-f-]{36}$/);
		expect(await client.getByRole('heading', { level: 1 }).innerText()).toBe(booking);
	});

	it('takes free time into the form that asks for it', async () => {
		await client.goto(`/schedule?view=day&date=${from.plus({ days: 2 }).toISODate()}`, {
			waitUntil: 'networkidle'
		});
		// From 06:00 on, to which the day is scrolled, two hours down and two and a half long.
		const column = client.locator('.calendar .ec-body .ec-day').first();
		await column.waitFor();
		const [day, halfHour] = await Promise.all([column.boundingBox(), slotHeightPx()]);
		if (!day) throw new Error('The day is not drawn.');
		const at = (halfHours: number) => day.y + (halfHours + 0.5) * halfHour;
		await client.mouse.move(day.x + day.width / 2, at(16));
		await client.mouse.down();
		await client.mouse.move(day.x + day.width / 2, at(18), { steps: 5 });
		await client.mouse.move(day.x + day.width / 2, at(20), { steps: 5 });
		await client.mouse.up();
		await client.waitForURL(/\/bookings\/new/);
		const date = from.plus({ days: 2 }).toISODate();
		expect(await client.getByLabel('Test from').inputValue()).toBe(`${date}T08:00`);
		expect(await client.getByLabel('Test to').inputValue()).toBe(`${date}T10:30`);
		expect(await client.getByLabel('Cell').locator('option:checked').innerText()).toContain('C1');
	});

	const slotHeightPx = () =>
		client
			.locator('.calendar .ec-main')
			.evaluate((main) => parseFloat(getComputedStyle(main).getPropertyValue('--ec-slot-height')));

	it('says what is no day, and shows today', async () => {
		await client.goto('/schedule?date=tomorrow');
		expect(await client.getByRole('alert').innerText()).toContain('“tomorrow” is no day');
	});
});

describe('every page', () => {
	it.each([
		'/builds',
		'/builds/new',
		'/builds/engines/new',
		'/builds/[id]',
		'/bookings',
		'/bookings/new',
		'/bookings/[id]',
		'/lab/cells',
		'/lab/fuels',
		'/lab/limits',
		'/lab/clients',
		'/account',
		'/schedule'
	])('%s is accessible, narrow and wide, light and dark', async (path) => {
		const at = path.replace('/bookings/[id]', `/bookings/${rivals.number}`).replace('[id]', build.id);
		const response = await manager.goto(at, { waitUntil: 'networkidle' });
		expect(response?.status()).toBe(200);
		await expectAccessible(manager);
	});

	it('says so accessibly where there is none', async () => {
		const nowhere = `${stack.current.origin}/nowhere`;
		complaints.expected.add(nowhere);
		const response = await manager.goto(nowhere, { waitUntil: 'networkidle' });
		expect(response?.status()).toBe(404);
		expect(await manager.getByRole('heading', { level: 1 }).innerText()).toBe('Nothing here');
		await expectAccessible(manager);
	});

	it('to sign in at is accessible', async () => {
		const page = await open();
		await page.goto('/sign-in', { waitUntil: 'networkidle' });
		await expectAccessible(page);
		await page.context().close();
	});

	it('raises no error in the browser', () => expect(complaints.said).toEqual([]));
});

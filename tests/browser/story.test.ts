import { DateTime } from 'luxon';
import type { Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { useBrowser } from '../setup/browser';
import { useStack } from '../setup/stack';
import { bytesOf, truthOf } from '../traces/traces';
import { choosePassword, entryOf, linkFrom, mailTo } from './mails';
import { PASSWORD } from './people';
import { furnishStory, type StoryLab } from './story-lab';
import { Complaints, openVisitor, signIn, tabTo } from './visitor';

/** One slot from the invitation of the one who asks for it to the trend it ends in: six roles in turn, and a rival who sees none of it. */
const ZONE = 'Europe/Stockholm';
const stack = useStack({ LAB_TIME_ZONE: ZONE });
const browser = useBrowser();
const complaints = new Complaints();
const ASA = 'asa@hallbeck.example';
const TRACE = 'energy-flow-limit.csv';
const truth = truthOf(TRACE);

let lab: StoryLab;
let client: Page;
let manager: Page;
let operator: Page;
let engineer: Page;
/** The slot of the story, as the lab's wall clock has it. */
let slot = { from: '', to: '' };
let booking = '';
let calendarId = '';
let run = '';

const open = () => openVisitor(browser.current, stack.current.origin, complaints);
async function openAs(name: string): Promise<Page> {
	const page = await open();
	await signIn(page, `${name}@fellmoor.example`);
	return page;
}
const mail = (recipient: string, subject: RegExp) => mailTo(stack.current, recipient, subject);
const section = (page: Page, name: string) => page.getByRole('region', { name, exact: true });
const later = (wall: string, hours: number) => DateTime.fromISO(wall, { zone: ZONE }).plus({ hours });
const clock = (wall: string, hours: number) => later(wall, hours).toFormat('HH:mm');
const instant = (wall: string, hours: number) => later(wall, hours).toUTC().toISO();
const numberIn = (page: Page) => decodeURIComponent(new URL(page.url()).pathname.split('/').pop() ?? '');

/** Opens a schedule's day, whose page holds a stream open and is never idle. */
async function lookAtDay(page: Page) {
	await page.goto(`/schedule?view=day&date=${slot.from.slice(0, 10)}`);
	await page.locator('.calendar .ec-body .ec-day').first().waitFor();
}

beforeAll(async () => {
	lab = await furnishStory(stack.current, ZONE);
	client = await open();
}, 60_000);

afterAll(() => expect(complaints.said).toEqual([]));

describe('the client', () => {
	it('is invited by the admin, and chooses a password behind the mailed link', async () => {
		const admin = await openAs('admin');
		await admin.goto('/lab/people/new', { waitUntil: 'networkidle' });
		await admin.getByLabel('Mail address').fill(ASA);
		await admin.getByLabel('Name').fill('Åsa Moor');
		await admin.getByLabel('Role').selectOption('client');
		await admin.getByLabel('Client', { exact: true }).selectOption('HB');
		await admin.getByRole('button', { name: 'Send invitation' }).click();
		await admin.waitForURL('**/lab/people/*?invited');
		await admin.goto('/lab/people');
		await admin.getByRole('row').filter({ hasText: 'Åsa Moor' }).getByText('Invited').waitFor();
		await admin.context().close();

		const link = await linkFrom(stack.current, ASA, /^Your account/, 'invitation');
		await choosePassword(client, link, PASSWORD);
		await client.goto(link);
		await client.getByRole('heading', { name: 'This link works no more' }).waitFor();
		await signIn(client, ASA);
		expect(new URL(client.url()).pathname).toBe('/today');
	});

	it('takes a slot that fits, and reads why the other cell does not', async () => {
		await client.goto('/bookings/new', { waitUntil: 'networkidle' });
		await client.getByLabel('Build').selectOption({ label: 'HB-B1 · As delivered (in preparation)' });
		await client.getByLabel('Kind of test').selectOption('power_sweep');
		await client.getByLabel('Fuel batch').selectOption({ label: 'HB-Q1 · F1' });
		await client.getByLabel('Not before').fill(lab.wish.notBefore);
		await client.getByLabel('Not after').fill(lab.wish.notAfter);
		await client.getByLabel('Length of the test').fill('3');
		await client.getByRole('button', { name: 'Find slots' }).click();
		const unsuited = client.getByRole('listitem').filter({ hasText: 'C2' });
		await unsuited.getByText('The engine is expected to give').waitFor();
		await client.getByRole('link', { name: /C1 .* Take this/ }).click();
		slot = {
			from: await client.getByLabel('Test from').inputValue(),
			to: await client.getByLabel('Test to').inputValue()
		};
		expect(slot.from >= lab.wish.notBefore && slot.to <= lab.wish.notAfter, slot.from).toBe(true);
		expect(await client.getByLabel('Cell').locator('option:checked').innerText()).toContain('C1');
		await client.getByLabel('Purpose').fill('Energy flow at full load.');
		await client.getByRole('button', { name: 'Request slot' }).click();
		await client.waitForURL(/\/bookings\/HB-/);
		booking = numberIn(client);
		await client.getByRole('main').getByText('Requested', { exact: true }).first().waitFor();
		await client.getByRole('link', { name: 'HB-B1' }).click();
		await client.getByRole('button', { name: 'Follow', exact: true }).click();
		await client.getByText('You follow this build').waitFor();
	});
});

describe('the manager', () => {
	it('is mailed, moves the request an hour later and confirms it, by keyboard alone', async () => {
		const asked = await mail('manager@fellmoor.example', new RegExp(`^Request ${booking}`));
		expect(asked.text).toContain(`/bookings/${booking}`);
		manager = await openAs('manager');
		await lookAtDay(manager);
		const bar = manager.locator('.calendar .ec-event.entry', { hasText: booking });
		await bar.filter({ hasText: 'Requested' }).waitFor();
		await tabTo(manager, new RegExp(`^${booking}\\s+Requested`));
		await manager.keyboard.press('Alt+ArrowDown');
		await manager.keyboard.press('Alt+ArrowDown');
		await manager.keyboard.press('Enter');
		await manager.locator('.toasts').getByText(`${booking} is moved.`).first().waitFor();
		expect(await bar.innerText()).toMatch(
			new RegExp(`${clock(slot.from, 1)}\\s*[–-]\\s*${clock(slot.to, 1)}`)
		);
		// The bar is drawn anew as the page hears of its own change.
		await manager.waitForTimeout(3000);
		await bar.focus();
		await manager.keyboard.press('Enter');
		await manager
			.getByRole('dialog', { name: booking })
			.getByRole('button', { name: 'Confirm slot' })
			.waitFor();
		await tabTo(manager, 'Confirm slot');
		await manager.keyboard.press('Enter');
		await manager.locator('.toasts').getByText(`${booking} is confirmed`).first().waitFor();
	});

	it('has the client mailed with an entry for the calendar, which a later move changes', async () => {
		const first = entryOf(await mail(ASA, new RegExp(`^Confirmed: ${booking}`)));
		expect(first).toMatchObject({
			method: 'REQUEST',
			from: instant(slot.from, 1),
			to: instant(slot.to, 1)
		});
		calendarId = first.uid;
		await manager.goto(`/bookings/${booking}`, { waitUntil: 'networkidle' });
		await manager.getByLabel('Test from').fill(later(slot.from, 2).toFormat("yyyy-MM-dd'T'HH:mm"));
		await manager.getByLabel('Test to').fill(later(slot.to, 2).toFormat("yyyy-MM-dd'T'HH:mm"));
		await manager.getByRole('button', { name: 'Move booking' }).click();
		await manager.getByRole('status').getByText('moved').first().waitFor();
		const second = entryOf(await mail(ASA, new RegExp(`^Moved: ${booking}`)));
		expect(second).toMatchObject({ method: 'REQUEST', uid: calendarId, from: instant(slot.from, 2) });
		expect(second.sequence).toBeGreaterThan(first.sequence);
	});

	it('confirms another slot, which the client asked for by keyboard alone and cancels: so does the calendar', async () => {
		await client.goto('/bookings/new', { waitUntil: 'networkidle' });
		await tabTo(client, 'build');
		await client.keyboard.type('HB-B2');
		await tabTo(client, 'Find slots');
		await client.keyboard.press('Enter');
		await client.getByRole('link', { name: /C1 .* Take this/ }).waitFor();
		await tabTo(client, /Take this$/);
		await client.keyboard.press('Enter');
		await tabTo(client, 'Request slot');
		await client.keyboard.press('Enter');
		await client.waitForURL(/\/bookings\/HB-/);
		const other = numberIn(client);
		expect(other).not.toBe(booking);

		await manager.goto(`/bookings/${other}`, { waitUntil: 'networkidle' });
		await tabTo(manager, 'Confirm slot');
		await manager.keyboard.press('Enter');
		await manager.getByRole('status').getByText(`${other} is confirmed`).waitFor();
		const confirmed = entryOf(await mail(ASA, new RegExp(`^Confirmed: ${other}`)));
		expect(confirmed.uid).not.toBe(calendarId);

		await client.goto(`/bookings/${other}`, { waitUntil: 'networkidle' });
		await client.getByRole('button', { name: 'Cancel booking' }).click();
		await client.getByRole('dialog').getByRole('button', { name: 'Cancel booking' }).click();
		await client.getByRole('main').getByText('Cancelled', { exact: true }).first().waitFor();
		const cancelled = entryOf(await mail(ASA, new RegExp(`^Cancelled: ${other}`)));
		expect(cancelled).toMatchObject({ method: 'CANCEL', uid: confirmed.uid });
		expect(cancelled.sequence).toBeGreaterThan(confirmed.sequence);
	});
});

describe('the builder', () => {
	it('marks the build ready, and the board stops saying that it is needed', async () => {
		const builder = await openAs('builder');
		const needed = builder.getByRole('region', { name: 'Builds needed this week, not ready' });
		const lane = section(builder, 'C1');
		await lane.getByRole('link', { name: booking }).first().waitFor();
		await lane.getByRole('link', { name: 'Build HB-B1 is still in preparation.' }).waitFor();
		await needed.getByRole('link', { name: 'HB-B1' }).click();
		await builder.getByRole('button', { name: 'Mark ready' }).click();
		await builder.getByText('It can go into a cell.').waitFor();
		await builder.goto('/today');
		await lane.getByRole('link', { name: booking }).first().waitFor();
		expect(await builder.getByText('still in preparation').count()).toBe(0);
		expect(await needed.getByRole('link', { name: 'HB-B1' }).count()).toBe(0);
		await builder.context().close();
	});
});

describe('the operator', () => {
	it('opens the record from the booking, with the limits that are agreed', async () => {
		operator = await openAs('operator');
		await lab.earlierRun(operator);
		await operator.goto(`/bookings/${booking}`, { waitUntil: 'networkidle' });
		await operator.getByRole('link', { name: 'Start run' }).click();
		await operator.waitForURL(/\/runs\/new\?booking=/);
		await operator.getByLabel('Barometer').fill(String(truth.ambient.barometer_kpa));
		await operator.getByLabel('Temperature').fill(String(truth.ambient.ambient_temp_degc));
		await operator.getByLabel('Limit set').selectOption({ label: 'L1 · Energy flow, version 1' });
		await operator.getByRole('button', { name: 'Open the record' }).click();
		await operator.waitForURL(/\/runs\/HB-R-\d+$/);
		run = numberIn(operator);
		await section(operator, 'Record').getByRole('link', { name: booking }).waitFor();
	});

	it('goes through the checklist, logs a line and reads the air', async () => {
		const list = section(operator, 'Pre-run checklist');
		const items = list.getByRole('button', { name: 'Done', exact: true });
		for (let left = await items.count(); left > 0; left--) {
			await items.first().click();
			await expect.poll(() => items.count(), { timeout: 20_000 }).toBe(left - 1);
		}
		await list.getByText('All items are answered').waitFor();
		const log = section(operator, 'Log');
		await log.getByLabel('New line').fill('Coolant at 84 °C, steady.');
		await log.getByRole('button', { name: 'Add line' }).click();
		await log.getByRole('listitem').filter({ hasText: 'Coolant at 84 °C, steady.' }).waitFor();
		const air = section(operator, 'Air in the cell');
		await air.getByLabel('Humidity').fill(String(truth.ambient.humidity_pct));
		await air.getByRole('button', { name: 'Add reading' }).click();
		await air.getByRole('row').filter({ hasText: 'Sam operator' }).waitFor();
	});

	it('uploads the trace: its flag is on the page, and those who follow the build are mailed', async () => {
		await section(operator, 'Traces')
			.getByLabel('Choose files')
			.setInputFiles({ name: TRACE, mimeType: 'text/csv', buffer: Buffer.from(bytesOf(TRACE)) });
		const flag = section(operator, 'Flags')
			.getByRole('listitem')
			.filter({ hasText: 'Fuel energy flow over speed' });
		await flag.waitFor({ timeout: 60_000 });
		for (const recipient of [ASA, 'manager@fellmoor.example', 'operator@fellmoor.example']) {
			const { text } = await mail(recipient, new RegExp(`^Flagged: run ${run}`));
			expect(text).toContain('Fuel energy flow over speed');
			expect(text).toMatch(/2 spans: /);
		}
		await operator.getByRole('button', { name: 'Close record' }).click();
		await operator.getByRole('dialog').getByRole('button', { name: 'Close record' }).click();
		await operator.getByRole('status').getByText('The record is closed.').waitFor();
		expect(await operator.getByRole('button', { name: 'Accept run' }).count()).toBe(0);
		complaints.expected.add(`${stack.current.origin}/api/v1/runs/${run}/accept`);
		expect(await lab.statusOf(operator, `/runs/${run}/accept`)).toBe(403);
	});
});

describe('the engineer', () => {
	it('sees figures, flag and the earlier run behind the curve, looks at a span and accepts', async () => {
		engineer = await openAs('engineer');
		const flagged = engineer.getByRole('region', { name: /^Flagged, for review/ });
		await flagged.getByRole('link', { name: run }).click();
		await engineer.waitForURL(`**/runs/${run}`);
		const best = engineer
			.locator('dt', { hasText: /^\s*Brake thermal efficiency, best\s*$/ })
			.locator('xpath=following-sibling::dd')
			.first();
		const value = Number(await best.locator('.value').innerText());
		expect(Math.abs(value / 100 - truth.metrics!.bte_max!)).toBeLessThan(0.004);
		await engineer.getByText('Earlier runs of this build behind it: 1').waitFor();
		const curve = section(engineer, 'Reduced curve');
		await curve.getByRole('application', { name: new RegExp(`^Run ${run}: Brake power`) }).waitFor();
		await curve.getByText('HB-R-0001').first().waitFor();
		const flag = section(engineer, 'Flags').getByRole('listitem').first();
		expect(await flag.innerText()).toContain('103.0 % of the limit');
		await flag.getByRole('button').first().click();
		await engineer.waitForURL(/[?&]from=/);
		await engineer.getByRole('button', { name: 'Accept run' }).click();
		await engineer.getByRole('dialog').getByLabel('Remark').fill('The limit is passed by 3 %; agreed.');
		await engineer.getByRole('dialog').getByRole('button', { name: 'Accept run' }).click();
		await engineer.getByText(/^Accepted by Sam engineer/).waitFor();
	});

	it('finds it in the trend of its build, with n, and the way back to the run', async () => {
		await engineer.goto('/trends?metric=bte_max&groupBy=build', { waitUntil: 'networkidle' });
		const row = section(engineer, 'Brake thermal efficiency, best by build, table')
			.getByRole('row')
			.filter({ hasText: 'HB-B1' });
		expect((await row.innerText()).replace(/\s+/g, ' ')).toMatch(/HB-B1 As delivered 2 3[56]\.\d+/);
		await engineer.getByRole('link', { name: /^HB-R-0001/ }).focus();
		await engineer.keyboard.press('End');
		await engineer.keyboard.press('Enter');
		await engineer.waitForURL(`**/runs/${run}`);
	});
});

describe('the rival', () => {
	it('sees "taken" and nothing else, is answered as if nothing were there, and was mailed nothing', async () => {
		const rival = await open();
		await signIn(rival, lab.rival);
		const secrets = [
			booking,
			run,
			lab.build.id,
			lab.build.number,
			'Hallbeck',
			'Åsa',
			'Energy flow at full load'
		];
		await lookAtDay(rival);
		await rival.locator('.calendar .entry-taken').first().waitFor();
		const pages = [
			'/today',
			'/bookings',
			'/runs',
			'/builds',
			'/trends',
			'/lab/limits',
			'/lab/fuels',
			'/lab/clients'
		];
		for (const path of [null, ...pages]) {
			if (path) await rival.goto(path);
			const html = await rival.content();
			for (const secret of secrets) expect(html.includes(secret), `${secret} on ${path}`).toBe(false);
		}
		for (const path of [`/bookings/${booking}`, `/runs/${run}`, `/builds/${lab.build.id}`]) {
			complaints.expected.add(stack.current.origin + path);
			expect((await rival.goto(path))?.status(), path).toBe(404);
			await rival.getByRole('heading', { name: 'Nothing here' }).waitFor();
			expect((await rival.request.get(`/api/v1${path}`)).status(), path).toBe(404);
		}
		await rival.context().close();
		for (const { to, subject, text } of await stack.current.mails())
			if (to.includes(lab.rival))
				for (const secret of secrets) expect(`${subject} ${text}`).not.toContain(secret);
	});
});

describe('a forgotten password', () => {
	it('is replaced behind a mailed link, and the old one ends', async () => {
		const page = await open();
		await page.goto('/sign-in', { waitUntil: 'networkidle' });
		await page.getByRole('link', { name: 'Forgotten password' }).click();
		await page.waitForURL('**/forgotten');
		await page.getByLabel('Mail address').fill(ASA);
		await page.getByRole('button', { name: 'Send link' }).click();
		await page.getByRole('status').getByText('Look into your mail').waitFor();
		const link = await linkFrom(stack.current, ASA, /^A new password/, 'reset');
		await choosePassword(page, link, 'another shaft in its bearings');
		// Signed out where she was, too.
		await client.goto('/today');
		expect(new URL(client.url()).pathname).toBe('/sign-in');
		const enter = async (password: string) => {
			await page.getByLabel('Mail address').fill(ASA);
			await page.getByLabel('Password').fill(password);
			await page.getByRole('button', { name: 'Sign in' }).click();
		};
		await enter(PASSWORD);
		await page.getByRole('alert').waitFor();
		await enter('another shaft in its bearings');
		await page.waitForURL('**/today');
		await mail(ASA, /was changed$/);
		await page.context().close();
	});
});

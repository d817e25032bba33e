import type { Page } from 'playwright-core';
import { beforeAll, describe, expect, it } from 'vitest';
import { useBrowser } from '../setup/browser';
import { useStack } from '../setup/stack';
import { bytesOf } from '../traces/traces';
import { expectAccessible } from './accessible';
import { furnish, signedIn } from './runs-lab';

const stack = useStack();
const browser = useBrowser();

const trace = (name: string, bytes = bytesOf(name)) => ({
	name,
	mimeType: 'text/csv',
	buffer: Buffer.from(bytes)
});

/** Opens a record by form and gives its number. */
async function openRecord(page: Page): Promise<string> {
	await page.goto(`${stack.current.origin}/runs/new`);
	await page.getByLabel('Build').selectOption({ label: 'P20.1 · As delivered (in preparation)' });
	await page.getByLabel('Cell', { exact: true }).selectOption({ label: 'C1 · First cell' });
	await page.getByLabel('Fuel batch').selectOption({ label: 'E5-1 · E5' });
	await page.getByRole('button', { name: 'Open the record' }).click();
	await page.waitForURL(/\/runs\/PLN-R-\d+$/);
	return (await page.locator('h1').innerText()).trim();
}

const section = (page: Page, heading: string) => page.getByRole('region', { name: heading, exact: true });
const uploadTo = (page: Page, files: Parameters<Page['setInputFiles']>[1]) =>
	section(page, 'Traces').getByLabel('Choose files').setInputFiles(files);
/** The large number under a figure's name. */
const figure = (page: Page, name: string) =>
	page
		.locator('dt', { hasText: new RegExp(`^\\s*${name}\\s*$`) })
		.locator('xpath=following-sibling::dd')
		.first();

describe('a run from its record to its acceptance', () => {
	let operator: Page;
	let number = '';

	beforeAll(async () => {
		await furnish(stack.current);
		operator = await signedIn(browser.current, stack.current.origin, 'operator');
	});

	it('says what will be in the list, and offers the first step', async () => {
		await operator.goto(`${stack.current.origin}/runs`);
		await operator.getByRole('heading', { name: 'No runs yet' }).waitFor();
		await expectAccessible(operator);
		await operator.getByRole('link', { name: 'Open a record' }).first().click();
		await operator.waitForURL(/\/runs\/new$/);
	});

	it('tells a wrong reading at its field and keeps what was typed', async () => {
		// The only build there is was chosen already.
		await operator.getByLabel('Build').selectOption('');
		await operator.getByLabel('Barometer').fill('1013');
		await operator.getByRole('button', { name: 'Open the record' }).click();
		await operator.getByText('Between 50 and 115 kPa.').waitFor();
		await operator.getByText('Choose the build that runs.').waitFor();
		expect(await operator.getByLabel('Barometer').inputValue()).toBe('1013');
		await expectAccessible(operator);
	});

	it('opens the record by form', async () => {
		number = await openRecord(operator);
		await operator.getByRole('heading', { name: 'No trace yet' }).waitFor();
		await operator.getByText('Trunnion is no interlock').waitFor();
		await expectAccessible(operator);
	});

	it('shows figures, curve and trace of an uploaded file without being loaded again', async () => {
		await uploadTo(operator, trace('sweep-plain.csv'));
		const peak = figure(operator, 'Peak power');
		await peak.waitFor({ timeout: 60_000 });
		expect(await peak.locator('.value').innerText()).toMatch(/^126\.9/);
		expect(await peak.locator('.unit').innerText()).toBe('kW');
		await operator.getByRole('application', { name: /Brake power, Torque.* over engine speed/ }).waitFor();
		const chart = operator.getByRole('application', { name: /trace of Engine speed, Torque/ });
		await chart.waitFor();
		await expect.poll(() => chart.locator('canvas').count()).toBe(4);
		await expectAccessible(operator);
	});

	it('keeps the part of the trace that is looked at in the address', async () => {
		const chart = operator.getByRole('application', { name: /trace of Engine speed/ });
		await chart.focus();
		await operator.keyboard.press('+');
		await operator.waitForURL(/[?&]from=/);
		const part = operator.getByText(/showing \d/);
		const before = await part.innerText();
		expect(before).not.toContain('showing 0.00–44.98 s');
		await operator.reload();
		await operator.getByText(before).waitFor();
	});

	it('tells why a file was refused, and keeps it', async () => {
		await uploadTo(operator, trace('broken-header-only.csv'));
		const files = section(operator, 'Traces');
		await files.getByText('Refused').waitFor({ timeout: 60_000 });
		const told = await files.getByRole('listitem').filter({ hasText: 'broken-header-only.csv' }).innerText();
		expect(told).toContain('The original is kept as it came.');
		const original = await files
			.getByRole('link', { name: 'Original of broken-header-only.csv' })
			.getAttribute('href');
		const answer = await operator.request.get(`${stack.current.origin}${original}`);
		expect(new Uint8Array(await answer.body())).toEqual(bytesOf('broken-header-only.csv'));
		expect(await figure(operator, 'Peak power').locator('.value').innerText()).toMatch(/^126\.9/);
	});

	it('logs a line and keeps the line that a correction replaces', async () => {
		const log = section(operator, 'Log');
		await log.getByLabel('New line').fill('Coolant at 84 °C.');
		await log.getByRole('button', { name: 'Add line' }).click();
		await log.getByRole('listitem').filter({ hasText: 'Coolant at 84 °C.' }).waitFor();
		await log
			.getByRole('listitem')
			.filter({ hasText: 'Coolant at 84 °C.' })
			.locator('summary')
			.first()
			.click();
		await log.getByLabel('Corrected line').fill('Coolant at 48 °C.');
		await log.getByRole('button', { name: 'Correct line' }).click();
		await log.getByText(/say why the earlier line is corrected/i).waitFor();
		expect(await log.getByLabel('Corrected line').inputValue()).toBe('Coolant at 48 °C.');
		await log.getByLabel('Why it is corrected').fill('Read the wrong gauge.');
		await log.getByRole('button', { name: 'Correct line' }).click();
		await log.getByText('corrected: Read the wrong gauge.').waitFor();
		expect(await log.locator('del').allInnerTexts()).toEqual(['Coolant at 84 °C.']);
	});

	it('is flagged by hand, closed by the operator and accepted by the engineer alone', async () => {
		await operator.getByRole('button', { name: 'Raise flag' }).click();
		const dialog = operator.getByRole('dialog');
		await dialog.getByRole('button', { name: 'Raise flag' }).click();
		await dialog.getByText('Say what is wrong.').waitFor();
		await dialog.getByLabel('What is wrong').fill('Oil smell at the top end.');
		await dialog.getByRole('button', { name: 'Raise flag' }).click();
		await section(operator, 'Flags').getByText('Oil smell at the top end.').waitFor();
		expect(await operator.getByRole('button', { name: 'Accept run' }).count()).toBe(0);
		await operator.getByRole('button', { name: 'Close record' }).click();
		await operator.getByRole('dialog').getByRole('button', { name: 'Close record' }).click();
		await operator.getByRole('status').getByText('The record is closed.').waitFor();

		const engineer = await signedIn(browser.current, stack.current.origin, 'engineer');
		await engineer.goto(`${stack.current.origin}/runs/${number}`);
		await engineer.getByRole('button', { name: 'Accept run' }).click();
		await engineer.getByRole('dialog').getByLabel('Remark').fill('Smell was the new exhaust wrap.');
		await engineer.getByRole('dialog').getByRole('button', { name: 'Accept run' }).click();
		await engineer.getByText(/^Accepted by Sam engineer/).waitFor();
		expect(await section(engineer, 'Traces').getByLabel('Choose files').count()).toBe(0);
		await section(engineer, 'History').getByText('accepted the run').waitFor();
		await engineer.context().close();
	});

	it('asks what columns without units are, and makes the figures from the answer', async () => {
		await openRecord(operator);
		const text = new TextDecoder().decode(bytesOf('sweep-plain.csv'));
		const bare = text.replace(/^.*\n/, (header) => header.replace(/ \[[^\]]*\]/g, ''));
		await uploadTo(operator, trace('no-units.csv', new TextEncoder().encode(bare)));
		await operator.getByRole('heading', { name: 'What the columns of no-units.csv are' }).waitFor({
			timeout: 60_000
		});
		await expectAccessible(operator);
		const send = operator.getByRole('button', { name: 'Read the file by this map' });
		await operator.getByLabel('Channel of torque').selectOption({ label: 'Torque' });
		await operator.getByLabel('Unit of torque').fill('N·m');
		await send.click();
		// The speed still has no unit: asked again, and the torque's answer is still there.
		await operator.getByText(/The map gives .*speed.* no unit/).waitFor({ timeout: 60_000 });
		expect(await operator.getByLabel('Unit of torque').inputValue()).toBe('N·m');
		await operator.getByLabel('Unit of speed').fill('rpm');
		await operator.getByLabel('Unit of fuel flow').fill('kg/h');
		await operator.getByLabel('Unit of air flow').fill('kg/h');
		await send.click();
		const peak = figure(operator, 'Peak power');
		await peak.waitFor({ timeout: 60_000 });
		expect(await peak.locator('.value').innerText()).toMatch(/^126\.9/);
	});

	it('is voided with a reason, prominently', async () => {
		const engineer = await signedIn(browser.current, stack.current.origin, 'engineer');
		await engineer.goto(operator.url());
		await engineer.getByRole('button', { name: 'Void run' }).click();
		const dialog = engineer.getByRole('dialog');
		await dialog.getByRole('button', { name: 'Void run' }).click();
		await dialog.getByText('Say why this run is set aside.').waitFor();
		await dialog.getByLabel('Why it is set aside').fill('The same file as the run before.');
		await dialog.getByRole('button', { name: 'Void run' }).click();
		await engineer.getByText('This run is void').waitFor();
		await engineer.getByRole('note').getByText('The same file as the run before.').waitFor();
		await expectAccessible(engineer);
		await engineer.context().close();
	});

	it('stands in the list with curve, figures and flags, and the filter needs no script', async () => {
		await operator.goto(`${stack.current.origin}/runs`);
		const row = operator.getByRole('row').filter({ hasText: number });
		expect(await row.innerText()).toMatch(/126\.9\d/);
		expect(await row.innerText()).toContain('1 flag');
		await row.getByRole('img', { name: /^Curve up to 12\d\.\d\skW$/ }).waitFor();
		await expectAccessible(operator);

		const plain = await signedIn(browser.current, stack.current.origin, 'operator', {
			javaScriptEnabled: false
		});
		await plain.goto(`${stack.current.origin}/runs`);
		await plain.getByLabel('State').selectOption('voided');
		await plain.getByRole('button', { name: 'Show' }).click();
		await plain.waitForURL(/state=voided/);
		expect(await plain.getByRole('row').count()).toBe(2);
		expect(await plain.getByRole('row').filter({ hasText: number }).count()).toBe(0);
		await plain.context().close();
	});
});

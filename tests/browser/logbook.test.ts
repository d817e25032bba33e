import type { Page } from 'playwright-core';
import { beforeAll, describe, expect, it } from 'vitest';
import { PNG } from '../integration/files';
import { useBrowser } from '../setup/browser';
import { useStack } from '../setup/stack';
import { bytesOf } from '../traces/traces';
import { expectAccessible } from './accessible';
import { furnish, signedIn } from './runs-lab';

/** An operator's way from a confirmed booking to a closed record, and the engineer's to its acceptance. */
const stack = useStack();
const browser = useBrowser();
const section = (page: Page, heading: string) => page.getByRole('region', { name: heading, exact: true });

/** What a page's own script would ask, as the person who is signed in there. */
const post = (page: Page, path: string, body: object) =>
	page.evaluate(
		async ([to, text]) => {
			const answer = await fetch(to!, {
				method: 'POST',
				headers: { 'content-type': 'application/json' },
				body: text!
			});
			if (!answer.ok) throw new Error(await answer.text());
			return (await answer.json()) as { number: string };
		},
		[`/api/v1${path}`, JSON.stringify(body)]
	);

describe('from a booking to an accepted run', () => {
	let operator: Page;
	let booking = '';

	beforeAll(async () => {
		await furnish(stack.current);
		const manager = await signedIn(browser.current, stack.current.origin, 'manager');
		const start = Date.now() + 3_600_000;
		({ number: booking } = await post(manager, '/bookings', {
			cell: 'C1',
			build: 'P20.1',
			fuelBatch: 'E5-1',
			kind: 'power_sweep',
			from: new Date(start).toISOString(),
			to: new Date(start + 7_200_000).toISOString()
		}));
		await post(manager, `/bookings/${booking}/confirm`, {});
		await manager.context().close();
		operator = await signedIn(browser.current, stack.current.origin, 'operator');
	});

	it('opens the record with what the booking says', async () => {
		await operator.goto(`${stack.current.origin}/bookings/${booking}`);
		await operator.getByRole('link', { name: 'Start run' }).click();
		await operator.waitForURL(/\/runs\/new\?booking=/);
		await operator.getByText('From booking').waitFor();
		const chosen = (label: string) =>
			operator.getByLabel(label, { exact: true }).locator('option:checked').innerText();
		expect(await chosen('Build')).toContain('P20.1');
		expect(await chosen('Cell')).toContain('C1');
		expect(await chosen('Fuel batch')).toContain('E5-1');
		await operator.getByLabel('Correction of power and torque').selectOption('iso_1585');
		await operator.getByLabel('Barometer').fill('98.2');
		await operator.getByLabel('Temperature').fill('27');
		await operator.getByRole('button', { name: 'Open the record' }).click();
		await operator.waitForURL(/\/runs\/PLN-R-\d+$/);
		await section(operator, 'Record').getByRole('link', { name: booking }).waitFor();
	});

	it('says what is still needed, and takes the checklist item by item', async () => {
		const needed = operator.getByRole('note').filter({ hasText: 'Still needed' });
		await needed.getByText('13 items of the pre-run checklist').waitFor();
		const list = section(operator, 'Pre-run checklist');
		const item = (name: string) => list.getByRole('listitem').filter({ hasText: name });
		await item('Guards and shaft cover').getByRole('button', { name: 'Done' }).click();
		await item('Guards and shaft cover').getByText('Sam operator').waitFor();
		await item('High voltage').getByRole('button', { name: 'Does not apply' }).click();
		await item('High voltage').getByRole('button', { name: 'Record' }).click();
		await item('High voltage').getByText('Say why it does not apply').waitFor();
		await item('High voltage').getByLabel('Why it does not apply').fill('No electric machine here.');
		await item('High voltage').getByRole('button', { name: 'Record' }).click();
		await item('High voltage').getByText('No electric machine here.').waitFor();
		await needed.getByText('11 items of the pre-run checklist').waitFor();
		await expectAccessible(operator);
	});

	it('takes readings of the air, corrects one, and says what corrections use', async () => {
		const air = section(operator, 'Air in the cell');
		await air.getByText('barometer, temperature as entered for the record; humidity not known').waitFor();
		await air.getByLabel('Barometer').fill('982');
		await air.getByRole('button', { name: 'Add reading' }).click();
		await air.getByText('Is in kPa: 50 to 115').waitFor();
		await air.getByLabel('Barometer').fill('89.2');
		await air.getByRole('button', { name: 'Add reading' }).click();
		await air.getByRole('button', { name: /^Correct the reading/ }).click();
		await air.getByLabel('Barometer').fill('98.2');
		await air.getByLabel('Why it is corrected').fill('Digits swapped.');
		await air.getByRole('button', { name: 'Correct reading' }).click();
		await air.getByText('Digits swapped.').waitFor();
		expect(await air.getByRole('row').count()).toBe(3);
	});

	it('declares net power with what was fitted', async () => {
		const record = section(operator, 'Record');
		await record.getByText('Change what is declared').click();
		await record.getByText('ISO 1585 compares net power with net power').waitFor();
		await record.getByLabel('Net or gross').selectOption('net');
		await record.getByLabel('Alternator').check();
		await record.getByLabel('Exhaust back-pressure').fill('6.5');
		await record.getByRole('button', { name: 'Save' }).click();
		await record.getByText(/^Net,\s+with alternator/).waitFor();
		await record.getByText('6.5 kPa back-pressure').waitFor();
		expect(await operator.getByText('Net or gross: corrected').count()).toBe(0);
	});

	it('attaches a photograph, refuses a page that calls itself one, and removes with a reason', async () => {
		const files = section(operator, 'Attachments');
		const choose = (name: string, bytes: Uint8Array) =>
			files
				.getByLabel('Choose files')
				.setInputFiles({ name, mimeType: 'image/png', buffer: Buffer.from(bytes) });
		await choose('page.png', new TextEncoder().encode('<script>alert(1)</script>'));
		await files.getByRole('alert').getByText('Photographs (JPEG, PNG, WebP)').waitFor();
		await files.getByRole('button', { name: 'Leave it out' }).click();
		await choose('mark.png', PNG);
		await files.getByRole('button', { name: 'Look at mark.png' }).click();
		const picture = operator.getByRole('dialog').getByRole('img', { name: 'mark.png' });
		await expect.poll(() => picture.evaluate((img) => (img as HTMLImageElement).naturalWidth)).toBe(1);
		await operator.getByRole('button', { name: 'Close', exact: true }).click();
		await files.getByRole('button', { name: 'Remove mark.png' }).click();
		const dialog = operator.getByRole('dialog');
		await dialog.getByRole('button', { name: 'Remove', exact: true }).click();
		await dialog.getByRole('alert').waitFor();
		await dialog.getByLabel('Reason').fill('Another engine.');
		await dialog.getByRole('button', { name: 'Remove', exact: true }).click();
		await files.getByText('1 removed file').click();
		await files.getByText('Another engine.').waitFor();
		await section(operator, 'History').getByText('removed an attachment').waitFor();
	});

	it('makes another trace the primary one, and closes the record for the engineer to accept', async () => {
		const traces = section(operator, 'Traces');
		const send = async (name: string) => {
			await traces.getByLabel('Choose files').setInputFiles({
				name,
				mimeType: 'text/csv',
				buffer: Buffer.from(bytesOf('sweep-plain.csv'))
			});
			const row = traces.getByRole('listitem').filter({ hasText: name });
			await row.getByText('Ready').waitFor({ timeout: 60_000 });
			return row;
		};
		await send('first.csv');
		const second = await send('second.csv');
		await second.locator('summary').click();
		await second.getByRole('button', { name: 'Take its figures for the run' }).click();
		await second.getByText('its figures are the run’s').waitFor();
		await section(operator, 'History').getByText('chose the primary trace').waitFor();
		await expectAccessible(operator);
		await operator.getByRole('button', { name: 'Close record' }).click();
		await operator.getByRole('dialog').getByRole('button', { name: 'Close record' }).click();
		await operator.getByRole('status').getByText('The record is closed.').waitFor();

		const engineer = await signedIn(browser.current, stack.current.origin, 'engineer');
		await engineer.goto(operator.url());
		await engineer.getByRole('button', { name: 'Accept run' }).click();
		await engineer.getByRole('dialog').getByRole('button', { name: 'Accept run' }).click();
		await engineer.getByText(/^Accepted by Sam engineer/).waitFor();
		expect(await engineer.getByText('Change what is declared').count()).toBe(0);
		expect(await engineer.getByRole('button', { name: 'Done' }).count()).toBe(0);
		await engineer.context().close();
	});
});

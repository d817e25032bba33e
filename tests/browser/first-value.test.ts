import type { Page } from 'playwright-core';
import { beforeAll, describe, expect, it } from 'vitest';
import { useBrowser } from '../setup/browser';
import { useStack } from '../setup/stack';
import { bytesOf } from '../traces/traces';
import { expectAccessible } from './accessible';
import { addMaker, PASSWORD } from './people';
import { Complaints, openVisitor, signIn } from './visitor';

/** From a lab with nothing in it to the figures of a file of one's own, with a stop watch. */
const stack = useStack();
const browser = useBrowser();
const complaints = new Complaints();
const MOST_CLICKS = 3;
const LONGEST_MS = 30_000;

let manager: Page;

beforeAll(async () => {
	await addMaker(stack.current, { email: 'mira@fellmoor.example', name: 'Mira Holt', role: 'manager' });
	await addMaker(stack.current, { email: 'olwen@fellmoor.example', name: 'Olwen Tarn', role: 'operator' });
	manager = await openVisitor(browser.current, stack.current.origin, complaints);
});

/** What a person with a file in the hand does; the file comes from the chooser or is let fall on the zone. */
async function drop(page: Page, name: string, bytes: Uint8Array): Promise<void> {
	const data = await page.evaluateHandle(
		({ name: called, text }) => {
			const carried = new DataTransfer();
			carried.items.add(new File([text], called, { type: 'text/csv' }));
			return carried;
		},
		{ name, text: new TextDecoder().decode(bytes) }
	);
	await page.getByRole('group', { name: /Drop/ }).dispatchEvent('drop', { dataTransfer: data });
}

async function seeFigures(page: Page): Promise<string> {
	const peak = page
		.locator('dt', { hasText: /^\s*Peak power\s*$/ })
		.locator('xpath=following-sibling::dd')
		.first();
	await peak.waitFor({ timeout: 60_000 });
	const chart = page.getByRole('application', { name: /trace of Engine speed/ });
	await chart.locator('canvas').first().waitFor();
	return peak.locator('.value').innerText();
}

/** 40 s from 2 000 to 6 000 rev/min at 100 N·m, in the words of another logger, from a stated moment on. */
function anotherLogger(): Uint8Array {
	const lines = Array.from({ length: 800 }, (_, i) => {
		const at = new Date(Date.UTC(2026, 2, 14, 8, 30, 0, i * 50)).toISOString();
		return `${at};${(2000 + 5 * i).toFixed(1)};${(100 + Math.sin(i) * 0.2).toFixed(2)}`;
	});
	return new TextEncoder().encode(`Timestamp;N_ENG [1/min];M_DYN [N.m]\n${lines.join('\n')}\n`);
}

describe('a lab with nothing in it', () => {
	it('says what will be on each first page, and what is the first step', async () => {
		await signIn(manager, 'mira@fellmoor.example');
		expect(new URL(manager.url()).pathname).toBe('/today');
		await manager.getByRole('heading', { name: 'No cells yet' }).waitFor();
		await expectAccessible(manager);
		for (const [path, heading] of [
			['/runs', 'No runs yet'],
			['/schedule', 'No cells yet'],
			['/trends', /No /],
			['/builds', /No /]
		] as const) {
			await manager.goto(path);
			await manager.getByRole('heading', { name: heading }).first().waitFor();
		}
	});

	it('takes a file, and asks once for the few things that its record stands on', async () => {
		await manager.goto('/today', { waitUntil: 'networkidle' });
		await drop(manager, 'sweep-plain.csv', bytesOf('sweep-plain.csv'));
		await manager.waitForURL('**/runs/new');
		await manager.getByRole('heading', { name: 'What a first record stands on' }).waitFor();
		await manager.getByText('sweep-plain.csv is kept here').waitFor();
		await expectAccessible(manager);
		await manager.getByRole('button', { name: 'Make the engine and its build' }).click();
		await manager.getByText('Give the engine a name.').waitFor();
		await manager.getByLabel('Whose engine').fill('Plainfell Engines');
		await manager.getByLabel('Engine', { exact: true }).fill('Two litre four');
		await manager.getByLabel('Displacement').fill('1.998');
		await manager.getByRole('button', { name: 'Make the engine and its build' }).click();
		const summary = manager.getByRole('region', { name: 'The file and its record' });
		await summary.getByText('Power sweep: the speed ramps through the file.').waitFor();
		await summary.getByText(/Build TWO-LITRE-FOUR\.1 .* cell CELL-1, fuel batch PETROL-1/).waitFor();
		await expectAccessible(manager);
		await summary.getByRole('button', { name: 'Open record and read the trace' }).click();
		expect(await seeFigures(manager)).toMatch(/^126\.9/);
	});
});

describe('a lab at work', () => {
	it('shows a newcomer trace and figures of their own file in three clicks and thirty seconds', async () => {
		const newcomer = await openVisitor(browser.current, stack.current.origin, complaints);
		await newcomer.goto('/sign-in', { waitUntil: 'networkidle' });
		await newcomer.getByLabel('Mail address').fill('olwen@fellmoor.example');
		await newcomer.getByLabel('Password').fill(PASSWORD);
		let clicks = 0;
		const begun = performance.now();
		const click = async (name: string) => {
			clicks++;
			await newcomer.getByRole('button', { name }).click();
		};
		await click('Sign in');
		await newcomer.waitForURL('**/today');
		await newcomer.waitForLoadState('networkidle');
		clicks++;
		await newcomer.getByLabel('Choose files').setInputFiles({
			name: 'another-logger.csv',
			mimeType: 'text/csv',
			buffer: Buffer.from(anotherLogger())
		});
		await newcomer.getByText(/from the file’s time stamps/).waitFor();
		await click('Open record and read the trace');
		// 100 N·m at 6 000 rev/min.
		expect(await seeFigures(newcomer)).toMatch(/^62\./);
		const tookMs = performance.now() - begun;
		console.log(`First figures after ${clicks} clicks and ${(tookMs / 1000).toFixed(1)} s.`);
		expect(clicks).toBeLessThanOrEqual(MOST_CLICKS);
		expect(tookMs).toBeLessThan(LONGEST_MS);
		await newcomer.context().close();
	});

	it('keeps the record and the file when the upload fails, and sends again', async () => {
		await manager.goto('/runs', { waitUntil: 'networkidle' });
		await drop(manager, 'again.csv', bytesOf('steady-points.csv'));
		await manager.getByText(/Steady points: speed and load are held at/).waitFor();
		let refused = 0;
		await manager.route('**/traces?filename=*', (route) =>
			refused++ === 0 ? route.abort('connectionreset') : route.continue()
		);
		await manager.getByRole('button', { name: 'Open record and read the trace' }).click();
		await manager.getByText('The connection was lost while sending again.csv.').waitFor();
		const runs = await manager.request.get('/api/v1/runs');
		const before = ((await runs.json()) as { items: unknown[] }).items.length;
		await manager.getByRole('button', { name: 'Try again' }).click();
		await manager.waitForURL(/\/runs\/[A-Z0-9.-]+-R-\d+$/);
		await seeFigures(manager);
		const after = await manager.request.get('/api/v1/runs');
		expect(((await after.json()) as { items: unknown[] }).items).toHaveLength(before);
		await manager.unroute('**/traces?filename=*');
	});

	it('makes an unknown engine beside the known ones', async () => {
		await manager.goto('/runs/new', { waitUntil: 'networkidle' });
		await manager.getByText('The engine is not in the list').click();
		await manager.getByLabel('Engine', { exact: true }).fill('Two litre four');
		await manager.getByLabel('Displacement').fill('2');
		await manager.getByRole('button', { name: 'Make the engine and its build' }).click();
		await manager.waitForURL(/build=/);
		await expect
			.poll(() => manager.getByLabel('Build', { exact: true }).locator('option:checked').innerText())
			.toContain('TWO-LITRE-FOUR-2.1');
		await expectAccessible(manager);
	});

	it('says nothing in the console that it should not', () => {
		expect(complaints.said.filter((line) => !line.includes('ERR_CONNECTION_RESET'))).toEqual([]);
	});
});

import Papa from 'papaparse';
import type { Page } from 'playwright-core';
import { beforeAll, describe, expect, it } from 'vitest';
import { NewRun, openRun } from '../../src/lib/server/runs';
import { readConfig } from '../../src/lib/server/config';
import { closeDeps, openDeps } from '../../src/lib/server/deps';
import { putFigures } from '../figures-of';
import { useBrowser } from '../setup/browser';
import { useStack } from '../setup/stack';
import { expectAccessible } from './accessible';
import { furnish, signedIn } from './runs-lab';

const stack = useStack();
const browser = useBrowser();
const POWERS = [100, 102, 104, 110];
let engineer: Page;

beforeAll(async () => {
	await furnish(stack.current);
	const deps = openDeps(readConfig(stack.current.env), 1);
	try {
		const { id } = await deps.pools.auth
			.selectFrom('auth.person')
			.select('id')
			.where('email', '=', 'operator@fellmoor.example')
			.executeTakeFirstOrThrow();
		for (const [day, power] of POWERS.entries()) {
			const { number } = await openRun(
				deps,
				{
					personId: id,
					name: 'Sam operator',
					email: 'operator@fellmoor.example',
					role: 'operator',
					clientId: null,
					units: 'si',
					via: { kind: 'token', id }
				},
				NewRun.parse({
					build: 'P20.1',
					cell: 'C1',
					fuelBatch: 'E5-1',
					// Three power sweeps in March, steady points in April.
					kind: day < 3 ? 'power_sweep' : 'steady_points',
					startedAt: `2026-0${day < 3 ? 3 : 4}-0${day + 1}T09:00:00Z`
				})
			);
			await putFigures(stack.current.database.url('superuser'), number, {
				peak_power: { value: power, unit: 'kW', u: 0.4 },
				oil_temp_max: { value: 90 + day, unit: '°C' }
			});
		}
	} finally {
		await closeDeps(deps);
	}
	engineer = await signedIn(browser.current, stack.current.origin, 'engineer');
}, 120_000);

const open = (path: string) => engineer.goto(stack.current.origin + path);
const sentence = () => engineer.getByLabel('What is shown').innerText();

describe('trends', () => {
	it('compare groups with n, interval and difference, and say so in words', async () => {
		await open('/trends?metric=peak_power&groupBy=month&against=2026-03');
		const table = engineer.getByRole('region', { name: 'Peak power by month' });
		const march = table.getByRole('row').filter({ hasText: '2026-03' }).last();
		expect((await march.innerText()).replace(/\s+/g, ' ')).toContain('3 102.000 2.000 97.032 to 106.968');
		const april = table.getByRole('row').filter({ hasText: '2026-04' });
		expect((await april.innerText()).replace(/\s+/g, ' ')).toContain('none of one run');
		await engineer.getByText('cannot be said: scatter needs two values that differ in each').waitFor();
		await engineer.getByText('no interval').waitFor();
		await expectAccessible(engineer);
	});

	it('open a run by keyboard', async () => {
		await open('/trends?metric=peak_power');
		const link = engineer.getByRole('link', { name: /^PLN-R-0001, 100\.00\skW, P20\.1/ });
		await link.focus();
		await engineer.keyboard.press('ArrowRight');
		await engineer.getByRole('link', { name: /^PLN-R-0002, 102\.00\skW/ }).waitFor();
		await engineer.keyboard.press('End');
		await engineer.getByRole('link', { name: /^PLN-R-0004/ }).waitFor();
		await engineer.keyboard.press('Enter');
		await engineer.waitForURL(/\/runs\/PLN-R-0004$/);
		await engineer.goBack();
		await engineer.getByRole('link', { name: /^PLN-R-0001/ }).waitFor();
	});

	it('open a run by a click on its mark', async () => {
		await open('/trends?metric=peak_power&view=time');
		const mark = engineer.getByRole('link', { name: /^PLN-R-0001/ }).locator('circle');
		const box = (await mark.boundingBox())!;
		await engineer.mouse.click(box.x + box.width / 2, box.y + box.height / 2);
		await engineer.waitForURL(/\/runs\/PLN-R-0001$/);
	});

	it('keep the question in the address, in words, each filter with its way out', async () => {
		await open('/trends?metric=peak_power');
		await engineer.getByLabel('Grouped by').selectOption('cell');
		await engineer.waitForURL(/groupBy=cell/);
		await engineer.getByText('More filters').click();
		await engineer.getByLabel('To', { exact: true }).fill('2026-03-02');
		await engineer.getByLabel('To', { exact: true }).press('Enter');
		await engineer.waitForURL(/to=2026-03-02/);
		expect(await sentence()).toMatch(/^Peak power, by cell, all runs that are not void,\s*until 2 Mar 2026/);
		await engineer.getByRole('link', { name: 'Remove until 2 Mar 2026' }).click();
		await engineer.waitForURL((url) => !url.searchParams.has('to'));
		await engineer.goBack();
		await engineer.waitForURL(/to=2026-03-02/);
		await engineer.getByRole('link', { name: 'Remove until 2 Mar 2026' }).waitFor();
	});

	it('answer what there is not with a sentence', async () => {
		await open('/trends?metric=peak_power&engine=E404');
		await engineer.getByText('There is no engine E404.').waitFor();
		await expectAccessible(engineer);
		await open('/trends?metric=peak_power&from=spring');
		await engineer.getByRole('heading', { name: 'Nothing can match' }).waitFor();
	});

	it('say what failed, and try again', async () => {
		let isCut = true;
		await engineer.route(/\/api\/v1\/trends\?/, (route) => (isCut ? route.abort() : route.continue()));
		await open('/trends?metric=peak_power');
		await engineer.getByRole('alert').getByText('The trend did not load').waitFor();
		isCut = false;
		await engineer.getByRole('button', { name: 'Try again' }).click();
		await engineer.getByText('Each mark is a run.').waitFor();
	});

	it('give what is shown as CSV', async () => {
		await open('/trends?metric=peak_power');
		const link = engineer.getByRole('link', { name: 'CSV of runs' });
		const answer = await engineer.request.get(stack.current.origin + (await link.getAttribute('href')));
		const { data, errors } = Papa.parse<Record<string, string>>(await answer.text(), {
			header: true,
			skipEmptyLines: true
		});
		expect(errors).toEqual([]);
		expect(data.map((row) => row['peak_power [kW]'])).toEqual(['110', '104', '102', '100']);
	});
});

describe('the run list', () => {
	const numbers = () => engineer.locator('tbody th a').allInnerTexts();

	it('sorts by a chosen figure, and keeps the choice', async () => {
		await open('/runs');
		await engineer.getByText('Columns (4)').click();
		await engineer.getByRole('checkbox', { name: /^Oil temperature, highest/ }).check();
		await engineer.getByRole('button', { name: 'Show columns' }).click();
		await engineer.waitForURL(/metrics=[\w%]*oil_temp_max/);
		await engineer.getByRole('link', { name: 'Oil temperature, highest' }).click();
		await engineer.waitForURL(/sort=-oil_temp_max/);
		await expect.poll(numbers).toEqual(['PLN-R-0004', 'PLN-R-0003', 'PLN-R-0002', 'PLN-R-0001']);
		await expectAccessible(engineer);
		await open('/runs?kind=power_sweep&to=2026-03-02');
		expect(await sentence()).toMatch(/^Runs, newest first,\s*kind power sweep/);
		expect(await numbers()).toEqual(['PLN-R-0002', 'PLN-R-0001']);
		await engineer.getByRole('columnheader', { name: /Oil temperature/ }).waitFor();
	});

	it('finds by number or title, and answers what there is not with a sentence', async () => {
		await open('/runs');
		await engineer.getByLabel('Number or title').fill('r-0003');
		await engineer.keyboard.press('Enter');
		await engineer.waitForURL(/text=r-0003/);
		await expect.poll(numbers).toEqual(['PLN-R-0003']);
		await open('/runs?cell=C404');
		await engineer.getByText('There is no cell C404.').waitFor();
		await open('/runs?state=mood');
		await engineer.getByText('state: is one of open, closed, accepted, voided.').waitFor();
	});

	it('carries chosen runs into a comparison', async () => {
		await open('/runs');
		await engineer.getByRole('checkbox', { name: 'Choose PLN-R-0001' }).check();
		await engineer.getByRole('checkbox', { name: 'Choose PLN-R-0004' }).check();
		await engineer.getByRole('link', { name: 'Compare in trends' }).click();
		await engineer.waitForURL(/\/trends\?/);
		expect(await sentence()).toContain('2 chosen runs');
		await engineer.getByRole('row').filter({ hasText: '105.000' }).waitFor();
	});
});

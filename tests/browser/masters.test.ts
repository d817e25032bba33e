import type { Page } from 'playwright-core';
import { beforeAll, describe, expect, it } from 'vitest';
import { useBrowser } from '../setup/browser';
import { useStack } from '../setup/stack';
import { expectAccessible } from './accessible';
import { furnish, signedIn } from './runs-lab';

const stack = useStack();
const browser = useBrowser();
let engineer: Page;

const open = (path: string) => engineer.goto(stack.current.origin + path, { waitUntil: 'networkidle' });
const save = (name: string) => engineer.getByRole('button', { name }).click();
const fact = (page: Page, name: string) =>
	page
		.locator('dt', { hasText: new RegExp(`^\\s*${name}\\s*$`) })
		.locator('xpath=following-sibling::dd')
		.first();

beforeAll(async () => {
	await furnish(stack.current);
	engineer = await signedIn(browser.current, stack.current.origin, 'engineer');
});

describe('an engine', () => {
	it('is added with a torque curve pasted from a sheet', async () => {
		await open('/builds/engines/new');
		await engineer.getByLabel('Client', { exact: true }).selectOption({ label: 'PLN · Plainfell Engines' });
		await engineer.getByLabel('Code').fill('P25');
		await engineer.getByLabel('Name').fill('Two and a half litre four');
		await engineer.getByLabel('Displacement').fill('2.5');
		await engineer.getByLabel('Cylinders').fill('4');
		await engineer.getByRole('button', { name: 'Add point' }).click();
		await engineer.getByLabel('Speed, row 1').evaluate((field) => {
			const data = new DataTransfer();
			data.setData('text', '3000\t180\n1000\t150\n6000\t170');
			field.dispatchEvent(
				new ClipboardEvent('paste', { clipboardData: data, bubbles: true, cancelable: true })
			);
		});
		await engineer.getByRole('img', { name: /Expected torque over speed: up to 180/ }).waitFor();
		await expectAccessible(engineer);
		await save('Add engine');
		await engineer.waitForURL(/\/builds\/new\?engine=/);
		await open('/builds/engines?q=p25');
		await engineer.getByRole('link', { name: 'P25' }).click();
		await engineer.getByRole('img', { name: /Expected torque over speed: up to 180.*6.000/ }).waitFor();
		await expectAccessible(engineer);
	});

	it('is changed, with its history; a wrong value is told at its field and what was typed is kept', async () => {
		await engineer.getByRole('link', { name: 'Change engine' }).click();
		await engineer.getByLabel('Compression ratio').fill('0.5');
		await engineer.getByLabel('Displacement').fill('2.4');
		await engineer.getByLabel('Cylinders').fill('4.5');
		await save('Save engine');
		await engineer.getByText('Must be above 1.').waitFor();
		await engineer.getByText('Give a whole number.').waitFor();
		expect(await engineer.getByLabel('Cylinders').inputValue()).toBe('4.5');
		await engineer.getByLabel('Cylinders').fill('4');
		expect(await engineer.getByLabel('Displacement').inputValue()).toBe('2.4');
		await engineer.getByLabel('Compression ratio').fill('10.5');
		await engineer.getByLabel('Why it is changed').fill('Measured again');
		await save('Save engine');
		await engineer.getByRole('heading', { name: 'P25', level: 1 }).waitFor();
		expect(await fact(engineer, 'Displacement').innerText()).toBe('2.4 L');
		await engineer.getByText(/Displacement 2.5 L → 2.4 L; Compression ratio not known → 10.5/).waitFor();
	});
});

describe('a build', () => {
	it('is made from another, which is found by typing, and shows what it changed', async () => {
		await open('/builds/new');
		await engineer.getByLabel('Engine', { exact: true }).selectOption({ label: 'P20 · Two litre four' });
		await engineer.getByLabel('Build number').fill('P20.2');
		await engineer.getByLabel('What it is').fill('Short runners');
		const parent = engineer.getByRole('combobox', { name: 'Changed from' });
		await parent.pressSequentially('deliv');
		await engineer.getByRole('option', { name: /P20\.1/ }).waitFor();
		await expectAccessible(engineer);
		await parent.press('ArrowDown');
		await parent.press('Enter');
		expect(await parent.inputValue()).toBe('P20.1');
		await engineer.getByLabel('Parts').fill('Intake runners: 240 mm');
		await save('Add build');
		await engineer.getByRole('heading', { name: 'P20.2', level: 1 }).waitFor();
		await engineer.getByText('Intake runners added: 240 mm').waitFor();
		await engineer.getByText('It has not run yet.').first().waitFor();
		await expectAccessible(engineer);
	});

	it('is marked ready, which its history tells, and back again', async () => {
		await save('Mark ready');
		await engineer.getByText('State in preparation → ready').waitFor();
		await save('Back to preparation');
		await engineer.getByText('State ready → in preparation').waitFor();
	});
});

describe('a fuel and its batch', () => {
	it('is added by components whose sum is watched, with a specification', async () => {
		await open('/lab/fuels/new');
		await engineer.getByLabel('Code').fill('E10');
		await engineer.getByLabel('Name').fill('Petrol with a tenth of ethanol');
		const components = engineer.getByLabel('Components by volume');
		await components.fill('Petrol; 80; 740; 43; 1.87\nEthanol; 10; 794; 26.8; 3; 0.5');
		await engineer.getByText('The parts add up to 90.0 %; they must add up to 100 %.').first().waitFor();
		await components.fill('Petrol; 90; 740; 43; 1.87\nEthanol; 10; 794; 26.8; 3; 0.5');
		await engineer.getByText('By its components this fuel has:').waitFor();
		await engineer.getByLabel('Net heating value, least').fill('41');
		await expectAccessible(engineer);
		await save('Add fuel');
		await engineer.getByRole('heading', { name: 'E10', level: 1 }).waitFor();
		await engineer.getByText(/at least 41\.00/).waitFor();
		await expectAccessible(engineer);
	});

	it('tells a wrong unit at its field, and a batch outside the specification on its page', async () => {
		await engineer.getByRole('link', { name: 'Add batch' }).click();
		await engineer.getByLabel('Batch code').fill('E10-7');
		const heating = engineer.getByRole('group', { name: 'Net heating value' });
		await heating.getByLabel('Value').fill('40100');
		await heating.getByLabel('Method').fill('Bomb calorimeter');
		await save('Add batch');
		await engineer.getByText(/Is the unit right\?/).waitFor();
		await expectAccessible(engineer);
		await heating.getByLabel('Value').fill('40.1');
		await heating.getByLabel('Uncertainty').fill('0.05');
		await save('Add batch');
		await engineer.getByRole('heading', { name: 'Outside the specification of E10' }).waitFor();
		await engineer
			.getByText(/40\.10/)
			.first()
			.waitFor();
		await expectAccessible(engineer);
	});

	it('is measured again as a new version', async () => {
		await engineer.getByRole('link', { name: 'Record new values' }).click();
		await engineer.getByRole('group', { name: 'Net heating value' }).getByLabel('Value').fill('41.6');
		await save('Save as a new version');
		await engineer.getByText('Version 2, in use').waitFor();
		expect(await engineer.getByRole('heading', { name: 'Outside the specification of E10' }).count()).toBe(0);
		await open('/lab/fuels?q=e10&sort=-runs');
		await engineer.getByRole('link', { name: 'E10-7' }).waitFor();
		await expectAccessible(engineer);
	});
});

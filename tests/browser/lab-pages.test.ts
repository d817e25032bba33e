import { DateTime } from 'luxon';
import type { Page } from 'playwright-core';
import { beforeAll, describe, expect, it } from 'vitest';
import { useBrowser } from '../setup/browser';
import { useStack } from '../setup/stack';
import { expectAccessible } from './accessible';
import { addMaker } from './people';
import { Complaints, openVisitor, signIn } from './visitor';

/** Cells and limit sets as a manager keeps them, by keyboard where a table has to be filled. */
const ZONE = 'Europe/Stockholm';
const stack = useStack({ LAB_TIME_ZONE: ZONE });
const browser = useBrowser();
const complaints = new Complaints();
let manager: Page;

const typed = (at: DateTime) => at.toFormat("yyyy-MM-dd'T'HH:mm");
const soon = DateTime.now().setZone(ZONE).plus({ weeks: 1 }).startOf('week').set({ hour: 9 });

/** What a paste of this text would bring to the field that has the focus. */
async function paste(page: Page, text: string): Promise<void> {
	await page.evaluate((pasted) => {
		const data = new DataTransfer();
		data.setData('text', pasted);
		document.activeElement?.dispatchEvent(
			new ClipboardEvent('paste', { clipboardData: data, bubbles: true, cancelable: true })
		);
	}, text);
}

beforeAll(async () => {
	const lab = await addMaker(stack.current, {
		email: 'mira@fellmoor.example',
		name: 'Mira Holt',
		role: 'manager'
	});
	await lab('/fuels', { code: 'F1', name: 'Reference fuel' });
	await lab('/clients', { code: 'HB', name: 'Hallbeck Engines' });
	manager = await openVisitor(browser.current, stack.current.origin, complaints);
	await signIn(manager, 'mira@fellmoor.example');
});

describe('a cell', () => {
	it('is added with an envelope pasted from a sheet, and says at its field what is wrong', async () => {
		await manager.goto('/lab/cells/new', { waitUntil: 'networkidle' });
		await manager.getByLabel('Code').fill('C7');
		await manager.getByLabel('Name').fill('Transient cell');
		await manager.getByLabel('Power, at most').fill('220');
		await manager.getByLabel('Torque, at most').fill('480');
		await manager.getByRole('button', { name: 'Add point' }).press('Enter');
		await paste(manager, '600\t300\n1200\t480\n9000\thigh');
		await manager.getByRole('group', { name: 'Fuels plumbed' }).getByLabel('F1').check();
		await manager.getByLabel('Open').selectOption('hours');
		await manager.getByLabel('Monday').fill('6.30 - 20');
		await manager.getByRole('button', { name: 'Same as Monday until Friday' }).click();
		await manager.getByRole('button', { name: 'Add cell' }).click();
		await manager.getByText('Row 3: Give a number').waitFor();
		expect(await manager.getByLabel('Torque, row 3').inputValue()).toBe('high');
		await manager.getByLabel('Torque, row 3').fill('233');
		// Enter on the last row adds one, and the key of its neighbour's field takes it away again.
		await manager.getByLabel('Torque, row 3').press('Enter');
		await manager.getByRole('button', { name: 'Remove row 4' }).press('Enter');
		await manager.getByRole('button', { name: 'Add cell' }).click();
		await manager.getByText('Give a number', { exact: false }).first().waitFor();
		await manager.getByLabel('Speed, at most').fill('9000');
		await manager.getByRole('img', { name: /Torque it can hold over speed/ }).waitFor();
		await expectAccessible(manager);
		await manager.getByRole('button', { name: 'Add cell' }).click();
		await manager.waitForURL('**/lab/cells/C7');
		await manager.getByText('Mon–Fri 06:30–20:00').waitFor();
		await expectAccessible(manager);
	});

	it('is found in the list, whose address says how it is sorted and filtered', async () => {
		await manager.goto('/lab/cells', { waitUntil: 'networkidle' });
		await manager.getByRole('link', { name: 'Power' }).click();
		await manager.waitForURL('**/lab/cells?sort=-power');
		await manager.getByLabel('Machine').selectOption('eddy_current');
		await manager.waitForURL('**kind=eddy_current**');
		await manager.getByRole('link', { name: 'C7' }).waitFor();
		await expectAccessible(manager);
	});

	it('gets a later torque chain, which says why and shows the dead weights', async () => {
		await manager.goto('/lab/cells/C7/torque-chain/new', { waitUntil: 'networkidle' });
		await manager.getByLabel('Inertia of the rotor').fill('0.31');
		await manager.getByLabel('Calibration arm').fill('0.5');
		await manager.getByLabel('Local gravity').fill('981');
		await manager.getByLabel('Why').fill('Rotor weighed by its run-down');
		await manager.getByRole('button', { name: 'Add version' }).click();
		await manager.getByText('Is in m/s²: 9.7 to 9.9.').waitFor();
		await manager.getByLabel('Local gravity').fill('9.8183');
		await manager.getByRole('button', { name: 'Add version' }).click();
		await manager.waitForURL('**/lab/cells/C7#torque-chain');
		await manager.getByText('Rotor: not recorded → 0.31').waitFor();
		await manager.getByText('Rotor weighed by its run-down').waitFor();
		// 50 kg on half a metre.
		await manager.getByRole('cell', { name: '245.458' }).waitFor();
	});

	it('is closed for a time, says with what that clashes, and asks before it is opened again', async () => {
		await manager.goto('/lab/cells/C7', { waitUntil: 'networkidle' });
		const close = async (hour: number) => {
			await manager.getByLabel('From', { exact: true }).fill(typed(soon.set({ hour })));
			await manager.getByLabel('To', { exact: true }).fill(typed(soon.set({ hour: hour + 3 })));
			await manager.getByLabel('What for').fill('Service');
			await manager.getByRole('button', { name: 'Close cell' }).click();
		};
		await close(9);
		await manager.getByRole('cell', { name: 'Service' }).waitFor();
		await close(11);
		await manager
			.getByRole('alert')
			.getByText(/C7 is closed .* \(Service\)/)
			.waitFor();
		await manager.getByRole('button', { name: 'Remove', exact: true }).click();
		await manager.getByRole('button', { name: 'Remove closure' }).click();
		await manager.getByText('Nothing in the next 60 days').waitFor();
	});
});

describe('these pages', () => {
	it('left no complaint of a browser behind', () => expect(complaints.said).toEqual([]));
});

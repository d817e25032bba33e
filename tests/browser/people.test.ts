import type { Page } from 'playwright-core';
import { beforeAll, describe, expect, it } from 'vitest';
import { useBrowser } from '../setup/browser';
import { useStack } from '../setup/stack';
import { expectAccessible } from './accessible';
import { addMaker, PASSWORD } from './people';
import { Complaints, openVisitor, signIn } from './visitor';

/** People as an administrator keeps them, and what they notice of it at their next step. */
const stack = useStack();
const browser = useBrowser();
const complaints = new Complaints();
const INES = 'ines@fellmoor.example';
let admin: Page;
let ines: Page;

const visitor = () => openVisitor(browser.current, stack.current.origin, complaints);

/** The link in the mail to this address, once that has come. */
async function mailedLink(email: string): Promise<string> {
	for (const until = Date.now() + 30_000; Date.now() < until;) {
		const mail = (await stack.current.mails()).find(({ to }) => to.includes(email));
		const link = mail && /\/invitation\/\S+/.exec(mail.text)?.[0];
		if (link) return link;
		await admin.waitForTimeout(100);
	}
	throw new Error(`no invitation to ${email}`);
}

async function openInes(): Promise<void> {
	await admin.goto('/lab/people', { waitUntil: 'networkidle' });
	await admin.getByRole('link', { name: 'Ines Marlow' }).click();
	await admin.getByRole('heading', { name: 'Ines Marlow', level: 1 }).waitFor();
}

beforeAll(async () => {
	await addMaker(stack.current, { email: 'ada@fellmoor.example', name: 'Ada Brook', role: 'admin' });
	admin = await visitor();
	await signIn(admin, 'ada@fellmoor.example');
});

describe('a person', () => {
	it('is invited, with what was typed kept when a field is wrong, and signs in by the mailed link', async () => {
		await admin.goto('/lab/people/new', { waitUntil: 'networkidle' });
		await admin.getByLabel('Mail address').fill('ines at fellmoor');
		await admin.getByLabel('Name', { exact: true }).fill('Ines Marlow');
		await admin.getByLabel('Role').selectOption('engineer');
		await admin.getByRole('button', { name: 'Send invitation' }).click();
		await admin.locator('[aria-invalid=true]').waitFor();
		expect(await admin.getByLabel('Mail address').inputValue()).toBe('ines at fellmoor');
		expect(await admin.getByLabel('Role').inputValue()).toBe('engineer');
		await expectAccessible(admin);
		await admin.getByLabel('Mail address').fill(INES);
		await admin.getByRole('button', { name: 'Send invitation' }).click();
		await admin.getByText(`The invitation is on its way to ${INES}.`).waitFor();
		await expectAccessible(admin);

		ines = await visitor();
		await ines.goto(await mailedLink(INES), { waitUntil: 'networkidle' });
		await ines.getByLabel('Password', { exact: true }).fill(PASSWORD);
		await ines.getByLabel('Password again').fill(PASSWORD);
		await ines.getByRole('button', { name: 'Set password' }).click();
		await ines.getByText('Your password is set.').waitFor();
		await signIn(ines, INES);
	});

	it('has another role from the next step on', async () => {
		await ines.goto('/lab/limits', { waitUntil: 'networkidle' });
		await ines.getByRole('link', { name: 'Add limit set' }).first().waitFor();
		await openInes();
		await admin.getByLabel('Role').selectOption('operator');
		await admin.getByRole('button', { name: 'Save', exact: true }).click();
		await admin.getByText('It holds from the person’s next step on.').waitFor();
		await ines.getByRole('link', { name: 'Fuels' }).click();
		await ines.waitForURL('**/lab/fuels');
		await ines.getByRole('link', { name: 'Limits' }).click();
		await ines.getByRole('heading', { name: 'Limits', level: 1 }).waitFor();
		expect(await ines.getByRole('link', { name: 'Add limit set' }).count()).toBe(0);
	});

	it('is signed out by the next step after the account is disabled', async () => {
		await openInes();
		await admin.getByRole('button', { name: 'Disable account' }).click();
		const asked = admin.getByRole('dialog', { name: 'Disable the account of Ines Marlow?' });
		await asked.getByRole('button', { name: 'Disable account' }).click();
		await admin.getByRole('button', { name: 'Enable account' }).waitFor();
		await expectAccessible(admin);
		await ines.goto('/lab/fuels');
		await ines.waitForURL('**/sign-in**');
	});
});

describe('the last administrator', () => {
	it('stays one, and is told why', async () => {
		await admin.goto('/lab/people?role=admin', { waitUntil: 'networkidle' });
		await admin.getByRole('link', { name: 'Ada Brook' }).click();
		await admin.getByLabel('Role').selectOption('manager');
		await admin.getByLabel('This is my own account.').check();
		await admin.getByRole('button', { name: 'Save', exact: true }).click();
		await admin
			.getByRole('alert')
			.getByText(/only administrator/)
			.waitFor();
		expect(await admin.getByLabel('Role').inputValue()).toBe('manager');
		await admin.getByRole('button', { name: 'Disable account' }).click();
		const asked = admin.getByRole('dialog', { name: 'Disable your own account?' });
		await asked.getByRole('button', { name: 'Disable account' }).click();
		await asked.getByRole('alert').waitFor();
		await expectAccessible(admin);
	});
});

describe('the audit trail', () => {
	it('tells who did it, with before and after, and narrows by person', async () => {
		await admin.goto('/lab/audit', { waitUntil: 'networkidle' });
		const line = admin.getByRole('row').filter({ hasText: 'Ines Marlow' });
		await line.filter({ hasText: 'engineer' }).filter({ hasText: 'operator' }).waitFor();
		await expectAccessible(admin);
		await admin.getByLabel('Person').selectOption({ label: 'Ines Marlow' });
		await admin.waitForURL(/person=/);
		await admin.getByRole('cell', { name: 'join', exact: true }).first().waitFor();
		expect(await admin.getByRole('row').filter({ hasText: 'Ada Brook' }).count()).toBe(0);
	});

	it('left no complaint of a browser behind', () => expect(complaints.said).toEqual([]));
});

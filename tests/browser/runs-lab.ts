import type { Browser, Page } from 'playwright-core';
import type { Principal, Role } from '../../src/lib/server/access';
import { addPerson } from '../../src/lib/server/auth';
import { createBuild } from '../../src/lib/server/builds';
import { createCell, NewCell } from '../../src/lib/server/cells';
import { createClient } from '../../src/lib/server/clients';
import { readConfig } from '../../src/lib/server/config';
import { closeDeps, openDeps } from '../../src/lib/server/deps';
import { createEngine, NewEngine } from '../../src/lib/server/engines';
import { createFuel, createFuelBatch, NewFuel, NewFuelBatch } from '../../src/lib/server/fuels';
import type { Stack } from '../setup/stack';
import { truthOf } from '../traces/traces';

const PASSWORD = 'a shaft that turns in its bearings';
const addressOf = (role: Role) => `${role}@fellmoor.example`;

/** One client's engine as sweep-plain.csv was made with, a cell, a fuel, and people who can sign in. */
export async function furnish(stack: Stack): Promise<void> {
	const deps = openDeps(readConfig(stack.env));
	try {
		const roles: Role[] = ['manager', 'engineer', 'operator'];
		const ids = await Promise.all(
			roles.map((role) =>
				addPerson(deps, { email: addressOf(role), name: `Sam ${role}`, role, password: PASSWORD })
			)
		);
		const manager: Principal = {
			personId: ids[0]!,
			name: 'Sam manager',
			email: addressOf('manager'),
			role: 'manager',
			clientId: null,
			units: 'si',
			via: { kind: 'token', id: ids[0]! }
		};
		const { engine } = truthOf('sweep-plain.csv');
		await createClient(deps, manager, { code: 'PLN', name: 'Plainfell Engines' });
		await createEngine(
			deps,
			manager,
			NewEngine.parse({
				client: 'PLN',
				code: 'P20',
				name: 'Two litre four',
				displacementL: engine.displacement_l,
				cylinders: 4,
				strokesPerCycle: 4,
				ignition: 'spark'
			})
		);
		await createBuild(deps, manager, {
			client: 'PLN',
			engine: 'P20',
			number: 'P20.1',
			title: 'As delivered',
			parts: []
		});
		await createCell(
			deps,
			manager,
			NewCell.parse({
				code: 'C1',
				name: 'First cell',
				absorber: { kind: 'ac', maxPowerKw: 300, maxTorqueNm: 500, maxSpeedRpm: 9000 }
			})
		);
		await createFuel(deps, manager, NewFuel.parse({ code: 'E5', name: 'Petrol with ethanol' }));
		await createFuelBatch(
			deps,
			manager,
			NewFuelBatch.parse({
				fuel: 'E5',
				code: 'E5-1',
				lhvMjKg: { value: engine.lhv_mj_per_kg },
				afrStoich: { value: engine.afr_stoich }
			})
		);
	} finally {
		await closeDeps(deps);
	}
}

/** A signed-in page of a person of this role, in a browser context of its own. */
export async function signedIn(
	browser: Browser,
	origin: string,
	role: Role,
	options: Parameters<Browser['newContext']>[0] = {}
): Promise<Page> {
	const context = await browser.newContext({ viewport: { width: 1280, height: 900 }, ...options });
	const page = await context.newPage();
	page.setDefaultTimeout(15_000);
	await page.goto(`${origin}/sign-in`);
	await page.getByLabel('Mail address').fill(addressOf(role));
	await page.getByLabel('Password').fill(PASSWORD);
	await page.getByRole('button', { name: 'Sign in' }).click();
	await page.waitForURL((url) => url.pathname !== '/sign-in');
	return page;
}

import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll } from 'vitest';
import type { Principal, Role } from '../../src/lib/server/access';
import { requestBooking, type Booking } from '../../src/lib/server/bookings';
import { createBuild } from '../../src/lib/server/builds';
import { createCell, NewCell } from '../../src/lib/server/cells';
import { createClient } from '../../src/lib/server/clients';
import { readConfig } from '../../src/lib/server/config';
import { closeDeps, openDeps, type Deps } from '../../src/lib/server/deps';
import { createEngine, NewEngine } from '../../src/lib/server/engines';
import type { Problem } from '../../src/lib/server/problem';
import { useDatabase } from '../setup/database';

/** Monday of a quiet week; every test's clock stands here unless it sets another. */
const MONDAY = new Date('2027-03-01T06:00:00Z');
export const ZONE = 'Europe/Stockholm';

const HOUR_MS = 3_600_000;

/** So many hours after that Monday, 06:00 UTC. */
export const hour = (hours: number) => new Date(MONDAY.getTime() + hours * HOUR_MS);

/** A lab of its own for a test file: people, two rival clients, cells and builds. */
export function useBookingLab(extra: () => Record<string, string> = () => ({})) {
	const database = useDatabase();
	let open: Deps | undefined;
	let made = 0;
	const lab = {
		database,
		get deps(): Deps {
			if (!open) throw new Error('The lab is there from the first hook or test on, not before.');
			return open;
		},
		setNow(at: Date) {
			lab.deps.now = () => at;
		},
		person,
		client: async (code: string) =>
			createClient(lab.deps, await lab.person('manager'), { code, name: `${code} Engines` }),
		cell: async (more: Partial<Parameters<typeof NewCell.parse>[0] & object> = {}) =>
			createCell(
				lab.deps,
				await lab.person('manager'),
				NewCell.parse({
					code: `C${++made}`,
					name: 'Test cell',
					absorber: { kind: 'ac', maxPowerKw: 300, maxTorqueNm: 500, maxSpeedRpm: 9000 },
					...more
				})
			),
		build: async (client: string, engine: object = {}) => {
			const manager = await lab.person('manager');
			const code = `E${++made}`;
			await createEngine(
				lab.deps,
				manager,
				NewEngine.parse({
					client,
					code,
					name: 'Engine',
					displacementL: 2,
					cylinders: 4,
					strokesPerCycle: 4,
					ignition: 'spark',
					maxSpeedRpm: 7000,
					expectedTorque: [
						[1000, 150],
						[7000, 180]
					],
					...engine
				})
			);
			return createBuild(lab.deps, manager, {
				client,
				engine: code,
				number: `B${++made}`,
				title: 'As delivered',
				parts: []
			});
		},
		request: (
			who: Principal,
			cell: string,
			build: string,
			from: Date,
			to: Date,
			more: Partial<Parameters<typeof requestBooking>[2]> = {}
		): Promise<Booking> => requestBooking(lab.deps, who, { cell, build, from, to, ...more })
	};

	const people = new Map<string, Principal>();
	/** One person of this role (and client); asked for again, the same one. */
	async function person(role: Role, clientId: string | null = null, name = 'Sam Moor'): Promise<Principal> {
		const key = `${role} ${clientId} ${name}`;
		const known = people.get(key);
		if (known) return known;
		const email = `p${people.size + 1}@fellmoor.example`;
		const { id } = await lab.deps.pools.auth
			.insertInto('auth.person')
			.values({ email, displayName: name, role, clientId })
			.returning('id')
			.executeTakeFirstOrThrow();
		// Who has chosen a password gets mail; nobody signs in with this one.
		await lab.deps.pools.auth.insertInto('auth.password').values({ personId: id, hash: '-' }).execute();
		const who: Principal = {
			personId: id,
			name,
			email,
			role,
			clientId,
			units: 'si',
			via: { kind: 'token', id: randomUUID() }
		};
		people.set(key, who);
		return who;
	}

	beforeAll(() => {
		open = openDeps(readConfig({ ...database.env, LAB_TIME_ZONE: ZONE, ...extra() }));
		lab.setNow(MONDAY);
	});
	afterAll(async () => {
		if (open) await closeDeps(open);
	});
	return lab;
}

/** The problem that something was refused with. */
export async function refusal(work: Promise<unknown>): Promise<Problem> {
	try {
		await work;
	} catch (error) {
		return error as Problem;
	}
	throw new Error('It was not refused.');
}

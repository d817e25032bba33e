import { describe, expect, it } from 'vitest';
import type { Principal } from '../../src/lib/server/access';
import { createFuel, createFuelBatch, NewFuel, NewFuelBatch } from '../../src/lib/server/fuels';
import { makeBench, NewBench, readRunStart } from '../../src/lib/server/run-start';
import { NewRun, openRun } from '../../src/lib/server/runs';
import { hour, refusal, useBookingLab } from './booking-lab';

const lab = useBookingLab();

const bench = (more: object = {}) =>
	NewBench.parse({
		client: '',
		clientName: 'Moorside Marine Engines',
		engineName: 'Two litre four',
		displacementL: 2,
		cylinders: 4,
		strokesPerCycle: 4,
		ignition: 'spark',
		induction: 'natural',
		fuelName: 'Petrol',
		lhvMjKg: null,
		cellName: 'Cell 1',
		absorberKind: 'ac',
		maxPowerKw: 100,
		maxTorqueNm: 200,
		maxSpeedRpm: 6000,
		...more
	});

const open = (who: Principal, build: string, cell: string, fuelBatch: string) =>
	openRun(
		lab.deps,
		who,
		NewRun.parse({ build, cell, fuelBatch, kind: 'steady_points', startedAt: hour(0).toISOString() })
	);

describe('what a new record starts from', () => {
	it('is nothing in an empty lab, where only a manager can make what is lacking', async () => {
		const manager = await lab.person('manager');
		const engineer = await lab.person('engineer');
		expect(await readRunStart(lab.deps, engineer, {})).toEqual({
			build: null,
			cell: null,
			fuelBatch: null,
			kind: null,
			booking: null,
			from: null
		});
		expect((await refusal(makeBench(lab.deps, engineer, bench()))).status).toBe(403);
		expect((await refusal(makeBench(lab.deps, await lab.person('operator'), bench()))).status).toBe(403);
		const unnamed = await refusal(makeBench(lab.deps, manager, bench({ cellName: '' })));
		expect(Object.keys(unnamed.fields)).toEqual(['cellName']);
		// Everything is checked before anything is made.
		const { count } = await lab.deps.pools.lab
			.selectFrom('client')
			.select((eb) => eb.fn.countAll<number>().as('count'))
			.executeTakeFirstOrThrow();
		expect(Number(count)).toBe(0);

		const made = await makeBench(lab.deps, manager, bench());
		expect(made.engine).toMatchObject({ code: 'TWO-LITRE-FOUR', client: 'MOORSIDE', cylinders: 4 });
		// The only ones there are need no choosing.
		expect(await readRunStart(lab.deps, manager, {})).toMatchObject({
			build: made.build.id,
			cell: made.cell?.id,
			fuelBatch: made.fuelBatch?.id,
			from: null
		});
	});

	it('is the last run of this person, else of the lab', async () => {
		const client = await lab.client('RSA');
		const [cell, first, second] = [await lab.cell(), await lab.build('RSA'), await lab.build('RSA')];
		const manager = await lab.person('manager');
		await createFuel(lab.deps, manager, NewFuel.parse({ code: 'RSF', name: 'Fuel' }));
		const batch = await createFuelBatch(
			lab.deps,
			manager,
			NewFuelBatch.parse({ fuel: 'RSF', code: 'RSF-1', client: 'RSA' })
		);
		const [one, other] = [await lab.person('operator'), await lab.person('engineer')];
		const own = await open(one, first.id, cell.id, batch.id);
		const later = await open(other, second.id, cell.id, batch.id);
		expect(await readRunStart(lab.deps, one, {})).toMatchObject({
			build: first.id,
			kind: 'steady_points',
			from: { kind: 'own', number: own.number }
		});
		expect(await readRunStart(lab.deps, manager, {})).toMatchObject({
			build: second.id,
			from: { kind: 'lab', number: later.number }
		});
		expect(await readRunStart(lab.deps, one, { build: second.id })).toMatchObject({
			build: second.id,
			fuelBatch: batch.id,
			from: { number: later.number }
		});

		// A client's own fuel is not offered to another's build.
		await lab.client('RSB');
		const foreign = await lab.build('RSB');
		expect(await readRunStart(lab.deps, one, { build: foreign.id, fuelBatch: batch.id })).toMatchObject({
			build: foreign.id,
			fuelBatch: null
		});

		const booking = await lab.request(manager, cell.code, second.id, hour(5), hour(6), {
			fuelBatch: batch.id,
			kind: 'motoring'
		});
		expect(await readRunStart(lab.deps, one, { booking: booking.id })).toMatchObject({
			build: second.id,
			cell: cell.id,
			fuelBatch: batch.id,
			kind: 'motoring',
			booking: { number: booking.number },
			from: { kind: 'booking', number: booking.number }
		});
		const refused = await refusal(readRunStart(lab.deps, await lab.person('client', client.id), {}));
		expect(refused.status).toBe(403);
	});
});

import { describe, expect, it } from 'vitest';
import {
	changeFuel,
	changeFuelBatch,
	checkFuelBatch,
	createFuelBatch,
	fuelBatchBehind,
	FuelBatchChange,
	fuelBatchHistory,
	FuelChange,
	listFuelBatches,
	listFuelBatchVersions,
	NewFuelBatch,
	recomputeFuelBatch
} from '../../src/lib/server/fuels';
import { createLimitSet, NewLimitSet } from '../../src/lib/server/limits';
import { processTrace } from '../../src/lib/server/traces';
import { refusal } from './booking-lab';
import { useMastersLab } from './masters-lab';

const { lab, scene, withTrace, figureOf } = useMastersLab();

describe('a fuel batch that is measured again', () => {
	it('appends a version; runs keep theirs until they are computed again', async () => {
		const { manager, own, batch, run } = await scene('FA');
		const { id } = await run();
		const traceId = await withTrace(manager, id, own.id);
		const before = await figureOf(manager, id, 'bte_max');
		const change = FuelBatchChange.parse({
			lhvMjKg: { value: 41.5, u: 0.02, method: 'Bomb calorimeter' },
			ron: 95.2,
			reason: 'Second certificate'
		});
		expect((await refusal(changeFuelBatch(lab.deps, manager, batch.id, change, 9))).status).toBe(412);
		const changed = await changeFuelBatch(lab.deps, manager, batch.id, change, batch.version);
		expect(changed).toMatchObject({ version: 2, behind: { runs: 1, accepted: 0 } });
		expect(changed.properties).toMatchObject({ ron: { value: 95.2 }, afrStoich: { value: 14.5 } });
		const runsOf = async () =>
			(await listFuelBatchVersions(lab.deps, manager, batch.id)).map(({ version, runs }) => [version, runs]);
		expect(await runsOf()).toEqual([
			[2, 0],
			[1, 1]
		]);
		await recomputeFuelBatch(lab.deps, manager, batch.id);
		await processTrace(lab.deps, { clientId: own.id, traceId });
		expect(await figureOf(manager, id, 'bte_max')).toBeCloseTo((before * 42.7) / 41.5, 6);
		expect(await runsOf()).toEqual([
			[2, 1],
			[1, 0]
		]);
		expect(await fuelBatchBehind(lab.deps, manager, batch.id)).toEqual({ runs: 0, accepted: 0 });
		const [, told] = await fuelBatchHistory(lab.deps, manager, batch.id);
		expect(told!.detail).toBe(
			'Net heating value 42.70 ± 0.10 MJ/kg (Bomb calorimeter) → 41.500 ± 0.040 MJ/kg (Bomb calorimeter); Research octane number not known → 95.2; “Second certificate”'
		);
		// Null takes a value away.
		const less = await changeFuelBatch(
			lab.deps,
			manager,
			batch.id,
			FuelBatchChange.parse({ ron: null }),
			null
		);
		expect(less.properties).not.toHaveProperty('ron');
	});

	it('is told where it is outside its fuel’s specification or a rule of a limit set', async () => {
		const { manager, client, own, fuel, batch } = await scene('FB');
		await changeFuel(
			lab.deps,
			manager,
			fuel.id,
			FuelChange.parse({ specification: { lhvMjKg: { min: 42.9 }, ron: { min: 95 } } }),
			fuel.version
		);
		expect(
			(await refusal(changeFuel(lab.deps, manager, fuel.id, FuelChange.parse({ name: 'New' }), 1))).status
		).toBe(412);
		await createLimitSet(
			lab.deps,
			manager,
			NewLimitSet.parse({
				client: own.code,
				code: 'ENERGY',
				title: 'Energy',
				rules: [
					{
						title: 'Heating value',
						subject: { fuel: 'lhvMjKg' },
						relation: 'at_most',
						limit: 42,
						holdS: 0,
						severity: 'breach'
					}
				]
			})
		);
		for (const who of [manager, client]) {
			const check = await checkFuelBatch(lab.deps, who, batch.id);
			expect(check.specification.map(({ property, verdict }) => [property, verdict])).toEqual([
				['lhvMjKg', 'outside'],
				['ron', 'unknown']
			]);
			expect(check.rules.map(({ limitSet, rule }) => [limitSet, rule])).toEqual([
				['ENERGY', 'Heating value']
			]);
		}
	});

	it('is listed for whom it is kept, and another client’s versions are nobody’s', async () => {
		const { manager, client, own, fuel, batch } = await scene('FC');
		const { client: rival } = await scene('FD');
		await createFuelBatch(
			lab.deps,
			manager,
			NewFuelBatch.parse({ fuel: fuel.code, code: 'LAB-1', lhvMjKg: 43 })
		);
		const codes = async (query: object) =>
			(await listFuelBatches(lab.deps, manager, { fuel: fuel.code, limit: 50, ...query })).items.map(
				({ code }) => code
			);
		expect(await codes({ sort: '-code' })).toEqual([batch.code, 'LAB-1']);
		expect(await codes({ client: 'lab' })).toEqual(['LAB-1']);
		expect(await codes({ client: own.code })).toEqual([batch.code]);
		expect(await codes({ q: 'lab' })).toEqual(['LAB-1']);
		expect((await refusal(listFuelBatchVersions(lab.deps, rival, batch.id))).status).toBe(404);
		expect((await refusal(checkFuelBatch(lab.deps, rival, batch.id))).status).toBe(404);
		expect(await listFuelBatchVersions(lab.deps, client, batch.id)).toHaveLength(1);
	});
});

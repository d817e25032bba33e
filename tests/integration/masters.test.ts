import { describe, expect, it } from 'vitest';
import {
	buildHistory,
	changeBuild,
	createBuild,
	engineHours,
	getBuild,
	getBuildRecord,
	listBuilds
} from '../../src/lib/server/builds';
import { reading } from '../../src/lib/server/db';
import {
	changeEngine,
	EngineChange,
	engineBehind,
	engineHistory,
	getEngine,
	pageEngines,
	recomputeEngine
} from '../../src/lib/server/engines';
import { acceptRun, closeRun, getRun, voidRun } from '../../src/lib/server/runs';
import { processTrace } from '../../src/lib/server/traces';
import { truthOf } from '../traces/traces';
import { hour, refusal } from './booking-lab';
import { SWEEP, useMastersLab } from './masters-lab';

const { lab, scene, withTrace, figureOf, queuedAgain } = useMastersLab();

const partsA = [
	{ name: 'Camshafts', value: '264°' },
	{ name: 'Runners', value: '310 mm' }
];
const partsB = [
	{ name: 'Camshafts', value: '264°' },
	{ name: 'Runners', value: '240 mm' }
];

describe('an engine that is changed', () => {
	it('keeps what figures were made with, says how many runs that are, and computes them again on request', async () => {
		const { manager, engineer, client, build, own, run } = await scene('EA');
		const [first, second, third] = [await run(), await run(hour(2)), await run(hour(3))];
		const traces = [];
		for (const { id } of [first, second, third]) traces.push(await withTrace(manager, id, own.id));
		await closeRun(lab.deps, manager, second.id, null);
		await acceptRun(lab.deps, engineer, second.id, 'Looks right', null);
		await voidRun(lab.deps, engineer, third.id, 'Wrong fuel', null);

		const engine = await getEngine(lab.deps, manager, build.engineId);
		const before = await figureOf(manager, first.id, 'bmep_max');
		expect(await engineBehind(lab.deps, manager, engine.id)).toEqual({ runs: 0, accepted: 0 });

		const change = EngineChange.parse({ displacementL: 2.198, reason: 'Measured again' });
		expect((await refusal(changeEngine(lab.deps, manager, engine.id, change, 7))).status).toBe(412);
		const changed = await changeEngine(lab.deps, manager, engine.id, change, engine.version);
		expect(changed).toMatchObject({ displacementL: 2.198, version: 2, behind: { runs: 1, accepted: 1 } });
		expect(await figureOf(manager, first.id, 'bmep_max'), 'nothing changes by itself').toBe(before);

		await recomputeEngine(lab.deps, manager, engine.id);
		expect(await queuedAgain()).toEqual([traces[0]]);
		await processTrace(lab.deps, { clientId: own.id, traceId: traces[0]! });
		expect(await figureOf(manager, first.id, 'bmep_max')).toBeCloseTo(
			(before * engine.displacementL) / 2.198,
			6
		);
		expect(await engineBehind(lab.deps, manager, engine.id)).toEqual({ runs: 0, accepted: 1 });

		const history = await engineHistory(lab.deps, manager, engine.id);
		expect(history.map(({ action }) => action)).toEqual([
			'engine.recompute',
			'engine.change',
			'engine.create'
		]);
		expect(history[1]).toMatchObject({
			actor: 'Sam Moor',
			detail: 'Displacement 1.998 L → 2.198 L; “Measured again”'
		});
		expect(await engineHistory(lab.deps, client, engine.id)).toHaveLength(3);
	});

	it('is as it was when nothing differs, and what no figure is made with leaves no run behind', async () => {
		const { manager, build, own, run } = await scene('EB');
		await withTrace(manager, (await run()).id, own.id);
		const same = await changeEngine(
			lab.deps,
			manager,
			build.engineId,
			EngineChange.parse({ displacementL: truthOf(SWEEP).engine.displacement_l }),
			null
		);
		expect(same.version).toBe(1);
		const ratio = await changeEngine(
			lab.deps,
			manager,
			build.engineId,
			EngineChange.parse({ compressionRatio: 10.5 }),
			null
		);
		expect(ratio).toMatchObject({ version: 2, compressionRatio: 10.5, behind: { runs: 0, accepted: 0 } });
	});

	it('needs its induction when it comes to ignite by compression', async () => {
		const { manager, build } = await scene('EC');
		const problem = await refusal(
			changeEngine(lab.deps, manager, build.engineId, EngineChange.parse({ ignition: 'compression' }), null)
		);
		expect(problem.fields).toHaveProperty('induction');
	});

	it('is another client’s to nobody', async () => {
		const { client, build } = await scene('ED');
		const { client: rival, own } = await scene('EE');
		expect((await refusal(getEngine(lab.deps, rival, build.engineId))).status).toBe(404);
		expect((await refusal(engineHistory(lab.deps, rival, build.engineId))).status).toBe(404);
		const { items } = await pageEngines(lab.deps, rival, { limit: 50 });
		expect(new Set(items.map((engine) => engine.client))).toEqual(new Set([own.code]));
		for (const [who, seen] of [
			[client, 1],
			[rival, 0]
		] as const) {
			const rows = await reading(lab.deps.pools, who, (trx) =>
				trx.selectFrom('engineVersion').select('version').where('engineId', '=', build.engineId).execute()
			);
			expect(rows).toHaveLength(seen);
		}
	});
});

describe('a build', () => {
	it('shows its line, differences only, and what was made of it', async () => {
		const { manager, own, build } = await scene('BA');
		const make = (number: string, parent: string | null, parts: typeof partsA) =>
			createBuild(lab.deps, manager, {
				client: own.code,
				engine: build.engineId,
				number,
				title: `Build ${number}`,
				parent,
				parts
			});
		const first = await make('N1', null, partsA);
		const second = await make('N2', first.id, partsB);
		const third = await make('N3', second.id, [...partsB, { name: 'Sump', value: '' }]);
		const { lineage, children } = await getBuildRecord(lab.deps, manager, second.id);
		expect(lineage.map(({ number, changes }) => [number, changes])).toEqual([
			['N1', []],
			['N2', [{ name: 'Runners', before: '310 mm', value: '240 mm', change: 'changed' }]]
		]);
		expect(children.map(({ number }) => number)).toEqual(['N3']);
		const line = (await getBuildRecord(lab.deps, manager, third.id)).lineage;
		expect(line.map(({ number }) => number)).toEqual(['N1', 'N2', 'N3']);
		expect(line[2]!.changes).toEqual([{ name: 'Sump', before: null, value: '', change: 'added' }]);
	});

	it('keeps its parts once it has run; state and title may change, and are told as history', async () => {
		const { manager, build, run } = await scene('BB');
		const parts = await changeBuild(lab.deps, manager, build.id, { parts: partsA }, build.version);
		expect(parts).toMatchObject({ parts: partsA, version: 2 });
		expect((await refusal(changeBuild(lab.deps, manager, build.id, { parts: partsB }, 1))).status).toBe(412);
		await run();
		const problem = await refusal(changeBuild(lab.deps, manager, build.id, { parts: partsB }, null));
		expect(problem.status).toBe(409);
		expect(problem.message).toContain('new build');
		expect((await getBuild(lab.deps, manager, build.id)).parts).toEqual(partsA);
		// The same parts are no change.
		await changeBuild(lab.deps, manager, build.id, { parts: partsA, state: 'ready' }, 2);
		await changeBuild(lab.deps, manager, build.id, { title: 'Renamed' }, 3);
		const history = await buildHistory(lab.deps, manager, build.id);
		expect(history.map(({ detail }) => detail)).toEqual([
			'Title “As delivered” → “Renamed”',
			'State in preparation → ready',
			'Camshafts not fitted → 264°; Runners not fitted → 310 mm',
			null
		]);
	});

	it('counts hours from traces, from records where there is none, and says what is not known', async () => {
		const { manager, engineer, own, build, run } = await scene('BC');
		const first = await run(hour(1));
		await withTrace(manager, first.id, own.id);
		const voided = await run(hour(2));
		await withTrace(manager, voided.id, own.id);
		await voidRun(lab.deps, engineer, voided.id, 'Wrong fuel', null);
		const recorded = await run(hour(3));
		lab.setNow(hour(4.5));
		await closeRun(lab.deps, manager, recorded.id, null);
		await run(hour(5));

		// The sweep turns faster than 100 rev/min from its first row to its last.
		const { duration } = (await getRun(lab.deps, manager, first.id)).metrics;
		const { hours, engineHours: ofEngine, best } = await getBuildRecord(lab.deps, manager, build.id);
		const traced = (2 * duration!.value) / 3600;
		expect(hours.runningAboveRpm).toBe(100);
		expect(hours.fromTraces.runs).toBe(2);
		expect(hours.fromTraces.hours).toBeCloseTo(traced, 9);
		expect(hours.fromRecords).toEqual({ hours: 1.5, runs: 1 });
		expect(hours.unknownRuns).toBe(1);
		expect(hours.hours).toBeCloseTo(traced + 1.5, 9);
		expect(ofEngine).toEqual(hours);
		expect(await engineHours(lab.deps, manager, build.engineId)).toEqual(hours);

		const power = best.find(({ code }) => code === 'peak_power')!;
		expect(power).toMatchObject({ n: 1, sd: null, run: first.number });
		expect(power.value).toBeCloseTo(truthOf(SWEEP).metrics!.peak_power!, 0);
	});

	it('is found by a part of its number or title, sorted, page by page', async () => {
		const { manager, own, build } = await scene('BD');
		for (const [number, title] of [
			['Z-1', 'Long runners'],
			['Z-2', 'short runners'],
			['Z-3', '100% charge']
		])
			await createBuild(lab.deps, manager, {
				client: own.code,
				engine: build.engineId,
				number: number!,
				title: title!,
				parts: []
			});
		const numbers = async (query: object) =>
			(await listBuilds(lab.deps, manager, { client: own.code, limit: 50, ...query })).items.map(
				({ number }) => number
			);
		expect(await numbers({ q: 'RUNNERS', sort: 'number' })).toEqual(['Z-1', 'Z-2']);
		expect(await numbers({ q: '0%' })).toEqual(['Z-3']);
		expect(await numbers({ q: '_' })).toEqual([]);
		expect(await numbers({ state: 'ready' })).toEqual([]);
		for (const sort of ['number', '-number', 'title', '-added', '-runs', 'engine'] as const) {
			const whole = await numbers({ sort });
			const paged = [];
			for (let cursor: string | undefined, n = 0; n < 10; n++) {
				const page = await listBuilds(lab.deps, manager, { client: own.code, sort, limit: 1, cursor });
				paged.push(...page.items.map(({ number }) => number));
				if (!page.nextCursor) break;
				cursor = page.nextCursor;
			}
			expect(paged, sort).toEqual(whole);
			expect(paged, sort).toHaveLength(4);
		}
	});
});

import { randomBytes } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import type { Principal } from '../../src/lib/server/access';
import { followBuild } from '../../src/lib/server/builds';
import { jsonb, SYSTEM, writing } from '../../src/lib/server/db';
import { createFuel, createFuelBatch, NewFuel, NewFuelBatch } from '../../src/lib/server/fuels';
import { enqueue } from '../../src/lib/server/jobs';
import { flagRun, NewFlag, NewRun, openRun } from '../../src/lib/server/runs';
import { hour } from './booking-lab';
import { ORIGIN, useMailLab } from './mail-lab';

const mail = useMailLab();
const { lab } = mail;

async function scene(codes: [string, string]) {
	const [own, rival] = [await lab.client(codes[0]), await lab.client(codes[1])];
	const [manager, operator] = [await lab.person('manager'), await lab.person('operator', null, 'Op Vale')];
	await createFuel(lab.deps, manager, NewFuel.parse({ code: `${own.code}-F`, name: 'Fuel' }));
	await createFuelBatch(
		lab.deps,
		manager,
		NewFuelBatch.parse({ fuel: `${own.code}-F`, code: `${own.code}-1`, client: own.code })
	);
	const [cell, build] = [await lab.cell(), await lab.build(own.code)];
	const run = await openRun(
		lab.deps,
		operator,
		NewRun.parse({
			build: build.number,
			cell: cell.code,
			fuelBatch: `${own.code}-1`,
			kind: 'power_sweep',
			startedAt: hour(-1).toISOString()
		})
	);
	return {
		own,
		operator,
		run,
		build,
		client: await lab.person('client', own.id, 'Ada Fenn'),
		rivalClient: await lab.person('client', rival.id, 'Cy Rook')
	};
}

/** Flags as a computation of the run's figures leaves them; an earlier computation is superseded. */
async function computedFlags(run: { id: string }, clientId: string, by: Principal, rules: string[]) {
	await writing(lab.deps.pools, SYSTEM, async (trx) => {
		await trx
			.updateTable('reduction')
			.set({ supersededAt: hour(0) })
			.where('runId', '=', run.id)
			.execute();
		const { id: traceId } = await trx
			.insertInto('trace')
			.values({
				clientId,
				runId: run.id,
				filename: 'a.csv',
				sha256: randomBytes(32),
				sizeBytes: 1,
				objectKey: 'k',
				uploadedBy: by.personId
			})
			.returning('id')
			.executeTakeFirstOrThrow();
		const empty = jsonb({}) as never;
		const { id: reductionId } = await trx
			.insertInto('reduction')
			.values({
				clientId,
				runId: run.id,
				traceId,
				methodVersion: '1',
				settings: empty,
				inputs: empty,
				curve: empty,
				points: jsonb([]) as never
			})
			.returning('id')
			.executeTakeFirstOrThrow();
		for (const rule of rules)
			await trx
				.insertInto('flag')
				.values({
					clientId,
					runId: run.id,
					reductionId,
					rule,
					severity: 'breach',
					message: 'Energy flow 172.10 MJ/h is above 167.10 MJ/h.',
					spans: jsonb([
						[12, 14.5],
						[20.1, 21.3]
					]) as never,
					worst: jsonb({ value: 172.1, limit: 167.1, at: 13.2, ratio: 1.03 }) as never,
					totalS: 3.7
				})
				.execute();
		await enqueue(
			trx,
			'mail.notify',
			{ clientId, event: 'run.flagged', subjectId: run.id, revision: 1 },
			`test:${reductionId}`
		);
	});
}

const delivered = async () => {
	await mail.work();
	return mail.arrived();
};

describe('mail about a flagged run', () => {
	it('reaches those who follow the build and who logged the run, once each, and no rival', async () => {
		const { own, operator, run, build, client, rivalClient } = await scene(['FA', 'FB']);
		const manager = await lab.person('manager');
		await followBuild(lab.deps, client, build.id, true);
		await followBuild(lab.deps, operator, build.id, true);
		await computedFlags(run, own.id, operator, ['Old rule']);
		await computedFlags(run, own.id, operator, ['Energy flow limit', 'Second <b>rule</b>']);
		const letters = await delivered();
		// Who made the build follows it from the start.
		expect(letters.map((letter) => letter.to[0]).sort()).toEqual(
			[client.email, manager.email, operator.email].sort()
		);
		expect(letters.map((letter) => letter.to[0])).not.toContain(rivalClient.email);
		const parsed = await mail.parsed(letters[0]!);
		expect(parsed.subject).toBe(`Flagged: run ${run.number}, 2 flags`);
		for (const said of [
			`Run: ${run.number}`,
			`Build: ${build.number}, As delivered`,
			'Energy flow limit (breach): Energy flow 172.10 MJ/h is above 167.10 MJ/h.',
			'Worst 172.1 against 167.1 at 13.2 s.',
			'2 spans: 12.00–14.50 s; 20.10–21.30 s, 3.7 s in all.',
			`${ORIGIN}/runs/${run.number}`
		])
			expect(parsed.text).toContain(said);
		expect(parsed.text).not.toContain('Old rule');
		expect(parsed.html).toContain('Second &lt;b&gt;rule&lt;/b&gt;');
		expect(parsed.html).toContain(`<a href="${ORIGIN}/runs/${run.number}">`);
	});

	it('tells of a flag that a person raised, and of none where none is left', async () => {
		const { operator, run } = await scene(['FC', 'FD']);
		await flagRun(lab.deps, operator, run.id, NewFlag.parse({ reason: 'Belt noise above 5000' }), null);
		const letters = await delivered();
		expect(letters.map((letter) => letter.to[0])).toContain(operator.email);
		expect(letters[0]!.text).toContain('Raised by hand (review): Belt noise above 5000');
		const other = await scene(['FE', 'FF']);
		await computedFlags(other.run, other.own.id, operator, []);
		expect(await delivered()).toEqual([]);
	});
});

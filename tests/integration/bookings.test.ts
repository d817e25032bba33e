import { describe, expect, it } from 'vitest';
import {
	BookingMove,
	cancelBooking,
	confirmBooking,
	declineBooking,
	getBooking,
	moveBooking,
	NewBooking,
	requestBooking
} from '../../src/lib/server/bookings';
import { hour, refusal, useBookingLab } from './booking-lab';

const lab = useBookingLab();

/** What the queue was told of this booking, e.g. `booking.confirmed 2`. */
async function promised(bookingId: string): Promise<string[]> {
	const { rows } = await lab.deps.pools.queuePool.query<{ key: string }>(
		`select key from graphile_worker.jobs where key like $1 order by id`,
		[`mail.notify:%:${bookingId}:%`]
	);
	return rows.map(({ key }) => key.replace('mail.notify:', '').replace(`:${bookingId}:`, ' '));
}

/** Two rivals, one cell with rigging, a build each. */
async function scene(codes: [string, string], cellMore = {}) {
	const [own, rival] = [await lab.client(codes[0]), await lab.client(codes[1])];
	const cell = await lab.cell({ rigUpMinutes: 60, rigDownMinutes: 30, ...cellMore });
	return {
		own,
		rival,
		cell,
		build: await lab.build(own.code),
		rivalBuild: await lab.build(rival.code),
		manager: await lab.person('manager'),
		engineer: await lab.person('engineer'),
		client: await lab.person('client', own.id),
		rivalClient: await lab.person('client', rival.id)
	};
}

describe('asking for a slot', () => {
	it('is numbered per client and waits for an answer', async () => {
		const { cell, build, client, rivalClient, rivalBuild } = await scene(['AS', 'AT']);
		const first = await lab.request(client, cell.code, build.number, hour(24), hour(28), {
			purpose: 'Base line',
			kind: 'power_sweep'
		});
		const other = await lab.request(rivalClient, cell.code, rivalBuild.number, hour(24), hour(28));
		expect(first).toMatchObject({
			number: 'AS-B-0001',
			state: 'requested',
			client: 'AS',
			cell: cell.code,
			build: build.number,
			from: '2027-03-02T06:00:00.000Z',
			to: '2027-03-02T10:00:00.000Z',
			rigUpMinutes: 60,
			rigDownMinutes: 30,
			kind: 'power_sweep',
			purpose: 'Base line',
			may: ['cancel', 'move'],
			version: 1
		});
		expect(other.number).toBe('AT-B-0001');
		expect(await promised(first.id)).toEqual(['booking.requested 1']);
	});

	it('is told what is wrong, at the field', async () => {
		const { cell, build, client } = await scene(['AW', 'AX']);
		const ask = (from: Date, to: Date) => refusal(lab.request(client, cell.code, build.number, from, to));
		expect((await ask(hour(5), hour(5))).fields).toEqual({ to: 'must be later than from.' });
		expect((await ask(hour(5), hour(5 + 32 * 24))).fields.to).toContain('within 31 days');
		expect((await ask(hour(-5), hour(0))).fields.to).toContain('lies in the past');
		expect((await ask(hour(24 * 3000), hour(24 * 3000 + 1))).fields.to).toContain('five years');
		expect((await refusal(lab.request(client, 'C404', build.number, hour(1), hour(2)))).fields).toEqual({
			cell: 'there is no cell C404'
		});
		const body = { cell: 'C', build: 'B', from: '2027-03-01 08:00', to: 'tomorrow', kind: 'race' };
		const issues = NewBooking.safeParse(body).error!.issues.map((issue) => issue.path[0]);
		expect(issues).toEqual(['from', 'to', 'kind']);
		expect(BookingMove.safeParse({}).error!.issues[0]!.message).toContain('from, to or cell');
	});

	it('may lie in the past for what has happened already, and then nobody is mailed', async () => {
		const { cell, build, manager } = await scene(['AP', 'AQ']);
		const input = { cell: cell.code, build: build.number, from: hour(-100), to: hour(-90) };
		const past = await requestBooking(lab.deps, manager, input, { asHistory: true });
		const done = await confirmBooking(lab.deps, manager, past.id, {}, { asHistory: true });
		expect(done).toMatchObject({ state: 'done', may: [] });
		expect(await promised(past.id)).toEqual([]);
	});

	it('for a rival’s build is as for a build that is not there', async () => {
		const { cell, client, rivalBuild } = await scene(['AR', 'AV']);
		const rival = await refusal(lab.request(client, cell.code, rivalBuild.number, hour(1), hour(2)));
		const absent = await refusal(lab.request(client, cell.code, 'B-404', hour(1), hour(2)));
		const said = (problem: typeof rival, ref: string) =>
			JSON.stringify([problem.status, problem.message, problem.fields]).replaceAll(ref, '…');
		expect(rival.status).toBe(400);
		expect(said(rival, rivalBuild.number)).toBe(said(absent, 'B-404'));
		const ids = await refusal(lab.request(client, cell.code, rivalBuild.id, hour(1), hour(2)));
		expect(said(ids, rivalBuild.id)).toBe(said(absent, 'B-404'));
		const named = await refusal(
			lab.request(client, cell.code, rivalBuild.number, hour(1), hour(2), { client: 'AV' })
		);
		expect(named.fields).toEqual({ client: 'there is no client AV' });
	});

	it('overlaps freely; a client hears of a rival’s slot only that the cell is taken', async () => {
		const { cell, build, client, rivalClient, rivalBuild, manager } = await scene(['AY', 'AZ']);
		const rival = await lab.request(rivalClient, cell.code, rivalBuild.number, hour(10), hour(14), {
			purpose: 'Secret cam'
		});
		await confirmBooking(lab.deps, manager, rival.id);
		const mine = await lab.request(client, cell.code, build.number, hour(12), hour(16));
		expect(mine.state).toBe('requested');
		expect(mine.clashesWith).toEqual([
			{ kind: 'taken', cell: cell.code, from: hour(9).toISOString(), to: hour(14.5).toISOString() }
		]);
		expect(mine.warnings[0]).toEqual({
			code: 'clash',
			message: `${cell.code} is taken from Mon 1 Mar 2027 16:00 to 21:30 (Europe/Stockholm).`
		});
		const told = JSON.stringify(mine);
		for (const secret of [rival.number, rival.id, rivalBuild.number, 'Secret', 'AZ'])
			expect(told).not.toContain(secret);
		// The manager is told by whom.
		const seen = await getBooking(lab.deps, manager, mine.id);
		expect(seen.clashesWith).toMatchObject([{ kind: 'booking', number: rival.number }]);
		expect(seen.may).toEqual(['confirm', 'decline', 'cancel', 'move']);
	});

	it('warns of what does not suit, and refuses nothing for it', async () => {
		const { cell, client, own } = await scene(['WA', 'WB'], {
			openingHours: [{ day: 2, from: '08:00', to: '16:00' }],
			absorber: { kind: 'eddy_current', maxPowerKw: 50, maxTorqueNm: 100, maxSpeedRpm: 5000 }
		});
		const build = await lab.build(own.code);
		const asked = await lab.request(client, cell.code, build.number, hour(26), hour(34), {
			kind: 'motoring'
		});
		expect(asked.warnings.map((warning) => warning.code)).toEqual([
			'outside_hours',
			'build_not_ready',
			'absorber_cannot_drive',
			'absorber_speed'
		]);
	});
});

describe('confirming', () => {
	it('takes the cell with its rigging, and copies the rig minutes', async () => {
		const { cell, build, client, manager } = await scene(['CA', 'CB']);
		const { id } = await lab.request(client, cell.code, build.number, hour(10), hour(14));
		const confirmed = await confirmBooking(lab.deps, manager, id, { reason: 'See you then' });
		expect(confirmed).toMatchObject({
			state: 'confirmed',
			reason: 'See you then',
			decidedBy: manager.name,
			version: 2,
			rigUpMinutes: 60,
			rigDownMinutes: 30
		});
		await lab.deps.pools.lab
			.updateTable('cell')
			.set({ rigUpMinutes: 5, rigDownMinutes: 5 })
			.where('id', '=', cell.id)
			.execute();
		expect(await getBooking(lab.deps, client, id)).toMatchObject({ rigUpMinutes: 60, rigDownMinutes: 30 });
		const taken = await lab.deps.pools.lab
			.selectFrom('occupancy')
			.select('during')
			.where('bookingId', '=', id)
			.execute();
		expect(taken).toEqual([{ during: { from: hour(9), to: hour(14.5) } }]);
		expect(await promised(id)).toEqual(['booking.requested 1', 'booking.confirmed 2']);
	});

	it('clashes in a sentence that says with what, and leaves no trace', async () => {
		const { cell, build, client, rivalClient, rivalBuild, manager } = await scene(['CC', 'CD']);
		const first = await lab.request(client, cell.code, build.number, hour(10), hour(14));
		const second = await lab.request(rivalClient, cell.code, rivalBuild.number, hour(15), hour(18));
		await confirmBooking(lab.deps, manager, first.id);
		// 15:00 needs rigging from 14:00, and the first one is rigged down until 14:30.
		const clash = await refusal(confirmBooking(lab.deps, manager, second.id));
		expect(clash.status).toBe(409);
		expect(clash.message).toBe(
			`${cell.code} is taken by CC-B-0001 from Mon 1 Mar 2027 16:00 to 21:30, rigging included (Europe/Stockholm).`
		);
		expect(clash.extra.clashesWith).toEqual([
			{
				kind: 'booking',
				number: 'CC-B-0001',
				cell: cell.code,
				from: hour(9).toISOString(),
				to: hour(14.5).toISOString()
			}
		]);
		expect(await getBooking(lab.deps, manager, second.id)).toMatchObject({ state: 'requested', version: 1 });
		expect(await promised(second.id)).toEqual(['booking.requested 1']);
		const trail = await lab.deps.pools.lab
			.selectFrom('audit')
			.select('action')
			.where('subjectId', '=', second.id)
			.execute();
		expect(trail).toEqual([{ action: 'booking.request' }]);
	});

	it('lets slots touch', async () => {
		const { cell, build, client, rivalClient, rivalBuild, manager } = await scene(['CE', 'CF']);
		const first = await lab.request(client, cell.code, build.number, hour(10), hour(14));
		const next = await lab.request(rivalClient, cell.code, rivalBuild.number, hour(15.5), hour(18));
		await confirmBooking(lab.deps, manager, first.id);
		expect((await confirmBooking(lab.deps, manager, next.id)).state).toBe('confirmed');
	});

	it('keeps a build out of two cells at once', async () => {
		const { cell, build, client, manager } = await scene(['CG', 'CH']);
		const elsewhere = await lab.cell();
		const first = await lab.request(client, cell.code, build.number, hour(10), hour(14));
		const second = await lab.request(client, elsewhere.code, build.number, hour(13), hour(16));
		await confirmBooking(lab.deps, manager, first.id);
		const clash = await refusal(confirmBooking(lab.deps, manager, second.id));
		expect(clash.status).toBe(409);
		expect(clash.message).toBe(
			`Build ${build.number} stands in ${cell.code} from Mon 1 Mar 2027 16:00 to 21:30, for CG-B-0001 (Europe/Stockholm).`
		);
	});

	it('is the manager’s, once, and not of a stale reading or of the past', async () => {
		const { cell, build, client, engineer, manager } = await scene(['CI', 'CJ']);
		const { id, number } = await lab.request(client, cell.code, build.number, hour(10), hour(14));
		expect((await refusal(confirmBooking(lab.deps, client, id))).status).toBe(403);
		expect((await refusal(confirmBooking(lab.deps, engineer, id))).status).toBe(403);
		await moveBooking(lab.deps, client, id, { to: hour(13) });
		expect((await refusal(confirmBooking(lab.deps, manager, id, { ifMatch: 1 }))).status).toBe(412);
		await confirmBooking(lab.deps, manager, number, { ifMatch: 2 });
		const again = await refusal(confirmBooking(lab.deps, manager, id));
		expect([again.status, again.message]).toEqual([
			409,
			`${number} is confirmed already, so it cannot be confirmed.`
		]);
		const late = await lab.request(client, cell.code, build.number, hour(40), hour(41));
		lab.setNow(hour(50));
		const past = await refusal(confirmBooking(lab.deps, manager, late.id));
		lab.setNow(hour(0));
		expect([past.status, past.message]).toEqual([409, expect.stringContaining('lies in the past')]);
	});

	it('declines with a reason, and not what is confirmed', async () => {
		const { cell, build, client, manager } = await scene(['CK', 'CL']);
		const { id } = await lab.request(client, cell.code, build.number, hour(10), hour(14));
		const other = await lab.request(client, cell.code, build.number, hour(30), hour(34));
		expect((await refusal(declineBooking(lab.deps, client, id))).status).toBe(403);
		const declined = await declineBooking(lab.deps, manager, id, { reason: 'Dyno bearing' });
		expect(declined).toMatchObject({ state: 'declined', reason: 'Dyno bearing', may: [], warnings: [] });
		await confirmBooking(lab.deps, manager, other.id);
		expect((await refusal(declineBooking(lab.deps, manager, other.id))).status).toBe(409);
		expect((await refusal(confirmBooking(lab.deps, manager, id))).message).toContain('declined already');
	});
});

describe('cancelling', () => {
	it('frees the time at once, also when a client does it', async () => {
		const { cell, build, client, rivalClient, rivalBuild, manager } = await scene(['DA', 'DB']);
		const first = await lab.request(client, cell.code, build.number, hour(10), hour(14));
		const second = await lab.request(rivalClient, cell.code, rivalBuild.number, hour(12), hour(16));
		await confirmBooking(lab.deps, manager, first.id);
		expect(await cancelBooking(lab.deps, client, first.id, { reason: 'Late parts' })).toMatchObject({
			state: 'cancelled',
			reason: 'Late parts',
			may: []
		});
		expect((await confirmBooking(lab.deps, manager, second.id)).state).toBe('confirmed');
		expect(await promised(first.id)).toEqual([
			'booking.requested 1',
			'booking.confirmed 2',
			'booking.cancelled 3'
		]);
		expect((await refusal(cancelBooking(lab.deps, client, first.id))).status).toBe(409);
	});

	it('is not a rival’s, nor an engineer’s who did not ask for it; a slot that is over stays', async () => {
		const { cell, build, client, rivalClient, engineer, manager } = await scene(['DC', 'DD']);
		const { id } = await lab.request(client, cell.code, build.number, hour(10), hour(14));
		const own = await lab.request(engineer, cell.code, build.number, hour(40), hour(41));
		const foreign = await refusal(cancelBooking(lab.deps, rivalClient, id));
		const absent = await refusal(
			cancelBooking(lab.deps, rivalClient, '00000000-0000-4000-8000-000000000000')
		);
		expect(foreign.status).toBe(404);
		expect(foreign.message.replace(id, '…')).toBe(
			absent.message.replace('00000000-0000-4000-8000-000000000000', '…')
		);
		expect((await refusal(cancelBooking(lab.deps, engineer, id))).status).toBe(403);
		expect((await cancelBooking(lab.deps, engineer, own.id)).state).toBe('cancelled');
		await confirmBooking(lab.deps, manager, id);
		lab.setNow(hour(20));
		const over = await refusal(cancelBooking(lab.deps, manager, id));
		lab.setNow(hour(0));
		expect(over.message).toContain('is done already');
	});
});

describe('moving', () => {
	it('changes a request in place', async () => {
		const { cell, build, client, engineer, manager } = await scene(['MA', 'MB']);
		const elsewhere = await lab.cell({ rigUpMinutes: 15 });
		const { id } = await lab.request(client, cell.code, build.number, hour(10), hour(14));
		expect((await refusal(moveBooking(lab.deps, engineer, id, { to: hour(15) }))).status).toBe(403);
		expect(await moveBooking(lab.deps, client, id, { from: hour(11), to: hour(15) })).toMatchObject({
			id,
			state: 'requested',
			from: hour(11).toISOString(),
			version: 2
		});
		expect(await moveBooking(lab.deps, manager, id, { cell: elsewhere.code })).toMatchObject({
			cell: elsewhere.code,
			rigUpMinutes: 15,
			version: 3
		});
		// The same again changes nothing.
		expect((await moveBooking(lab.deps, manager, id, { cell: elsewhere.code })).version).toBe(3);
		expect(await promised(id)).toEqual(['booking.requested 1', 'booking.moved 2']);
		const bad = await refusal(moveBooking(lab.deps, client, id, { to: hour(10) }));
		expect(bad.fields).toEqual({ to: 'must be later than from.' });
	});

	it('by a manager keeps a slot confirmed, and takes the new time in the same step', async () => {
		const { cell, build, client, rivalClient, rivalBuild, manager } = await scene(['MC', 'MD']);
		const elsewhere = await lab.cell({ rigUpMinutes: 15, rigDownMinutes: 0 });
		const { id } = await lab.request(client, cell.code, build.number, hour(10), hour(14));
		await confirmBooking(lab.deps, manager, id);
		const rival = await lab.request(rivalClient, elsewhere.code, rivalBuild.number, hour(20), hour(22));
		await confirmBooking(lab.deps, manager, rival.id);
		// Overlapping its own old time is no clash.
		expect(await moveBooking(lab.deps, manager, id, { from: hour(11), to: hour(15) })).toMatchObject({
			id,
			state: 'confirmed',
			version: 3
		});
		const clash = await refusal(
			moveBooking(lab.deps, manager, id, { cell: elsewhere.code, from: hour(21), to: hour(23) })
		);
		expect([clash.status, clash.message]).toEqual([409, expect.stringContaining(rival.number)]);
		expect(await getBooking(lab.deps, client, id)).toMatchObject({ cell: cell.code, version: 3 });
		const moved = await moveBooking(lab.deps, manager, id, {
			cell: elsewhere.code,
			from: hour(23),
			to: hour(24)
		});
		expect(moved).toMatchObject({ cell: elsewhere.code, rigUpMinutes: 15, rigDownMinutes: 0, version: 4 });
		const next = await lab.request(rivalClient, cell.code, rivalBuild.number, hour(11), hour(15));
		expect((await confirmBooking(lab.deps, manager, next.id)).state).toBe('confirmed');
	});

	it('by anyone else is a new request; the slot stands until that is confirmed, and then makes room', async () => {
		const { cell, build, client, engineer, manager } = await scene(['ME', 'MF']);
		const { id, number } = await lab.request(client, cell.code, build.number, hour(10), hour(14));
		await confirmBooking(lab.deps, manager, id);
		const asked = await moveBooking(lab.deps, client, id, { from: hour(12), to: hour(16) });
		expect(asked).toMatchObject({ state: 'requested', replaces: number, clashesWith: [], version: 1 });
		expect(asked.id).not.toBe(id);
		expect(await getBooking(lab.deps, client, id)).toMatchObject({
			state: 'confirmed',
			moveRequest: asked.number
		});
		const twice = await refusal(moveBooking(lab.deps, engineer, id, { to: hour(15) }));
		expect([twice.status, twice.message]).toEqual([409, expect.stringContaining(asked.number)]);
		expect(await confirmBooking(lab.deps, manager, asked.id)).toMatchObject({
			state: 'confirmed',
			replaces: number
		});
		expect(await getBooking(lab.deps, client, id)).toMatchObject({
			state: 'cancelled',
			reason: `Moved: ${asked.number} stands for it.`
		});
		const taken = await lab.deps.pools.lab
			.selectFrom('occupancy')
			.select(['bookingId', 'during'])
			.where('buildId', '=', build.id)
			.execute();
		expect(taken).toEqual([{ bookingId: asked.id, during: { from: hour(11), to: hour(16.5) } }]);
	});

	it('that clashes or is declined leaves the old slot as it was', async () => {
		const { cell, build, client, rivalClient, rivalBuild, manager } = await scene(['MG', 'MH']);
		const { id } = await lab.request(client, cell.code, build.number, hour(10), hour(14));
		const rival = await lab.request(rivalClient, cell.code, rivalBuild.number, hour(20), hour(24));
		await confirmBooking(lab.deps, manager, id);
		await confirmBooking(lab.deps, manager, rival.id);
		const asked = await moveBooking(lab.deps, client, id, { from: hour(22), to: hour(26) });
		expect((await refusal(confirmBooking(lab.deps, manager, asked.id))).status).toBe(409);
		expect((await getBooking(lab.deps, client, id)).state).toBe('confirmed');
		await declineBooking(lab.deps, manager, asked.id);
		expect(await getBooking(lab.deps, client, id)).toMatchObject({ state: 'confirmed', moveRequest: null });
		expect((await moveBooking(lab.deps, client, id, { to: hour(15) })).state).toBe('requested');
	});

	it('lives on as a request of its own when the slot is cancelled first', async () => {
		const { cell, build, client, manager } = await scene(['MI', 'MJ']);
		const { id } = await lab.request(client, cell.code, build.number, hour(10), hour(14));
		await confirmBooking(lab.deps, manager, id);
		const asked = await moveBooking(lab.deps, client, id, { to: hour(16) });
		await cancelBooking(lab.deps, client, id);
		expect(await getBooking(lab.deps, client, asked.id)).toMatchObject({
			state: 'requested',
			replaces: null
		});
		expect((await confirmBooking(lab.deps, manager, asked.id)).state).toBe('confirmed');
	});
});

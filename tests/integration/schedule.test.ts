import { describe, expect, it } from 'vitest';
import type { Principal } from '../../src/lib/server/access';
import { closeCell, confirmBooking } from '../../src/lib/server/bookings';
import { createFuel, createFuelBatch, NewFuel, NewFuelBatch } from '../../src/lib/server/fuels';
import { findSlots, FirstFitWish, readSchedule, type Schedule } from '../../src/lib/server/schedule';
import { hour, refusal, useBookingLab } from './booking-lab';

const lab = useBookingLab();

const entriesOf = (schedule: Schedule, cell: string) =>
	schedule.cells.find((one) => one.code === cell)!.entries;

async function scene(codes: [string, string]) {
	const [own, rival] = [await lab.client(codes[0]), await lab.client(codes[1])];
	return {
		own,
		rival,
		cell: await lab.cell({ rigUpMinutes: 60, rigDownMinutes: 30 }),
		build: await lab.build(own.code),
		rivalBuild: await lab.build(rival.code),
		manager: await lab.person('manager'),
		client: await lab.person('client', own.id),
		rivalClient: await lab.person('client', rival.id)
	};
}

describe('the schedule', () => {
	it('shows staff all, a client its own and of a rival only taken time, joined where it touches', async () => {
		const { cell, build, rivalBuild, manager, client, rivalClient } = await scene(['SCA', 'SCB']);
		const at = (who: Principal, number: string, from: number, to: number) =>
			lab.request(who, cell.code, number, hour(from), hour(to), { purpose: 'Secret cam' });
		const mine = await at(client, build.number, 2, 4);
		const theirs = await at(rivalClient, rivalBuild.number, 6, 8);
		const next = await at(rivalClient, rivalBuild.number, 9.5, 12);
		for (const one of [mine, theirs, next]) await confirmBooking(lab.deps, manager, one.id);
		const asked = await at(client, build.number, 20, 22);
		const secret = await at(rivalClient, rivalBuild.number, 20, 22);
		const closure = await closeCell(lab.deps, manager, {
			cell: cell.code,
			from: hour(30),
			to: hour(40),
			title: 'Shaft change after SCB'
		});
		const window = { from: '2027-03-01', to: '2027-03-08' };

		const seen = entriesOf(await readSchedule(lab.deps, client, window), cell.code);
		expect(seen.map((entry) => [entry.kind, entry.from, entry.to])).toEqual([
			['booking', hour(2).toISOString(), hour(4).toISOString()],
			// 05:00–08:30 and 08:30–12:30, rigging included: one stretch, so that not even their count is told.
			['taken', hour(5).toISOString(), hour(12.5).toISOString()],
			['booking', hour(20).toISOString(), hour(22).toISOString()],
			['closed', hour(30).toISOString(), hour(40).toISOString()]
		]);
		expect(seen.filter((entry) => entry.kind === 'booking')).toMatchObject([
			{ number: mine.number, state: 'confirmed', build: build.number, rigUpMinutes: 60, rigDownMinutes: 30 },
			{ number: asked.number, state: 'requested' }
		]);
		const told = JSON.stringify(await readSchedule(lab.deps, client, window));
		for (const word of [theirs.number, theirs.id, secret.id, rivalBuild.number, 'SCB', 'Secret', closure.id])
			expect(told).not.toContain(word);

		const staff = entriesOf(await readSchedule(lab.deps, manager, window), cell.code);
		expect(staff.map((entry) => (entry.kind === 'booking' ? entry.number : entry.kind))).toEqual([
			mine.number,
			theirs.number,
			next.number,
			asked.number,
			secret.number,
			'closed'
		]);
		expect(staff.at(-1)).toMatchObject({ id: closure.id, title: 'Shaft change after SCB' });
	});

	it('holds what reaches in by its rigging alone, and nothing that does not', async () => {
		const { cell, build, manager } = await scene(['SCC', 'SCD']);
		const slot = await lab.request(manager, cell.code, build.number, hour(100), hour(101));
		await confirmBooking(lab.deps, manager, slot.id);
		const within = async (from: number, to: number) =>
			entriesOf(
				await readSchedule(lab.deps, manager, { from: hour(from).toISOString(), to: hour(to).toISOString() }),
				cell.code
			).length;
		expect(await within(101.25, 103)).toBe(1);
		expect(await within(101.5, 103)).toBe(0);
		expect(await within(98, 99)).toBe(0);
		expect(await within(98, 99.1)).toBe(1);
	});

	it('says when cells are open on the lab’s clock, through the days that change it', async () => {
		const cell = await lab.cell({
			openingHours: [
				{ day: 6, from: '08:00', to: '16:00' },
				{ day: 7, from: '08:00', to: '16:00' }
			]
		});
		const schedule = await readSchedule(lab.deps, await lab.person('operator'), {
			from: '2027-03-27',
			to: '2027-03-29'
		});
		expect(schedule).toMatchObject({
			from: '2027-03-26T23:00:00.000Z',
			to: '2027-03-28T22:00:00.000Z',
			timeZone: 'Europe/Stockholm'
		});
		expect(schedule.cells.find((one) => one.code === cell.code)!.open).toEqual([
			{ from: '2027-03-27T07:00:00.000Z', to: '2027-03-27T15:00:00.000Z' },
			{ from: '2027-03-28T06:00:00.000Z', to: '2027-03-28T14:00:00.000Z' }
		]);
	});

	it('starts with today where no time is named, and refuses what makes no sense', async () => {
		const who = await lab.person('builder');
		expect(await readSchedule(lab.deps, who, {})).toMatchObject({
			from: '2027-02-28T23:00:00.000Z',
			to: '2027-03-07T23:00:00.000Z'
		});
		const ask = (query: object) => refusal(readSchedule(lab.deps, who, query));
		expect((await ask({ from: '2027-03-02', to: '2027-03-01' })).fields.to).toBe('must be later than from.');
		expect((await ask({ from: '2027-03-02', to: '2028-03-01' })).fields.to).toContain('within 100 days');
		expect((await ask({ from: 'next week' })).fields.from).toContain('give a day like');
	});
});

describe('first fit', () => {
	const wish = (build: string, more: object = {}) =>
		FirstFitWish.parse({
			build,
			kind: 'power_sweep',
			durationMinutes: 120,
			notBefore: hour(0).toISOString(),
			notAfter: hour(12).toISOString(),
			...more
		});

	it('offers the earliest slot of each cell that suits, and says why the others do not', async () => {
		const { build, rivalBuild, cell, manager, client, rivalClient } = await scene(['FA', 'FB']);
		const small = await lab.cell({
			absorber: { kind: 'eddy_current', maxPowerKw: 60, maxTorqueNm: 120, maxSpeedRpm: 6000 }
		});
		const shut = await lab.cell({ openingHours: [{ day: 7, from: '08:00', to: '16:00' }] });
		const short = await lab.cell({
			rigUpMinutes: 60,
			openingHours: [{ day: 1, from: '08:00', to: '10:30' }]
		});
		const free = await lab.cell();
		const rival = await lab.request(rivalClient, cell.code, rivalBuild.number, hour(1), hour(4));
		await confirmBooking(lab.deps, manager, rival.id);
		const { slots, refused, note } = await findSlots(lab.deps, client, wish(build.number));
		const codes = [cell, small, shut, short, free].map((one) => one.code);
		expect(slots.filter((slot) => codes.includes(slot.cell))).toEqual([
			{
				cell: free.code,
				cellName: 'Test cell',
				from: hour(0).toISOString(),
				to: hour(2).toISOString(),
				rigUpMinutes: 0,
				rigDownMinutes: 0
			},
			{
				cell: cell.code,
				cellName: 'Test cell',
				from: hour(5.5).toISOString(),
				to: hour(7.5).toISOString(),
				rigUpMinutes: 60,
				rigDownMinutes: 30
			}
		]);
		const why = Object.fromEntries(refused.map((one) => [one.cell, one.reason]));
		expect(why[small.code]).toContain(
			'The engine turns up to 7000 rev/min, the machine 6000 rev/min at most'
		);
		expect(why[small.code]).toContain('the engine is expected to give');
		expect(why[shut.code]).toBe('It is not open in the wished time.');
		expect(why[short.code]).toBe(
			'It is open for 2 h 30 min at most in one stretch; 3 h with 1 h of rigging is needed.'
		);
		expect(note).toContain('no interlock');
		expect(JSON.stringify({ slots, refused })).not.toContain(rival.number);
	});

	it('does not take an engine of unknown torque for one that fits', async () => {
		const client = await lab.client('FC');
		const build = await lab.build('FC', { maxSpeedRpm: null, expectedTorque: null });
		const { slots, refused } = await findSlots(
			lab.deps,
			await lab.person('client', client.id),
			wish(build.number)
		);
		expect(slots).toEqual([]);
		expect(refused.length).toBeGreaterThan(0);
		for (const one of refused)
			expect(one.reason.toLowerCase()).toContain('its top speed and expected torque are not recorded');
	});

	it('looks at the fuel that is plumbed, and at where the build stands meanwhile', async () => {
		const client = await lab.client('FD');
		const manager = await lab.person('manager');
		for (const code of ['FD-E85', 'FD-B7'])
			await createFuel(lab.deps, manager, NewFuel.parse({ code, name: code }));
		await createFuelBatch(
			lab.deps,
			manager,
			NewFuelBatch.parse({ fuel: 'FD-E85', code: 'FD-1', client: 'FD' })
		);
		const [diesel, ethanol] = [await lab.cell({ fuels: ['FD-B7'] }), await lab.cell({ fuels: ['FD-E85'] })];
		const [build, elsewhere] = [await lab.build('FD'), await lab.cell()];
		const slot = await lab.request(manager, elsewhere.code, build.number, hour(0), hour(6), { client: 'FD' });
		await confirmBooking(lab.deps, manager, slot.id);
		const { slots, refused } = await findSlots(
			lab.deps,
			await lab.person('client', client.id),
			wish(build.number, { fuelBatch: 'FD-1' })
		);
		expect(refused.find((one) => one.cell === diesel.code)!.reason).toBe('The fuel is not plumbed there.');
		expect(slots.find((one) => one.cell === ethanol.code)!.from).toBe(hour(6).toISOString());
	});

	it('is told what is wrong, at the field; a rival’s build is not there', async () => {
		const { client, rivalBuild, build } = await scene(['FE', 'FF']);
		const fields = (more: object) =>
			FirstFitWish.safeParse({ ...wishText(build.number), ...more }).error!.issues.map((issue) =>
				issue.path.join('.')
			);
		expect(fields({ durationMinutes: 0 })).toEqual(['durationMinutes']);
		expect(fields({ notAfter: hour(-1).toISOString() })).toEqual(['notAfter']);
		expect(fields({ notAfter: hour(24 * 200).toISOString() })).toEqual(['notAfter']);
		expect(fields({ notBefore: 'soon' })).toContain('notBefore');
		const past = await refusal(
			findSlots(
				lab.deps,
				client,
				wish(build.number, { notBefore: hour(-9).toISOString(), notAfter: hour(-3).toISOString() })
			)
		);
		expect(past.fields.notAfter).toContain('in the past');
		expect((await refusal(findSlots(lab.deps, client, wish(rivalBuild.number)))).fields).toEqual({
			build: `there is no build ${rivalBuild.number}`
		});
	});

	const wishText = (build: string) => ({
		build,
		durationMinutes: 120,
		notBefore: hour(0).toISOString(),
		notAfter: hour(12).toISOString()
	});
});

import { describe, expect, it } from 'vitest';
import {
	BookingQuery,
	closeCell,
	confirmBooking,
	getBooking,
	listBookings,
	removeClosure
} from '../../src/lib/server/bookings';
import type { Principal } from '../../src/lib/server/access';
import { hour, refusal, useBookingLab } from './booking-lab';

const lab = useBookingLab();
const list = async (who: Principal, query: Record<string, string> = {}) =>
	(await listBookings(lab.deps, who, BookingQuery.parse(query))).items.map((booking) => booking.number);

describe('reading bookings', () => {
	it('shows a client its own alone, and a rival’s as absent', async () => {
		const [own, rival] = [await lab.client('RA'), await lab.client('RB')];
		const cell = await lab.cell();
		const [build, rivalBuild] = [await lab.build('RA'), await lab.build('RB')];
		const [client, rivalClient] = [await lab.person('client', own.id), await lab.person('client', rival.id)];
		const mine = await lab.request(client, cell.code, build.number, hour(1), hour(2));
		const theirs = await lab.request(rivalClient, cell.code, rivalBuild.number, hour(1), hour(2));
		expect(await list(client)).toEqual([mine.number]);
		expect(await list(await lab.person('operator'), { cell: cell.code })).toHaveLength(2);
		const words = async (ref: string) => {
			const problem = await refusal(getBooking(lab.deps, client, ref));
			return [problem.status, problem.message.replace(ref, '…')];
		};
		const absent = await words('0a4e1f9e-0000-4000-8000-000000000000');
		expect(await words(theirs.id)).toEqual(absent);
		expect(await words(theirs.number)).toEqual(absent);
		expect((await refusal(list(client, { client: 'RB' }))).fields).toEqual({
			client: 'there is no client RB'
		});
		expect(await list(client, { build: build.number })).toEqual([mine.number]);
	});

	it('finds by state, the past of a confirmed one being done, and by time', async () => {
		await lab.client('RC');
		const cell = await lab.cell();
		const [build, manager] = [await lab.build('RC'), await lab.person('manager')];
		const at = (from: number, to: number) =>
			lab.request(manager, cell.code, build.number, hour(from), hour(to));
		const [early, late, open] = [await at(1, 3), await at(10, 12), await at(10, 12)];
		await confirmBooking(lab.deps, manager, early.id);
		await confirmBooking(lab.deps, manager, late.id);
		lab.setNow(hour(5));
		const of = (query: Record<string, string>) => list(manager, { cell: cell.code, ...query });
		expect(await of({ state: 'done' })).toEqual([early.number]);
		expect(await of({ state: 'confirmed' })).toEqual([late.number]);
		expect(await of({ state: 'requested' })).toEqual([open.number]);
		expect((await getBooking(lab.deps, manager, early.id)).state).toBe('done');
		lab.setNow(hour(0));
		expect(await of({ to: hour(4).toISOString() })).toEqual([early.number]);
		expect(await of({ from: hour(3).toISOString(), state: 'confirmed' })).toEqual([late.number]);
		// Days are the lab's: this Monday, and none of it on Tuesday.
		expect(await of({ from: '2027-03-01', to: '2027-03-02' })).toHaveLength(3);
		expect(await of({ from: '2027-03-02' })).toEqual([]);
		expect((await refusal(of({ from: 'soon' }))).fields.from).toContain('give a day like');
	});

	it('pages without a gap or a double, latest first', async () => {
		await lab.client('RD');
		const cell = await lab.cell();
		const [build, manager] = [await lab.build('RD'), await lab.person('manager')];
		for (let i = 0; i < 7; i++)
			await lab.request(manager, cell.code, build.number, hour(1 + Math.floor(i / 3)), hour(9));
		const seen: string[] = [];
		let cursor: string | null = null;
		do {
			const query = BookingQuery.parse({ cell: cell.code, limit: '2', ...(cursor ? { cursor } : {}) });
			const page: Awaited<ReturnType<typeof listBookings>> = await listBookings(lab.deps, manager, query);
			expect(page.items.length).toBeLessThanOrEqual(2);
			seen.push(...page.items.map((booking) => booking.number));
			cursor = page.nextCursor;
		} while (cursor);
		expect(seen).toHaveLength(7);
		expect(new Set(seen).size).toBe(7);
		expect(seen[0]).toBe('RD-B-0007');
		expect((await refusal(list(manager, { cursor: 'WyJ4Il0' }))).status).toBe(400);
	});
});

describe('closures', () => {
	it('keep a cell shut against confirmations, and tell what stands in their own way', async () => {
		await lab.client('RE');
		const cell = await lab.cell();
		const [build, manager] = [await lab.build('RE'), await lab.person('manager')];
		const closure = await closeCell(lab.deps, manager, {
			cell: cell.code,
			from: hour(10),
			to: hour(20),
			title: 'Load cell calibration'
		});
		const asked = await lab.request(manager, cell.code, build.number, hour(12), hour(14));
		const shut = await refusal(confirmBooking(lab.deps, manager, asked.id));
		expect([shut.status, shut.message]).toEqual([
			409,
			`${cell.code} is closed from Mon 1 Mar 2027 17:00 to Tue 2 Mar 2027 03:00 (Load cell calibration) (Europe/Stockholm).`
		]);
		await removeClosure(lab.deps, manager, closure.id);
		await confirmBooking(lab.deps, manager, asked.id);
		const again = { cell: cell.code, from: hour(13), to: hour(20), title: 'Load cell calibration' };
		expect((await refusal(closeCell(lab.deps, manager, again))).message).toContain(asked.number);
		expect((await refusal(removeClosure(lab.deps, manager, closure.id))).status).toBe(404);
		expect((await refusal(removeClosure(lab.deps, manager, 'x'))).status).toBe(404);
		expect((await refusal(closeCell(lab.deps, await lab.person('engineer'), again))).status).toBe(403);
	});
});

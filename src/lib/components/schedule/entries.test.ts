import { expect, it } from 'vitest';
import { drawnEntries, listedEntries } from './entries';

const ZONE = 'Europe/Stockholm';
const booking = {
	kind: 'booking' as const,
	id: 'id-1',
	number: 'HB-B-0001',
	state: 'confirmed' as const,
	client: 'HB',
	build: 'B1',
	buildId: 'id-b',
	buildTitle: 'As delivered',
	replaces: null,
	may: ['move'],
	version: 3,
	rigUpMinutes: 60,
	rigDownMinutes: 0,
	from: '2026-12-14T08:00:00.000Z',
	to: '2026-12-14T12:00:00.000Z'
};
const schedule = {
	from: '2026-12-13T23:00:00.000Z',
	to: '2026-12-14T23:00:00.000Z',
	cells: [
		{
			code: 'C1',
			name: 'One',
			open: [{ from: '2026-12-14T05:00:00.000Z', to: '2026-12-14T20:00:00.000Z' }],
			entries: [booking]
		},
		{
			code: 'C2',
			name: 'Two',
			open: [{ from: '2026-12-13T23:00:00.000Z', to: '2026-12-14T23:00:00.000Z' }],
			entries: [
				{ kind: 'taken' as const, from: '2026-12-14T07:00:00.000Z', to: '2026-12-14T09:00:00.000Z' },
				{
					kind: 'closed' as const,
					title: 'Service',
					from: '2026-12-14T10:00:00.000Z',
					to: '2026-12-14T11:00:00.000Z'
				}
			]
		}
	]
};

it('draws tests on the lab’s clock, with rigging that takes time, and the hours at which a cell is shut', () =>
	expect(
		drawnEntries(schedule, ZONE).map(({ cell, kind, from, to }) => `${cell} ${kind} ${from} ${to}`)
	).toEqual([
		'C1 shut 2026-12-14T00:00 2026-12-14T06:00',
		'C1 shut 2026-12-14T21:00 2026-12-15T00:00',
		'C1 rig_up 2026-12-14T08:00 2026-12-14T09:00',
		'C1 confirmed 2026-12-14T09:00 2026-12-14T13:00',
		'C2 taken 2026-12-14T08:00 2026-12-14T10:00',
		'C2 closed 2026-12-14T11:00 2026-12-14T12:00'
	]));

it('says what may be done with a test, and keeps its key when it moves', () => {
	const tests = (of: typeof schedule) => drawnEntries(of, ZONE).filter(({ test }) => test);
	expect(tests(schedule)).toMatchObject([{ id: 'id-1', test: { may: ['move'], version: 3 } }]);
	const moved = structuredClone(schedule);
	Object.assign(moved.cells[0]!.entries[0]!, {
		from: '2026-12-14T09:00:00.000Z',
		to: '2026-12-14T13:00:00.000Z'
	});
	expect(tests(moved)[0]!.key).toBe(tests(schedule)[0]!.key);
	expect(tests(moved)[0]!.from).not.toBe(tests(schedule)[0]!.from);
});

it('still shows what an autumn change turns round on the wall clock', () => {
	const turned = {
		...booking,
		rigUpMinutes: 0,
		from: '2026-10-25T00:45:00.000Z',
		to: '2026-10-25T01:15:00.000Z'
	};
	const cells = [{ code: 'C1', name: 'One', open: [], entries: [turned] }];
	const drawn = drawnEntries({ from: turned.from, to: turned.from, cells }, ZONE);
	expect(drawn).toMatchObject([{ from: '2026-10-25T02:45', kind: 'confirmed' }]);
	expect(drawn[0]!.to > drawn[0]!.from).toBe(true);
});

it('lists everything by time, with a closure’s title and no booking where there is none', () =>
	expect(
		listedEntries(schedule).map(({ cell, kind, title, booking: of }) => [cell, kind, title, of?.number])
	).toEqual([
		['C2', 'taken', '', undefined],
		['C1', 'booking', '', 'HB-B-0001'],
		['C2', 'closed', 'Service', undefined]
	]));

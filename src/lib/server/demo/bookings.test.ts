import { DateTime } from 'luxon';
import { describe, expect, it } from 'vitest';
import { withRigTime } from '$lib/domain/scheduling';
import { bookingsFrom } from './bookings';
import { momentOf } from './calendar';
import { DEMO_CELLS } from './lab/cells';
import { DEMO_CLOSURES } from './lab/other-bookings';

const zone = 'Europe/Stockholm';
const HOURS = [
	['a Tuesday morning', '2027-03-09T07:50:00Z'],
	['a Tuesday at noon', '2027-03-09T11:07:00Z'],
	['a Thursday late in the evening', '2027-03-11T22:20:00Z'],
	['a Friday before the house opens', '2027-03-12T02:40:00Z'],
	['a Saturday', '2027-03-13T10:00:00Z'],
	['the last minutes of a Sunday', '2027-03-14T22:55:00Z'],
	['the Sunday on which summer time begins', '2027-03-28T01:10:00Z']
] as const;

interface Taken {
	of: string;
	cell: string;
	build: string | null;
	from: Date;
	to: Date;
}

function takenFrom(begun: Date): Taken[] {
	const slots = bookingsFrom(begun, zone)
		.filter(({ plan }) => plan.fate.is === 'confirmed' || plan.fate.is === 'moved')
		.map(({ plan, span }): Taken => {
			const cell = DEMO_CELLS.find(({ code }) => code === plan.cell)!;
			const whole = withRigTime(span, cell.rigUpMinutes ?? 0, cell.rigDownMinutes ?? 0);
			return { of: plan.key, cell: plan.cell, build: plan.build, ...whole };
		});
	const shut = DEMO_CLOSURES.map(({ cell, title, from, to }): Taken => ({
		of: title,
		cell,
		build: null,
		from: momentOf(begun, zone, from),
		to: momentOf(begun, zone, to)
	}));
	return [...slots, ...shut];
}

describe.each(HOURS)('a lab that is begun on %s', (_, text) => {
	const begun = new Date(text);
	const taken = takenFrom(begun);

	it('holds no hour of a cell or a build twice, rigging included', () => {
		const clashes = taken.flatMap((one, k) =>
			taken
				.slice(k + 1)
				.filter(
					(other) =>
						(other.cell === one.cell || (one.build !== null && other.build === one.build)) &&
						one.from < other.to &&
						other.from < one.to
				)
				.map((other) => `${one.of} and ${other.of}`)
		);
		expect(clashes).toEqual([]);
	});

	it('has its first day around that hour, and the next shift by day', () => {
		const spans = new Map(bookingsFrom(begun, zone).map(({ plan, span }) => [plan.key, span]));
		for (const key of ['live-on', 'live-late']) {
			expect(+spans.get(key)!.from).toBeLessThan(+begun - 30 * 60_000);
			expect(+spans.get(key)!.to).toBeGreaterThan(+begun + 60 * 60_000);
		}
		expect(+spans.get('live-over')!.to).toBeLessThan(+begun);
		const next = DateTime.fromJSDate(spans.get('live-next')!.from, { zone });
		expect(+next).toBeGreaterThan(+begun + 60 * 60_000);
		expect(next.weekday).toBeLessThanOrEqual(5);
		expect(next.hour).toBeGreaterThanOrEqual(8);
		expect(next.hour).toBeLessThan(17);
	});
});

import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { firstFit, type CellTime, type Wish } from './first-fit';
import { openIntervals } from './opening-hours';

const utc = (text: string) => new Date(`${text}Z`);
const span = (from: string, to: string) => ({ from: utc(from), to: utc(to) });
const wish = (durationMinutes: number, from: string, to: string, earliestRig = from): Wish => ({
	durationMinutes,
	window: span(from, to),
	earliestRig: utc(earliestRig)
});
const cell = (more: Partial<CellTime> = {}): CellTime => ({
	rigUpMinutes: 0,
	rigDownMinutes: 0,
	open: [span('2026-06-01T00:00', '2026-06-08T00:00')],
	taken: [],
	...more
});
const slotOf = (...args: Parameters<typeof firstFit>) => {
	const fit = firstFit(...args);
	if ('reason' in fit) throw new Error(fit.reason);
	return [fit.slot.from.toISOString().slice(0, 16), fit.slot.to.toISOString().slice(0, 16)];
};
const reasonOf = (...args: Parameters<typeof firstFit>) => {
	const fit = firstFit(...args);
	return 'reason' in fit ? fit.reason : fit.slot.from.toISOString();
};

describe('first fit', () => {
	it('starts on the quarter hour after the earliest time', () => {
		expect(slotOf(wish(60, '2026-06-01T08:07', '2026-06-01T12:00'), cell(), [])).toEqual([
			'2026-06-01T08:15',
			'2026-06-01T09:15'
		]);
	});

	it('starts on the minute where the quarter hour no longer fits', () => {
		const open = [span('2026-06-01T08:10', '2026-06-01T09:10')];
		expect(slotOf(wish(60, '2026-06-01T06:00', '2026-06-02T00:00'), cell({ open }), [])[0]).toBe(
			'2026-06-01T08:10'
		);
	});

	it('leaves room for rigging after one booking and before the next', () => {
		const taken = [
			span('2026-06-01T06:00', '2026-06-01T09:00'),
			span('2026-06-01T11:00', '2026-06-01T13:00'),
			span('2026-06-01T16:00', '2026-06-01T18:00')
		];
		const rigged = cell({ rigUpMinutes: 45, rigDownMinutes: 30, taken });
		// 09:00–11:00 holds 60 min with 75 min of rigging no more; 13:00–16:00 does.
		expect(slotOf(wish(60, '2026-06-01T08:00', '2026-06-02T00:00'), rigged, [])).toEqual([
			'2026-06-01T13:45',
			'2026-06-01T14:45'
		]);
	});

	it('rigs before the wished time if it must, but never before now', () => {
		const rigged = cell({ rigUpMinutes: 60 });
		const from = '2026-06-01T08:00';
		expect(slotOf(wish(60, from, '2026-06-02T00:00', '2026-06-01T03:00'), rigged, [])[0]).toBe(from);
		expect(slotOf(wish(60, from, '2026-06-02T00:00', '2026-06-01T07:30'), rigged, [])[0]).toBe(
			'2026-06-01T08:30'
		);
	});

	it('waits for a build that stands in another cell', () => {
		const elsewhere = [span('2026-06-01T00:00', '2026-06-01T15:00')];
		expect(slotOf(wish(60, '2026-06-01T08:00', '2026-06-02T00:00'), cell(), elsewhere)[0]).toBe(
			'2026-06-01T15:00'
		);
	});

	it('takes a stretch that is filled exactly', () => {
		const taken = [
			span('2026-06-01T00:00', '2026-06-01T10:00'),
			span('2026-06-01T11:00', '2026-06-02T00:00')
		];
		expect(slotOf(wish(60, '2026-06-01T08:00', '2026-06-01T11:00'), cell({ taken }), [])[0]).toBe(
			'2026-06-01T10:00'
		);
	});

	it.each([
		['2026-03-29', 23],
		['2026-10-25', 25]
	])('fills %s, a day of %i hours, exactly and no more', (day, hours) => {
		const around = {
			from: new Date(+utc(`${day}T00:00`) - 864e5),
			to: new Date(+utc(`${day}T00:00`) + 2 * 864e5)
		};
		const open = openIntervals([{ day: 7, from: '00:00', to: '24:00' }], around, 'Europe/Stockholm');
		const fits = (durationMinutes: number) =>
			'slot' in firstFit({ durationMinutes, window: around, earliestRig: around.from }, cell({ open }), []);
		expect(fits(hours * 60)).toBe(true);
		expect(fits(hours * 60 + 1)).toBe(false);
	});

	it('says why there is none', () => {
		const day = ['2026-06-01T08:00', '2026-06-01T20:00'] as const;
		expect(reasonOf(wish(900, ...day), cell(), [])).toContain('the wished time is shorter than the 15 h');
		expect(reasonOf(wish(60, ...day), cell({ open: [] }), [])).toBe('it is not open in the wished time');
		const short = cell({ open: [span('2026-06-01T08:00', '2026-06-01T09:00')], rigUpMinutes: 15 });
		expect(reasonOf(wish(60, ...day), short, [])).toBe(
			'it is open for 1 h at most in one stretch; 1 h 15 min with 15 min of rigging is needed'
		);
		const full = cell({ taken: [span('2026-05-01T00:00', '2026-07-01T00:00')] });
		expect(reasonOf(wish(60, ...day), full, [])).toBe('it is taken or closed for all of the wished time');
		const built = [span('2026-05-01T00:00', '2026-07-01T00:00')];
		expect(reasonOf(wish(60, ...day), cell(), built)).toContain('the build stands in another cell');
	});

	it('never offers time that is taken, closed or too short, and never overlooks the earliest quarter hour', () => {
		const base = +utc('2026-06-01T00:00');
		const quarter = 15 * 60_000;
		const stretch = fc
			.tuple(fc.integer({ min: 0, max: 90 }), fc.integer({ min: 1, max: 20 }))
			.map(([from, length]) => ({
				from: new Date(base + from * quarter),
				to: new Date(base + (from + length) * quarter)
			}));
		fc.assert(
			fc.property(
				fc.array(stretch, { maxLength: 6 }),
				fc.array(stretch, { maxLength: 3 }),
				fc.integer({ min: 1, max: 16 }),
				fc.integer({ min: 0, max: 4 }),
				(taken, build, length, rig) => {
					const within = { from: new Date(base), to: new Date(base + 96 * quarter) };
					const time = cell({ open: [within], taken, rigUpMinutes: rig * 15, rigDownMinutes: rig * 15 });
					const search = { durationMinutes: length * 15, window: within, earliestRig: within.from };
					const free = (q: number) => {
						const [from, to] = [base + (q - rig) * quarter, base + (q + length + rig) * quarter];
						return (
							from >= +within.from &&
							to <= +within.to &&
							[...taken, ...build].every((t) => +t.to <= from || +t.from >= to)
						);
					};
					const first = Array.from({ length: 97 }, (_, q) => q).find(free);
					const fit = firstFit(search, time, build);
					expect('slot' in fit ? (+fit.slot.from - base) / quarter : undefined).toBe(first);
				}
			)
		);
	});
});

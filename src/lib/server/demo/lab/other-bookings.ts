import type { Moment } from '../calendar';
import type { DemoBooking } from './booking';

type Subject = [client: string, build: string, cell: string, batch: string | null];
type More = Pick<DemoBooking, 'kind' | 'purpose'> & Partial<Pick<DemoBooking, 'askedBy' | 'fate'>>;

const between = (
	key: string,
	[client, build, cell, batch]: Subject,
	from: Moment,
	to: Moment,
	more: More
): DemoBooking => ({
	key,
	client,
	build,
	cell,
	batch,
	from,
	to,
	askedBy: 'client',
	fate: { is: 'confirmed' },
	...more
});

const on = (key: string, subject: Subject, [workday, from, to]: [number, string, string], more: More) =>
	between(key, subject, { workday, clock: from }, { workday, clock: to }, more);

const sweep = (purpose: string, more: Partial<More> = {}): More => ({
	kind: 'power_sweep',
	purpose,
	...more
});
const declined = (reason: string) => ({ fate: { is: 'declined', reason } }) as const;
const cancelled = (by: 'client' | 'manager', reason: string, confirmed = true) =>
	({ fate: { is: 'cancelled', by, reason, confirmed } }) as const;
const moved = (workday: number, from: string, to: string) =>
	({ fate: { is: 'moved', first: { from: { workday, clock: from }, to: { workday, clock: to } } } }) as const;

const QM1: Subject = ['QMS', 'QM-24.1', 'EC1', 'E5-104'];
const QM2: Subject = ['QMS', 'QM-24.2', 'EC1', 'E5-117'];
const BVA: Subject = ['BVG', 'BV-16.A', 'AC3', 'E85-031'];
const BVB: Subject = ['BVG', 'BV-16.B', 'AC3', 'E85-031'];
const SD1: Subject = ['SFM', 'SD-45.1', 'WB2', 'B7-208'];
const SD2: Subject = ['SFM', 'SD-45.2', 'WB2', 'B7-208'];
const LH1: Subject = ['LHA', 'LH-58.1', 'AC4', 'E5-117'];
const LH2: Subject = ['LHA', 'LH-58.2', 'AC4', 'E5-117'];
const TS1: Subject = ['TSL', 'TS-14.1', 'AC3', 'TSL-S98-06'];

/** What came to nothing in the year, and why. */
const CAME_TO_NOTHING: readonly DemoBooking[] = [
	on(
		'no-1',
		QM1,
		[-229, '08:30', '16:30'],
		sweep('Second reference.', declined('The cell is being calibrated that week.'))
	),
	on(
		'no-2',
		BVA,
		[-208, '08:30', '16:30'],
		sweep('Repeat.', cancelled('client', 'Pistons not back from coating.'))
	),
	on(
		'no-3',
		SD1,
		[-194, '08:30', '16:30'],
		sweep('Winter fuel.', cancelled('client', 'Fuel not delivered.', false))
	),
	on(
		'no-4',
		LH1,
		[-169, '08:30', '12:00'],
		sweep('Altitude jetting.', declined('The small cell cannot lower its air pressure.'))
	),
	on('no-5', TS1, [-120, '08:30', '15:00'], sweep('Blend S98-05.', cancelled('client', 'Blend withdrawn.'))),
	on(
		'no-6',
		QM2,
		[-100, '08:30', '16:30'],
		sweep('Repeat.', cancelled('manager', 'Cell not given back yet: the new bearing is being run in.'))
	),
	on(
		'no-7',
		SD2,
		[-98, '08:30', '17:00'],
		sweep('Repeat of map 9.', declined('Injection map not released by the customer’s own people.'))
	),
	on('no-8', LH2, [-46, '08:30', '12:00'], sweep('Cold start.', cancelled('client', 'Header cracked.'))),
	on('no-9', BVA, [-25, '08:30', '16:30'], sweep('Third installation.', declined('Asked for twice.')))
];

/** Moved and other single slots of the year. */
const SINGLE: readonly DemoBooking[] = [
	on(
		'single-1',
		TS1,
		[-184, '08:30', '15:00'],
		sweep('Meters in series compared.', { ...moved(-185, '08:30', '15:00'), askedBy: 'engineer' })
	),
	on(
		'single-2',
		QM1,
		[-143, '10:00', '16:30'],
		sweep('Visit of the customer.', moved(-144, '08:30', '15:00'))
	),
	on('single-3', LH1, [-122, '08:30', '12:00'], sweep('Sound level.', moved(-123, '13:00', '16:30'))),
	on('single-4', SD2, [-81, '08:30', '16:30'], sweep('Smoke opacity.', moved(-80, '08:30', '16:30'))),
	on('generator-store', BVB, [-44, '08:30', '16:30'], {
		kind: 'free_log',
		purpose: 'Electrical store: drive, charge, rest.'
	})
];

/** The last three weeks. */
const RECENT: readonly DemoBooking[] = [
	on(
		'sprint-first',
		['QMS', 'QM-24.1', 'EC1', 'E5-117'],
		[-14, '09:00', '16:00'],
		sweep('Reference once more.')
	),
	on('generator-a', BVA, [-11, '09:00', '16:00'], sweep('Series pistons, new installation.')),
	on('generator-a2', BVA, [-10, '09:00', '16:00'], sweep('Series pistons, aligned anew.')),
	on('farm-first', SD1, [-9, '09:00', '17:00'], {
		kind: 'steady_points',
		purpose: 'Full-load curve and nine points.'
	}),
	on('farm-map9', SD2, [-7, '13:00', '17:30'], sweep('Map 9 again.', { askedBy: 'engineer' })),
	on(
		'generator-b',
		BVB,
		[-6, '09:00', '16:00'],
		sweep('Raised compression, new installation.', { askedBy: 'engineer' })
	),
	on('generator-b2', BVB, [-5, '09:00', '16:00'], sweep('Raised compression, and its store.')),
	on('ultralight-ref', LH1, [-4, '09:00', '13:00'], sweep('Reference for the longer header.')),
	on('fuel-first', TS1, [-2, '09:00', '15:00'], sweep('Blend S98-06 on the energy-flow line.')),
	on('sprint-short', QM2, [-1, '09:00', '13:00'], sweep('Short runners, last repeat.'))
];

/** The first day itself, at whatever hour it is begun: a test on, one over its time, one late, one next. */
const LIVE: readonly DemoBooking[] = [
	between(
		'live-on',
		QM2,
		{ minutes: -105 },
		{ minutes: 150 },
		sweep('Short runners, three pulls; shift as agreed with the cell.')
	),
	between(
		'live-over',
		SD2,
		{ minutes: -195 },
		{ minutes: -30 },
		{
			kind: 'steady_points',
			purpose: 'Map 9, nine points.',
			askedBy: 'engineer'
		}
	),
	between(
		'live-late',
		BVB,
		{ minutes: -45 },
		{ minutes: 240 },
		sweep('Raised compression, repeat on a new gasket.')
	),
	between(
		'live-next',
		['LHA', 'LH-58.3', 'AC4', 'E5-117'],
		{ minutes: 90, orAt: '08:30' },
		{ minutes: 240, orAt: '11:30' },
		sweep('Leaner mid-range needles, first curve.')
	)
];

/** Ahead: slots, of which one has no fuel yet and one is asked to move, and requests of which three want the same hours. */
const AHEAD: readonly DemoBooking[] = [
	on(
		'ahead-fuel',
		['TSL', 'TS-14.1', 'AC3', null],
		[1, '09:00', '15:00'],
		sweep('Next blend, when it is named.')
	),
	on('ahead-sprint', QM2, [1, '09:00', '16:00'], sweep('Short runners with the other exhaust.')),
	on('farm-map', SD2, [2, '09:00', '17:00'], sweep('Map 9, full-load curve.', { askedBy: 'engineer' })),
	on('ahead-farm', SD1, [4, '09:00', '17:00'], {
		kind: 'steady_points',
		purpose: 'Nine points for the homologation file.',
		fate: {
			is: 'confirmed',
			wished: { from: { workday: 5, clock: '09:00' }, to: { workday: 5, clock: '17:00' } }
		}
	}),
	on('ultralight-header', LH2, [6, '08:30', '13:00'], sweep('Longer header against the certified exhaust.')),
	on('ahead-generator', BVA, [8, '09:00', '16:00'], sweep('Series pistons, last repeat.')),
	on('generator-wish', BVB, [3, '09:00', '15:00'], {
		kind: 'endurance',
		purpose: 'Fifty-hour run, first day.',
		fate: { is: 'requested' }
	}),
	on(
		'fuel-wish',
		TS1,
		[3, '10:00', '16:00'],
		sweep('Repeat after the control was retuned.', { fate: { is: 'requested' } })
	),
	on('generator-steady', BVA, [3, '13:00', '19:00'], {
		kind: 'steady_points',
		purpose: 'Held points of the series pistons.',
		askedBy: 'engineer',
		fate: { is: 'requested' }
	}),
	on(
		'sprint-wish',
		['QMS', 'QM-24.3', 'EC1', 'E5-117'],
		[7, '09:00', '16:00'],
		sweep('Higher compression, if the build is ready.', { fate: { is: 'requested' } })
	)
];

export const OTHER_BOOKINGS = [...CAME_TO_NOTHING, ...SINGLE, ...RECENT, ...LIVE, ...AHEAD];

export interface DemoClosure {
	cell: string;
	from: { workday: number; clock: string };
	to: { workday: number; clock: string };
	title: string;
}

const shut = (cell: string, [from, to]: [number, number], title: string): DemoClosure => ({
	cell,
	from: { workday: from, clock: '07:00' },
	to: { workday: to, clock: '18:00' },
	title
});

export const DEMO_CLOSURES: readonly DemoClosure[] = [
	shut('EC1', [-230, -228], 'Torque calibration with dead weights'),
	shut('WB2', [-170, -168], 'Water treatment and hoses'),
	shut('AC3', [-126, -125], 'Second fuel line plumbed'),
	shut('EC1', [-104, -101], 'Absorber bearing renewed'),
	shut('AC4', [-64, -63], 'Drive firmware and emergency stop test'),
	shut('WB2', [-19, -18], 'Load cell changed'),
	shut('AC4', [10, 11], 'Yearly inspection of the extinguishing system')
];

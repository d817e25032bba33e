import type { RunKind } from '$lib/domain/model';

export interface DemoBooking {
	/** Names it for the runs in it. */
	key: string;
	client: string;
	build: string;
	cell: string;
	batch: string;
	kind: RunKind;
	purpose: string;
	/** Working days from the lab's first day, and clocks there. */
	workday: number;
	from: string;
	to: string;
	askedBy: 'client' | 'engineer';
	confirmed: boolean;
}

const booking = (
	key: string,
	[client, build, cell, batch]: [string, string, string, string],
	[workday, from, to]: [number, string, string],
	more: Pick<DemoBooking, 'kind' | 'purpose' | 'askedBy' | 'confirmed'>
): DemoBooking => ({ key, client, build, cell, batch, workday, from, to, ...more });

const slot = { confirmed: true } as const;
const wish = { confirmed: false } as const;

/** Done, confirmed for this week and next, and requests of which three want the same hours of cell 3. */
export const DEMO_BOOKINGS: readonly DemoBooking[] = [
	booking('sprint-first', ['QMS', 'QM-24.1', 'EC1', 'E5-117'], [-14, '09:00', '16:00'], {
		kind: 'power_sweep',
		purpose: 'Reference of the engine as delivered.',
		askedBy: 'client',
		...slot
	}),
	booking('generator-a', ['BVG', 'BV-16.A', 'AC3', 'E85-031'], [-11, '09:00', '16:00'], {
		kind: 'power_sweep',
		purpose: 'Series pistons, first installation.',
		askedBy: 'client',
		...slot
	}),
	booking('farm-first', ['SFM', 'SD-45.1', 'WB2', 'B7-208'], [-9, '09:00', '17:00'], {
		kind: 'steady_points',
		purpose: 'Full-load curve and nine points.',
		askedBy: 'client',
		...slot
	}),
	booking('generator-b', ['BVG', 'BV-16.B', 'AC3', 'E85-031'], [-6, '09:00', '16:00'], {
		kind: 'power_sweep',
		purpose: 'Raised compression, first installation.',
		askedBy: 'engineer',
		...slot
	}),
	booking('fuel-first', ['TSL', 'TS-14.1', 'AC3', 'TSL-S98-06'], [-2, '09:00', '15:00'], {
		kind: 'power_sweep',
		purpose: 'Blend S98-06 on the energy-flow line.',
		askedBy: 'client',
		...slot
	}),
	booking('sprint-runners', ['QMS', 'QM-24.2', 'EC1', 'E5-117'], [0, '09:00', '16:30'], {
		kind: 'power_sweep',
		purpose: 'Short runners, three pulls.',
		askedBy: 'client',
		...slot
	}),
	booking('farm-map', ['SFM', 'SD-45.2', 'WB2', 'B7-208'], [2, '09:00', '17:00'], {
		kind: 'power_sweep',
		purpose: 'Map 9, sweep repeated with the clock in the export.',
		askedBy: 'engineer',
		...slot
	}),
	booking('ultralight-header', ['LHA', 'LH-58.2', 'AC4', 'E5-117'], [6, '08:30', '13:00'], {
		kind: 'power_sweep',
		purpose: 'Longer header against the certified exhaust.',
		askedBy: 'client',
		...slot
	}),
	booking('generator-wish', ['BVG', 'BV-16.B', 'AC3', 'E85-031'], [3, '09:00', '15:00'], {
		kind: 'endurance',
		purpose: 'Fifty-hour run, first day.',
		askedBy: 'client',
		...wish
	}),
	booking('fuel-wish', ['TSL', 'TS-14.1', 'AC3', 'TSL-S98-06'], [3, '10:00', '16:00'], {
		kind: 'power_sweep',
		purpose: 'Repeat after the control was retuned.',
		askedBy: 'client',
		...wish
	}),
	booking('generator-steady', ['BVG', 'BV-16.A', 'AC3', 'E85-031'], [3, '13:00', '19:00'], {
		kind: 'steady_points',
		purpose: 'Third installation of the series pistons.',
		askedBy: 'engineer',
		...wish
	}),
	booking('sprint-wish', ['QMS', 'QM-24.3', 'EC1', 'E5-117'], [7, '09:00', '16:00'], {
		kind: 'power_sweep',
		purpose: 'Higher compression, if the build is ready.',
		askedBy: 'client',
		...wish
	})
];

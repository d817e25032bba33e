import type { BENCHES } from './benches';

/** Running in, warm-up and checks, a shift of an endurance test: records without a trace. Sweeps and held points have one. */
export type Step = 'in' | 'check' | 'shift' | 'sweep' | 'points';

export interface Campaign {
	bench: keyof typeof BENCHES;
	build: string;
	batch: string;
	purpose: string;
	askedBy: 'client' | 'engineer' | 'manager';
	/** Working days before the lab's first day, and what was run on each. */
	days: readonly (readonly [workday: number, ...steps: Step[]])[];
	/** One slot over all its days, nights included; otherwise a slot a day. */
	throughout?: true;
}

const campaign = (
	bench: Campaign['bench'],
	[build, batch]: [string, string],
	askedBy: Campaign['askedBy'],
	purpose: string,
	...days: Campaign['days']
): Campaign => ({ bench, build, batch, askedBy, purpose, days });

const shifts = (from: number, count: number) =>
	Array.from({ length: count }, (_, day) => [from + day, 'shift'] as const);

const throughout = (...given: Parameters<typeof campaign>): Campaign => ({
	...campaign(...given),
	throughout: true
});

/** The lab's year but for its last three weeks, cell by cell. */
export const CAMPAIGNS: readonly Campaign[] = [
	// Cell 1.
	campaign(
		'sprint',
		['QM-24.1', 'E5-104'],
		'client',
		'Engine as delivered: running in, reference curve.',
		[-236, 'in', 'in'],
		[-235, 'sweep', 'sweep'],
		[-234, 'check']
	),
	campaign(
		'sprint',
		['QM-24.1', 'E5-104'],
		'client',
		'After the oil pump was changed.',
		[-198],
		[-197, 'sweep']
	),
	campaign(
		'sprint',
		['QM-24.1', 'E5-104'],
		'manager',
		'The same engine in cells 1 and 3, turn and turn about.',
		[-163, 'sweep', 'sweep'],
		[-161, 'sweep', 'sweep'],
		[-159, 'sweep', 'sweep']
	),
	campaign('sprint', ['QM-24.2', 'E5-104'], 'client', 'Short runners: running in.', [-134, 'in']),
	campaign(
		'sprint',
		['QM-24.2', 'E5-117'],
		'client',
		'Short runners: first curves, four points.',
		[-112, 'sweep', 'sweep'],
		[-111, 'points']
	),
	campaign(
		'sprint',
		['QM-24.2', 'E5-117'],
		'engineer',
		'Short runners: repeats.',
		[-96, 'sweep'],
		[-95, 'check'],
		[-60, 'sweep'],
		[-59],
		[-41],
		[-27]
	),
	// Cell 2.
	campaign(
		'farm',
		['SD-45.1', 'B7-201'],
		'client',
		'Stage build: running in and first curve.',
		[-243, 'in', 'in'],
		[-242, 'sweep'],
		[-241, 'sweep']
	),
	campaign(
		'farm',
		['SD-45.1', 'B7-201'],
		'client',
		'Repeats before the winter.',
		[-188, 'sweep'],
		[-187, 'sweep'],
		[-186, 'sweep']
	),
	throughout('farm', ['SD-45.1', 'B7-201'], 'client', 'Endurance, first part.', ...shifts(-180, 5)),
	throughout('farm', ['SD-45.1', 'B7-201'], 'client', 'Endurance, second part.', ...shifts(-150, 5)),
	campaign('farm', ['SD-45.2', 'B7-201'], 'client', 'Map 9: first curve.', [-107, 'sweep'], [-106, 'points']),
	campaign(
		'farm',
		['SD-45.1', 'B7-219'],
		'engineer',
		'Curve after the endurance test.',
		[-66, 'sweep'],
		[-65, 'sweep', 'sweep'],
		[-64, 'sweep']
	),
	throughout('farm', ['SD-45.2', 'B7-219'], 'client', 'Endurance of map 9.', ...shifts(-52, 4)),
	campaign(
		'farm',
		['SD-45.1', 'B7-208'],
		'engineer',
		'Curve once more after the tank was filled anew.',
		[-30, 'sweep'],
		[-29, 'check']
	),
	// Cell 3.
	campaign(
		'generator',
		['BV-16.A', 'E85-027'],
		'client',
		'Series pistons: running in, first curve.',
		[-216, 'in'],
		[-215, 'sweep']
	),
	campaign(
		'fuel',
		['TS-14.1', 'TSL-S98-04'],
		'client',
		'Blend S98-04: running in, energy-flow line.',
		[-210, 'in'],
		[-209, 'sweep']
	),
	campaign(
		'generator',
		['BV-16.A', 'E85-027'],
		'client',
		'Series pistons: new installation.',
		[-201],
		[-200, 'sweep']
	),
	campaign(
		'sprintInCell3',
		['QM-24.1', 'E5-104'],
		'manager',
		'The same engine in cells 1 and 3, turn and turn about.',
		[-162, 'sweep', 'sweep'],
		[-160, 'sweep', 'sweep'],
		[-158, 'sweep', 'sweep'],
		[-156, 'sweep', 'sweep']
	),
	campaign(
		'generator',
		['BV-16.A', 'E85-027'],
		'engineer',
		'Series pistons: repeats.',
		[-141, 'sweep'],
		[-140, 'sweep']
	),
	campaign(
		'fuel',
		['TS-14.1', 'TSL-S98-04'],
		'client',
		'Energy-flow line after new injectors.',
		[-131, 'sweep'],
		[-130, 'check']
	),
	campaign(
		'generator',
		['BV-16.B', 'E85-027'],
		'client',
		'Raised compression: running in, first curves.',
		[-118, 'in', 'sweep'],
		[-117, 'sweep']
	),
	throughout('generator', ['BV-16.B', 'E85-027'], 'client', 'Endurance at 3000 rev/min.', ...shifts(-93, 5)),
	campaign(
		'generator',
		['BV-16.B', 'E85-031'],
		'client',
		'Raised compression after the endurance test.',
		[-84, 'sweep'],
		[-83, 'sweep']
	),
	campaign('fuel', ['TS-14.1', 'TSL-S98-06'], 'client', 'Blend S98-06, first tank.', [-70, 'sweep']),
	campaign(
		'fuel',
		['TS-14.1', 'TSL-S98-06'],
		'client',
		'Blend S98-06, faster control.',
		[-38, 'sweep'],
		[-37]
	),
	campaign('generator', ['BV-16.B', 'E85-031'], 'engineer', 'Raised compression: repeat.', [-21, 'sweep']),
	// Cell 4.
	campaign(
		'ultralight',
		['LH-58.1', 'E5-104'],
		'client',
		'Certified exhaust: running in, reference.',
		[-222, 'in', 'in'],
		[-221, 'sweep']
	),
	campaign(
		'ultralight',
		['LH-58.1', 'E5-104'],
		'client',
		'Certified exhaust: repeats.',
		[-175, 'sweep'],
		[-174],
		[-152, 'sweep'],
		[-128, 'check']
	),
	throughout(
		'ultralight',
		['LH-58.1', 'E5-117'],
		'client',
		'Fifty hours for the exhaust.',
		...shifts(-103, 4)
	),
	campaign(
		'ultralight',
		['LH-58.2', 'E5-117'],
		'client',
		'Longer header: running in, first curve.',
		[-74, 'in'],
		[-73, 'sweep']
	),
	campaign(
		'ultralight',
		['LH-58.2', 'E5-117'],
		'client',
		'Longer header: repeats.',
		[-55, 'sweep'],
		[-33],
		[-32],
		[-18, 'sweep']
	)
];

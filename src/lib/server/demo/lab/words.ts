import type { Step } from './campaigns';

/** What people write in the log of a run, by what was done; minutes from its start. */
export const LOG_WORDS: Readonly<Record<Step, readonly [minute: number, text: string][]>> = {
	in: [
		[0, 'Running in begun at light load.'],
		[2, 'Oil filled, no leaks at idle.'],
		[16, 'Load raised a step; sound and vibration as before.'],
		[20, 'Cylinder leak-down within 4 %.']
	],
	check: [
		[1, 'Warm-up; oil and coolant steady.'],
		[3, 'Torque zero checked with the shaft free.'],
		[9, 'Fuel meter zero checked, filter clean.'],
		[14, 'Guards closed, extinguishing bottle in date.'],
		[18, 'Thermocouple 3 was loose at its plug; pushed home.']
	],
	shift: [
		[0, 'Shift handed over, cycle running.'],
		[4, 'Oil topped up by 0.2 L.'],
		[11, 'Cycle count written down; no alarms overnight.'],
		[19, 'Belt looked at while stopped for fuel; no wear.']
	],
	sweep: [
		[-6, 'Warm; oil and coolant at test temperature.'],
		[-3, 'Torque zero taken before the pull.'],
		[1, 'Pull clean, nothing unusual heard.'],
		[2, 'Trace saved and looked through on the spot.'],
		[6, 'Plugs read: even colour.']
	],
	points: [
		[-4, 'Points agreed with the customer.'],
		[3, 'Each point held until the fuel flow stood still.'],
		[12, 'Last point done, cooling down.']
	]
};

/** What reviewers write when they write anything. */
export const ACCEPTED_WORDS = [
	'Figures agree with the repeats.',
	'Balance of fuel and air looked at: plausible.',
	'Curve lies on the earlier one.'
] as const;

export const ACCEPTED_RECORD = 'Record complete; no trace was wanted.';

/** The machine of a cell as people name it. */
export const ABSORBER_WORDS: Readonly<Record<string, string>> = {
	eddy_current: 'Eddy-current brake',
	water_brake: 'Water brake',
	ac: 'AC machine',
	dc: 'DC machine',
	hydraulic: 'Hydraulic machine'
};

export const TORQUE_PLACE_WORDS: Readonly<Record<'flange' | 'stator', string>> = {
	flange: 'At a flange in the shaft, on the engine’s side',
	stator: 'At the stator, by its reaction'
};

/** What each part of a torque chain is used for: no value is asked for that does nothing. */
export const CHAIN_USES = {
	torqueAt:
		'Decides which inertias stand between the engine and the sensor, and whether a gear lies between them.',
	shaft: 'Added to the engine’s inertia in the correction of power sweeps for acceleration.',
	rotor: {
		flange: 'Behind the flange: no figure uses it while torque is weighed there.',
		stator: 'Added too, since the stator feels the rotor accelerate; behind a gear as I / (i² · η).'
	},
	gear: {
		flange:
			'The absorber check meets the machine through it. Torque is weighed before it and stays as recorded.',
		stator:
			'The torque channel is taken as weighed at the absorber and divided by ratio × efficiency (while the absorber drives: × efficiency ÷ ratio). Leave it empty where your measuring system does that already. The absorber check meets the machine through it.'
	},
	arm: 'For dead-weight calibration alone: the torque that each mass makes, below. No figure of a run uses it, since traces bring torque in N·m.'
} as const;

import type { Auxiliary, Correction, Ignition, Induction, RunKind } from '../model';

/** Kinds as people say them. */
export const RUN_KIND_WORDS: Readonly<Record<RunKind, string>> = {
	power_sweep: 'Power sweep',
	steady_points: 'Steady points',
	point_table: 'Point table',
	motoring: 'Motoring',
	endurance: 'Endurance',
	free_log: 'Free log'
};

export const CORRECTION_WORDS: Readonly<Record<Correction, string>> = {
	none: 'None',
	sae_j1349: 'SAE J1349',
	iso_1585: 'ISO 1585',
	din_70020: 'DIN 70020',
	iso_3046: 'ISO 3046'
};

export const INDUCTION_WORDS: Readonly<Record<Induction, string>> = {
	natural: 'Naturally aspirated',
	mechanical: 'Mechanically supercharged',
	turbo: 'Turbocharged',
	turbo_cooled: 'Turbocharged, charge-cooled'
};

export const IGNITION_WORDS: Readonly<Record<Ignition, string>> = {
	spark: 'Spark ignition',
	compression: 'Compression ignition'
};

export const AUXILIARY_WORDS: Readonly<Record<Auxiliary, string>> = {
	fan: 'Fan',
	water_pump: 'Water pump',
	oil_pump: 'Oil pump',
	fuel_pump: 'Fuel pump',
	alternator: 'Alternator',
	steering_pump: 'Steering pump',
	air_conditioning: 'Air conditioning',
	air_filter: 'Air filter and intake',
	exhaust_system: 'Exhaust system'
};

/** Choices of a select, in the order of their words' table. */
export const optionsOf = (words: Readonly<Record<string, string>>): { value: string; label: string }[] =>
	Object.entries(words).map(([value, label]) => ({ value, label }));

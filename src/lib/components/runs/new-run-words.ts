import { CORRECTION_WORDS } from '$lib/domain/display/words';
import type { Correction, RunKind } from '$lib/domain/model';

/** What a kind of run is, and what its figures are made from. */
export const KIND_HINTS: Readonly<Record<RunKind, string>> = {
	power_sweep: 'Full load while the speed ramps: averaged in bins of speed, peaks by a local fit.',
	steady_points: 'Speed and load held still: plateaus are found in the trace and averaged.',
	point_table: 'A sheet whose rows are stabilised points already; it needs no time column.',
	motoring: 'The machine turns the engine: friction and pumping, no combustion.',
	endurance: 'Hours of running: means, drift and stops rather than peaks.',
	free_log: 'Anything else: statistics of the whole trace, nothing reduced.'
};

/** What a correction is for. Conformity to a standard needs its test conditions too, so none is claimed. */
export const CORRECTION_HINTS: Readonly<Record<Correction, string>> = {
	none: 'As measured. Right where the engine controls its own manifold pressure.',
	sae_j1349: 'By the formula of SAE J1349 to 99 kPa dry and 25 °C, for spark ignition only.',
	iso_1585: 'By the formula of ISO 1585 to 99 kPa dry and 25 °C, for spark and compression ignition.',
	din_70020: 'By the formula of DIN 70020, which is withdrawn: for comparison with old records.',
	iso_3046: 'ISO 3046-1 rates an engine for a site; it does not correct a run.'
};

const OFFERED: readonly Correction[] = ['none', 'sae_j1349', 'iso_1585', 'din_70020'];

export const CORRECTION_CHOICES = OFFERED.map((value) => ({
	value,
	label: value === 'none' ? 'None' : `By the formula of ${CORRECTION_WORDS[value]}`
}));

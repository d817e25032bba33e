import { plainNumber } from '$lib/domain/display/format';
import { CHAIN_USES, TORQUE_PLACE_WORDS } from './cell-words';

/** A torque chain as the pages read it. */
export interface ChainFacts {
	torqueAt: 'flange' | 'stator';
	rotorInertiaKgM2: number | null;
	shaftInertiaKgM2: number | null;
	armM: number | null;
	gravityMps2: number | null;
	gear: { ratio: number; efficiency: number } | null;
}

export interface ChainRow {
	name: string;
	value: string;
	use: string;
}

const UNKNOWN = 'not recorded';
const withUnit = (value: number | null, unit: string) =>
	value === null ? UNKNOWN : `${plainNumber(value)}\u00A0${unit}`;
const percent = (share: number) => `${plainNumber(Number((share * 100).toPrecision(12)))}\u00A0%`;

/** Each value with what it is used for. */
export function chainRows(chain: ChainFacts): ChainRow[] {
	const { torqueAt, gear } = chain;
	return [
		{ name: 'Torque weighed', value: TORQUE_PLACE_WORDS[torqueAt], use: CHAIN_USES.torqueAt },
		{ name: 'Shaft and coupling', value: withUnit(chain.shaftInertiaKgM2, 'kg·m²'), use: CHAIN_USES.shaft },
		{ name: 'Rotor', value: withUnit(chain.rotorInertiaKgM2, 'kg·m²'), use: CHAIN_USES.rotor[torqueAt] },
		{
			name: 'Gear',
			value: gear ? `${plainNumber(gear.ratio)} : 1, ${percent(gear.efficiency)}` : 'none: they turn as one',
			use: CHAIN_USES.gear[torqueAt]
		},
		{ name: 'Calibration arm', value: withUnit(chain.armM, 'm'), use: CHAIN_USES.arm },
		{ name: 'Local gravity', value: withUnit(chain.gravityMps2, 'm/s²'), use: 'With the arm, for the same.' }
	];
}

/** What a version changed against the one written before it: `Rotor: 0.3 kg·m² → 0.9 kg·m²`. */
export function chainChanges(before: ChainFacts | undefined, after: ChainFacts): string[] {
	if (!before) return [];
	const old = chainRows(before);
	return chainRows(after).flatMap(({ name, value }, at) =>
		old[at]?.value === value ? [] : [`${name}: ${old[at]?.value} → ${value}`]
	);
}

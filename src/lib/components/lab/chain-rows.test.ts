import { describe, expect, it } from 'vitest';
import { chainChanges, chainRows, type ChainFacts } from './chain-rows';

const chain: ChainFacts = {
	torqueAt: 'stator',
	rotorInertiaKgM2: 0.3,
	shaftInertiaKgM2: null,
	armM: 0.5,
	gravityMps2: 9.8183,
	gear: { ratio: 2.5, efficiency: 0.97 }
};

describe('a torque chain as read', () => {
	it('says of each value what it is used for, also where that is nothing', () => {
		for (const row of chainRows(chain)) expect(row.use.length, row.name).toBeGreaterThan(10);
		const rotor = chainRows({ ...chain, torqueAt: 'flange' }).find(({ name }) => name === 'Rotor');
		expect(rotor?.use).toContain('no figure uses it');
	});
	it('writes values with their units, and the unknown as unknown', () =>
		expect(chainRows(chain).map(({ value }) => value.replaceAll('\u00A0', ' '))).toEqual([
			'At the stator, by its reaction',
			'not recorded',
			'0.3 kg·m²',
			'2.5 : 1, 97 %',
			'0.5 m',
			'9.8183 m/s²'
		]));
	it('tells what a version changed', () => {
		expect(
			chainChanges(chain, { ...chain, rotorInertiaKgM2: 0.9, gear: null }).map((text) =>
				text.replaceAll('\u00A0', ' ')
			)
		).toEqual(['Rotor: 0.3 kg·m² → 0.9 kg·m²', 'Gear: 2.5 : 1, 97 % → none: they turn as one']);
		expect(chainChanges(undefined, chain)).toEqual([]);
	});
});

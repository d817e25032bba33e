import { expect, it } from 'vitest';
import { curveTable } from './curve-data';

const CURVE = {
	speed: [3000, null, 2000],
	power: [57, 1, 31],
	bte: [0.33, 0.2, null],
	torque: [null, null, null]
};

it('sorts by speed, leaves out rows without one and prints fractions in %', () => {
	const table = curveTable(CURVE, ['power', 'torque', 'bte'], 'si');
	expect(table.speed).toEqual([2000, 3000]);
	expect(table.columns.power).toEqual([31, 57]);
	expect(table.columns.bte).toEqual([null, 33]);
});
it('knows points held one after another from a curve', () => {
	expect(curveTable(CURVE, ['power'], 'si').isPoints).toBe(true);
	expect(curveTable({ speed: [2000, 3000, 4000], power: [31, 57, 88] }, ['power'], 'si').isPoints).toBe(
		false
	);
});
it('has no column for what was not measured', () => {
	expect(Object.keys(curveTable(CURVE, ['power', 'torque', 'lambda_flow'], 'si').columns)).toEqual(['power']);
});
it('is in the units that the reader prefers', () => {
	const { speed, columns } = curveTable(
		{ speed: [2000, 3000, 4000], power: [0, 74.57, null] },
		['power'],
		'us'
	);
	expect(speed).toEqual([2000, 3000, 4000]);
	expect(columns.power?.[0]).toBe(0);
	expect(columns.power?.[1]).toBeCloseTo(100, 3);
	expect(columns.power?.[2]).toBeNull();
});

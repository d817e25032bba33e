import { describe, expect, it } from 'vitest';
import { readTable } from '../import/read-table';
import type { RunKind } from '../model';
import { checkMap } from './check-map';
import { proposeMap, toMap } from './propose-map';

function tableOf(header: string, row: (i: number) => readonly (number | string)[], rows = 40) {
	const text = [header, ...Array.from({ length: rows }, (_, i) => row(i).join(','))].join('\n');
	const read = readTable(new TextEncoder().encode(text));
	if (!read.ok) throw new Error(read.error);
	return read.table;
}
const proposal = (
	header: string,
	row: (i: number) => readonly (number | string)[],
	kind: RunKind = 'power_sweep'
) => proposeMap(tableOf(header, row), kind);
const codes = (proposed: ReturnType<typeof proposeMap>) => toMap(proposed).map(({ channel }) => channel);

describe('proposeMap', () => {
	it('takes sure headers at their word', () => {
		const proposed = proposal('time [s],speed [rpm],torque [Nm],fuel flow [kg/h]', (i) => [
			i * 0.02,
			1000 + i,
			50,
			3
		]);
		expect(codes(proposed)).toEqual(['time', 'speed', 'torque', 'fuel_flow']);
		expect(proposed.some(({ ask }) => ask)).toBe(false);
	});

	it('asks about a needed column that is not certain', () => {
		const proposed = proposal('time [s],speed,torque [Nm]', (i) => [i * 0.02, 1000 + i, 50]);
		expect(proposed.filter(({ ask }) => ask).map(({ header }) => header)).toEqual(['speed']);
	});

	it('asks about a fuel column without a unit, since figures stand on it', () => {
		const proposed = proposal('time [s],speed [rpm],torque [Nm],fuel flow', (i) => [
			i * 0.02,
			1000 + i,
			50,
			3
		]);
		expect(proposed.filter(({ ask }) => ask).map(({ guess }) => guess)).toEqual(['fuel_flow']);
	});

	it('keeps an uncertain column that no figure needs under its own header', () => {
		const proposed = proposal('time [s],speed [rpm],torque [Nm],T1 [degC],Pressure [kPa]', (i) => [
			i * 0.02,
			1000 + i,
			50,
			20,
			98
		]);
		expect(proposed.some(({ ask }) => ask)).toBe(false);
		expect(codes(proposed).at(-1)).toBeNull();
	});

	it('takes the best of several clocks', () => {
		const proposed = proposal('Date,Time,Elapsed [s],speed [rpm],torque [Nm]', (i) => [
			'2026-03-14 10:00:00',
			`10:00:${String(Math.floor(i / 10)).padStart(2, '0')}`,
			(i * 0.1).toFixed(1),
			1000 + i,
			50
		]);
		expect(proposed.filter(({ guess }) => guess === 'time').map(({ header }) => header)).toEqual([
			'Elapsed [s]'
		]);
	});

	it('asks for the unit of a clock whose numbers could be seconds or milliseconds', () => {
		const proposed = proposal('Time,speed [rpm],torque [Nm]', (i) => [i * 20, 1000 + i, 50]);
		expect(proposed[0]).toMatchObject({ guess: 'time', ask: true });
	});

	it('numbers several exhaust temperatures', () => {
		const proposed = proposal('time [s],speed [rpm],torque [Nm],EGT [degC],EGT [degC]', (i) => [
			i * 0.02,
			1000 + i,
			50,
			700,
			710
		]);
		expect(codes(proposed).slice(3)).toEqual(['exhaust_temp.1', 'exhaust_temp.2']);
	});

	it('asks which of two different torque columns is meant, not about a copy', () => {
		const different = proposal('time [s],speed [rpm],torque [Nm],Torque [Nm]', (i) => [
			i * 0.02,
			1000 + i,
			50,
			48
		]);
		expect(different.filter(({ ask }) => ask)).toHaveLength(2);
		const copy = proposal('time [s],speed [rpm],torque [Nm],Torque [Nm]', (i) => [
			i * 0.02,
			1000 + i,
			50,
			50
		]);
		expect(codes(copy)).toEqual(['time', 'speed', 'torque', null]);
	});
});

describe('checkMap', () => {
	const table = tableOf('time [s],speed [rpm],torque [Nm],note', (i) => [i * 0.02, 1000 + i, 50, 'warm']);
	const good = [
		{ index: 0, channel: 'time', unit: 's' },
		{ index: 1, channel: 'speed', unit: 'rpm' },
		{ index: 2, channel: 'torque', unit: 'lb-ft' }
	];
	const errorOf = (map: Parameters<typeof checkMap>[1]) => {
		const checked = checkMap(table, map);
		return checked.ok ? '' : checked.error;
	};

	it('accepts a good one; columns that it does not name stay under their own headers', () => {
		const checked = checkMap(table, good);
		expect(checked.ok && checked.columns.map(({ channel }) => channel)).toEqual([
			'time',
			'speed',
			'torque',
			null
		]);
	});
	it.each([
		[
			'an index outside the file',
			[{ index: 9, channel: 'speed', unit: 'rpm' }],
			/column 10 \(index 9\).*4 columns/
		],
		['an unknown channel', [{ index: 1, channel: 'sped', unit: 'rpm' }], /“sped”, which is not known/],
		[
			'an unknown unit',
			[{ index: 1, channel: 'speed', unit: 'furlongs' }],
			/“furlongs” of column 2 .* not known/
		],
		['a unit of another kind', [{ index: 1, channel: 'speed', unit: 'kg/h' }], /kg\/h .*no unit of speed/],
		[
			'two columns for one channel',
			[good[1]!, { index: 2, channel: 'speed', unit: 'rpm' }],
			/two columns the channel speed/
		],
		['one column twice', [good[1]!, { index: 1, channel: 'torque', unit: 'Nm' }], /column 2 .* twice/],
		['a column of text', [{ index: 3, channel: 'torque', unit: 'Nm' }], /holds no numbers.*“warm”/],
		['an amount per stroke', [{ index: 2, channel: 'fuel_flow', unit: 'mg/stroke' }], /per stroke/],
		[
			'gauge for what is no pressure',
			[{ index: 1, channel: 'speed', unit: 'rpm', reference: 'gauge' as const }],
			/not a pressure/
		],
		['a number on what exists once', [{ index: 1, channel: 'speed.2', unit: 'rpm' }], /not known/]
	])('names %s', (_, map, sentence) => expect(errorOf(map)).toMatch(sentence));
});

import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { isMissingMark, readLoose, readNumber, sniffNumberStyle } from './numbers';

const point = { decimal: '.', thousands: '' } as const;
const comma = { decimal: ',', thousands: '' } as const;

describe('readNumber', () => {
	it('reads any double exactly as the language does', () => {
		fc.assert(
			fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
				expect(readNumber(String(value), point)).toBe(Number(String(value)));
			})
		);
	});

	it('reads fixed decimals exactly, in both styles', () => {
		fc.assert(
			fc.property(fc.integer({ min: -1e9, max: 1e9 }), fc.nat(9), (whole, digits) => {
				const text = (whole / 10 ** digits).toFixed(digits);
				expect(readNumber(text, point)).toBe(Number(text));
				expect(readNumber(text.replace('.', ','), comma)).toBe(Number(text));
			})
		);
	});

	it.each([
		['12.5', 12.5],
		[' +3 ', 3],
		['-0.25', -0.25],
		['.5', 0.5],
		['7.', 7],
		['1e3', 1000],
		['1.5E-3', 0.0015],
		['1.5D+2', 150]
	])('%s is %d', (text, value) => expect(readNumber(text, point)).toBe(value));

	it.each(['', ' ', 'x0', '0x1F', '0b11', '1,5', '19..22', '1 2', 'Infinity', '1e', '--1', '1.2.3'])(
		'“%s” is no number',
		(text) => expect(readNumber(text, point)).toBeNaN()
	);
	it('does not take a point for a decimal comma', () => expect(readNumber('1.5', comma)).toBeNaN());
});

describe('readLoose', () => {
	it.each([
		["'12.5", point, 12.5, null],
		['12.3 kW', point, 12.3, 'kW'],
		['45%', point, 45, '%'],
		['1,234.5', { decimal: '.', thousands: ',' } as const, 1234.5, null],
		['1.234,5', { decimal: ',', thousands: '.' } as const, 1234.5, null],
		['1\u202f234,5', { decimal: ',', thousands: ' ' } as const, 1234.5, null],
		['1’234.5', { decimal: '.', thousands: "'" } as const, 1234.5, null],
		['−4.5', point, -4.5, null]
	] as const)('%s', (text, style, value, suffix) =>
		expect(readLoose(text, style)).toEqual({ value, suffix })
	);

	it.each(['0x1F', 'x0', '19..22', '12,34.5', 'off', '1 2 3'])('“%s” is no number', (text) =>
		expect(readLoose(text, point)).toBeNull()
	);
	it('does not take groups that are not of three digits', () =>
		expect(readLoose('12,34', { decimal: '.', thousands: ',' })).toBeNull());
});

describe('sniffNumberStyle', () => {
	it.each([
		[['12,5', '3,25'], { decimal: ',', thousands: '', assumed: false }],
		[['12.5', '3.25'], { decimal: '.', thousands: '', assumed: false }],
		[['1.234,5', '900,0'], { decimal: ',', thousands: '.', assumed: false }],
		[['1,234.5', '900.0'], { decimal: '.', thousands: ',', assumed: false }],
		[['0,020', '5,004'], { decimal: ',', thousands: '', assumed: false }],
		[['1,234,567', '5'], { decimal: '.', thousands: ',', assumed: false }],
		[["1'234.5"], { decimal: '.', thousands: "'", assumed: false }],
		[['3000', '120'], { decimal: '.', thousands: '', assumed: false }]
	] as const)('%j', (cells, style) => expect(sniffNumberStyle(cells, false)).toEqual(style));

	it('says where every number could be read both ways', () =>
		expect(sniffNumberStyle(['1,234', '2,345'], false)).toEqual({
			decimal: '.',
			thousands: ',',
			assumed: true
		}));
	it('takes the comma for the decimal mark beside semicolons', () =>
		expect(sniffNumberStyle(['1,234', '2,345'], true)).toEqual({
			decimal: ',',
			thousands: '',
			assumed: true
		}));
	it('takes no thousands mark that is not used consistently', () =>
		expect(sniffNumberStyle(['1,234.5', '12,34.5'], false).thousands).toBe(''));
});

describe('isMissingMark', () => {
	it.each(['', 'NaN', 'n/a', '#DIV/0!', '--', 'OL', '1.#QNAN', '***', 'Over', 'NULL', '-', 'inf'])(
		'“%s”',
		(mark) => expect(isMissingMark(mark)).toBe(true)
	);
	it.each(['off', '0', 'x', 'ON'])('not “%s”', (text) => expect(isMissingMark(text)).toBe(false));
});

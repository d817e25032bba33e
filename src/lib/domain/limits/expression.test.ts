import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { evaluateExpression, parseExpression } from './expression';

const channels = new Map([
	['speed', Float64Array.of(1000, 2000, NaN)],
	['torque', Float64Array.of(50, -20, 10)],
	['exhaust_temp.2', Float64Array.of(700, 710, 720)]
]);

function valueOf(text: string): number[] {
	const parsed = parseExpression(text);
	if (!parsed.ok) throw new Error(parsed.error);
	return Array.from(evaluateExpression(parsed.node, channels, 3));
}
const errorOf = (text: string) => {
	const parsed = parseExpression(text);
	return parsed.ok ? '' : parsed.error;
};

describe('expressions', () => {
	it.each([
		['1 + 2 * 3', 7],
		['(1 + 2) * 3', 9],
		['2 ^ 3 ^ 2', 512],
		['-2 ^ 2', -4],
		['2 ^ -1', 0.5],
		['8 / 4 / 2', 1],
		['10 - 4 - 3', 3],
		['--3', 3],
		['+3', 3],
		['.5e1', 5],
		['min(3, 1, 2)', 1],
		['max(3, 1, 2)', 3],
		['abs(-4)', 4],
		['sqrt(16)', 4],
		['2 × 3 − 1', 5]
	])('%s', (text, value) => expect(valueOf(text)).toEqual([value, value, value]));

	it('is worked out over channels, unknown samples staying unknown', () => {
		expect(
			valueOf('2 * 3.14159265358979 * speed * torque / 60000').map((value) => Number(value.toFixed(6)))
		).toEqual([5.235988, -4.18879, NaN]);
		expect(valueOf('exhaust_temp.2 - 700')).toEqual([0, 10, 20]);
		expect(valueOf('max(torque, 0)')).toEqual([50, 0, 10]);
	});
	it('what has no finite value is unknown', () =>
		expect(valueOf('1 / (torque - 10) + sqrt(torque)').map(Number.isNaN)).toEqual([false, true, true]));
	it('names its channels', () => {
		const parsed = parseExpression('torque * speed + torque');
		expect(parsed.ok && parsed.channels).toEqual(['torque', 'speed']);
	});

	it.each([
		['', /ends too early/],
		['1 +', /ends too early/],
		['(1 + 2', /not closed/],
		['1 2', /“2” was not expected/],
		['speed ** 2', /“\*” was not expected/],
		['eval(1)', /“eval” is not a function here; there are min, max, abs, sqrt/],
		['constructor(1)', /is not a function/],
		['min(1)', /min takes 2 to 8/],
		['sqrt(1, 2)', /sqrt takes 1/],
		['speed; torque', /“; torque” cannot be read/],
		['Speed', /“Speed” cannot be read/],
		['1'.repeat(600), /600 characters/],
		['('.repeat(100), /too deep/],
		['-'.repeat(100) + '1', /too deep/],
		['2^'.repeat(100) + '1', /too deep/],
		['1+'.repeat(240) + '1', /too long/]
	])('refuses “%s”', (text, sentence) => expect(errorOf(text)).toMatch(sentence));

	it('never throws, whatever the text', () => {
		const pieces = fc.constantFrom(
			'speed',
			'torque',
			'min(',
			')',
			'(',
			'+',
			'-',
			'*',
			'/',
			'^',
			',',
			'1',
			'2.5',
			' ',
			'__proto__',
			'[',
			'"',
			'ƒ'
		);
		fc.assert(
			fc.property(fc.array(pieces, { maxLength: 60 }), (parts) => {
				const parsed = parseExpression(parts.join(''));
				if (parsed.ok) expect(evaluateExpression(parsed.node, channels, 3)).toHaveLength(3);
				else expect(parsed.error).toMatch(/\.$/);
			})
		);
	});
});

import { describe, expect, it } from 'vitest';
import { needsOf } from './needs';

const needs = (...codes: string[]) => needsOf(codes.map((code) => ({ code })));

describe('what a booking still needs', () => {
	it('is nothing without warnings', () => expect(needs()).toEqual([]));
	it('is said once, in order', () =>
		expect(needs('clash', 'absorber_speed', 'absorber_torque', 'build_not_ready')).toEqual([
			'Another time',
			'Look at the absorber',
			'Build ready'
		]));
	it('hides no code that it does not know', () =>
		expect(needs('calibration_out')).toEqual(['calibration out']));
});

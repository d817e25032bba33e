import { describe, expect, it } from 'vitest';
import { firstPanes, readView, viewQuery } from './trace-view';

const channels = (...codes: string[]) => codes.map((code) => ({ code }));

describe('what a trace opens with', () => {
	it('takes the telling channels, in the order of the file', () => {
		const file = channels('Pedal', 'torque', 'speed', 'oil_temp', 'fuel_flow', 'power', 'lambda_sensor');
		expect(firstPanes(file)).toEqual(['torque', 'speed', 'fuel_flow', 'power']);
	});
	it('shows what a flag speaks of and what a finding is about', () => {
		const file = channels(
			'speed',
			'torque',
			'power',
			'fuel_flow',
			'oil_temp',
			'fuel_energy_flow',
			'Valve, left'
		);
		const said = ['Over speed: fuel_energy_flow was above its limit for 2.32 s.', 'Valve, left'];
		expect(firstPanes(file, said)).toEqual(['speed', 'torque', 'fuel_energy_flow', 'Valve, left']);
	});
	it('fills up with columns kept under their own headers', () => {
		expect(firstPanes(channels('A', 'B'))).toEqual(['A', 'B']);
	});
});

describe('the address of a view', () => {
	const whole = { from: 0, to: 60 };
	const read = (text: string) => readView(new URLSearchParams(text), channels('speed', 'Oil, left'));

	it('comes back as it went', () => {
		const view = { window: { from: 12.3456, to: 20 }, shown: ['Oil, left', 'speed'] };
		const address = viewQuery(new URL('http://lab.example/runs/R?trace=t&from=1&to=2'), view, whole);
		expect(address.searchParams.get('trace')).toBe('t');
		expect(readView(address.searchParams, channels('speed', 'Oil, left'))).toEqual({
			window: { from: 12.346, to: 20 },
			shown: ['Oil, left', 'speed']
		});
	});
	it('says nothing of the whole trace', () => {
		const address = viewQuery(
			new URL('http://lab.example/runs/R?from=1&to=2'),
			{ window: whole, shown: [] },
			whole
		);
		expect(address.search).toBe('');
	});
	it.each(['from=5', 'from=9&to=3', 'from=x&to=y', 'show=none'])('leaves %s to the chart', (text) => {
		expect(read(text)).toEqual({ window: undefined, shown: undefined });
	});
});

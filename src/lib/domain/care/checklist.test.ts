import { describe, expect, it } from 'vitest';
import { CHECKLIST } from './checklist';

describe('the pre-run checklist', () => {
	it('has each item once, with what to look at', () => {
		expect(new Set(CHECKLIST.map(({ code }) => code)).size).toBe(CHECKLIST.length);
		for (const { code, text, look } of CHECKLIST) {
			expect(code).toMatch(/^[a-z_]{3,60}$/);
			expect(`${text} ${look}`.length, code).toBeGreaterThan(30);
		}
	});

	it('asks for what kills: shaft, fuel, exhaust, fire, stop, people in the cell', () => {
		const codes = CHECKLIST.map(({ code }) => code);
		for (const code of ['guards', 'coupling', 'fuel', 'ventilation', 'fire', 'stop', 'clear'])
			expect(codes).toContain(code);
	});
});

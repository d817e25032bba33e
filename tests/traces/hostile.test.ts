import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { analyseFile, type AnalysedFile } from '../../src/lib/domain/analysis';
import type { RunContext, RunKind } from '../../src/lib/domain/model';
import { engineOf, PLAIN, record, seeded, sweepContext, write } from './synthetic';

const analyseText = (text: string, changes: Partial<RunContext>) =>
	analyseFile(new TextEncoder().encode(text), sweepContext(changes), { name: 'trace.csv' });

describe('hostile and broken bytes', () => {
	const kinds = fc.constantFrom<RunKind>(
		'power_sweep',
		'steady_points',
		'point_table',
		'free_log',
		'endurance',
		'motoring'
	);
	const random = seeded(3);
	const engine = engineOf(random);
	const ramp = {
		seconds: 4,
		rpm: (share: number) => engine.loRpm + (engine.hiRpm - engine.loRpm) * share,
		load: 1
	};
	const good = new TextDecoder().decode(
		write(record(engine, [ramp], { rateHz: 50, noise: 0.004 }, random), PLAIN)
	);

	function expectSane(analysed: AnalysedFile): void {
		if (analysed.state !== 'ready') {
			expect(analysed.error.length).toBeGreaterThan(20);
			return;
		}
		for (const { value } of Object.values(analysed.metrics)) expect(Number.isFinite(value)).toBe(true);
		for (const values of Object.values(analysed.curve))
			for (const value of values) expect(value === null || Number.isFinite(value)).toBe(true);
		for (const { spans, message } of analysed.findings) {
			// Marks of the file itself are quoted.
			expect(message.replace(/“[^”]*”/g, '')).not.toMatch(/NaN|undefined|Infinity/);
			for (const span of spans) expect(span.every(Number.isFinite)).toBe(true);
		}
	}

	it('any bytes are answered', () => {
		fc.assert(
			fc.property(fc.uint8Array({ maxLength: 400 }), kinds, (any, kind) =>
				expectSane(analyseFile(any, sweepContext({ kind }), { name: 'x' }))
			),
			{ numRuns: 300 }
		);
	});

	it('a trace cut, spliced and overwritten anywhere is answered', () => {
		const piece = fc.constantFrom(
			'#N/A',
			';',
			'"',
			'\n',
			'\0',
			'-9999',
			'1e308',
			'\r',
			',,,',
			'off',
			'0x1F',
			'\t',
			'µ',
			'9'.repeat(40)
		);
		fc.assert(
			fc.property(
				kinds,
				fc.array(fc.tuple(fc.nat(6000), fc.nat(30), piece), { maxLength: 8 }),
				fc.nat(6000),
				(kind, edits, cut) => {
					let text = good;
					for (const [at, gone, put] of edits) text = text.slice(0, at) + put + text.slice(at + gone);
					expectSane(analyseText(text.slice(0, Math.max(cut, 50)), { kind, correction: 'sae_j1349' }));
				}
			),
			{ numRuns: 150 }
		);
	});

	it('tables of odd cells are answered', () => {
		const cell = fc.constantFrom(
			'0',
			'1',
			'2',
			'-1',
			'1e300',
			'-1e300',
			'NaN',
			'',
			'x',
			'12:00:01',
			'5,5',
			'1e-300'
		);
		fc.assert(
			fc.property(
				kinds,
				fc.array(fc.tuple(cell, cell, cell, cell), { minLength: 1, maxLength: 40 }),
				(kind, rows) =>
					expectSane(
						analyseText(
							['time [s],speed [rpm],torque [Nm],fuel flow [kg/h]', ...rows.map((row) => row.join(','))].join(
								'\n'
							),
							{ kind }
						)
					)
			),
			{ numRuns: 400 }
		);
	});
});

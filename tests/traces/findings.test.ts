import { describe, expect, it } from 'vitest';
import { analyseFile } from '../../src/lib/domain/analysis';
import type { Rule } from '../../src/lib/domain/model';
import { bytesOf, contextOf, readyFile, truthOf, warnings } from './traces';

const near = (span: readonly [number, number] | undefined, at: number) =>
	span !== undefined && span[0] - 0.05 <= at && at <= span[1] + 0.05;

describe('sweep-dirty.csv', () => {
	const analysed = readyFile('sweep-dirty.csv');
	const finding = (code: string) => analysed.findings.find((entry) => entry.code === code);

	it('reports the gap near 18 s', () => expect(near(finding('gap')?.spans[0], 18)).toBe(true));
	it('reports the repeated stamp near 6 s', () =>
		expect(near(finding('repeated_stamp')?.spans[0], 6)).toBe(true));
	it('reports the torque spike near 24 s', () => {
		expect(finding('spike')?.channel).toBe('torque');
		expect(finding('spike')?.spans).toEqual([[24, 24]]);
	});
	it('reports the oil pressure stuck after 14 s', () => {
		expect(finding('stuck')?.channel).toBe('oil_pressure');
		expect(finding('stuck')?.spans[0]?.[0]).toBeCloseTo(14, 1);
	});
	it('reports the missing marks of the air flow with their count', () => {
		expect(finding('missing_marks')?.channel).toBe('air_flow');
		expect(finding('missing_marks')?.message).toMatch(/24 × “-9999”/);
	});
	it('reports the last row as cut short, with its number', () =>
		expect(finding('cut_row')?.message).toMatch(/row 2222/));
	it('reports each once and nothing else', () =>
		expect(
			warnings(analysed)
				.map(({ code }) => code)
				.sort()
		).toEqual(['cut_row', 'gap', 'missing_marks', 'repeated_stamp', 'spike', 'stuck'].sort()));
	it('keeps the spike for limits and beside the figure', () => {
		expect(analysed.metrics['raw_max_torque']?.value).toBeGreaterThan(1800);
		const rule: Rule = {
			title: 'Torque',
			subject: { channel: 'torque' },
			relation: 'at_most',
			limit: 400,
			holdS: 0,
			severity: 'breach'
		};
		expect(readyFile('sweep-dirty.csv', { rules: [rule] }).flags[0]?.worst.at).toBeCloseTo(24, 2);
	});
});

describe('wrong-unit.csv', () => {
	const analysed = readyFile('wrong-unit.csv');

	it('has exactly its two findings', () =>
		expect(warnings(analysed).map(({ code }) => code)).toEqual(['bte_implausible', 'lambda_disagrees']));
	it('names the unit that would make the efficiency plausible', () =>
		expect(analysed.findings.find(({ code }) => code === 'bte_implausible')?.message).toMatch(
			/were in kg\/h instead of lb\/h/
		));
	it('is plausible once a map says so', () => {
		const map = [
			['time', 's'],
			['speed', 'rpm'],
			['torque', 'Nm'],
			['fuel_flow', 'kg/h'],
			['air_flow', 'kg/h'],
			['lambda_sensor', '-']
		].map(([channel, unit], index) => ({ index, channel: channel!, unit: unit! }));
		expect(warnings(readyFile('wrong-unit.csv', { map }))).toEqual([]);
	});
});

describe('energy-flow-limit.csv', () => {
	const truth = truthOf('energy-flow-limit.csv');
	const { over, table, hold_s: holdS } = truth.limit!;
	const rule: Rule = {
		title: 'Fuel energy flow',
		subject: { channel: 'fuel_energy_flow' },
		relation: 'at_most',
		limit: { over, table },
		holdS,
		severity: 'breach'
	};
	const { flags } = readyFile('energy-flow-limit.csv', { rules: [rule] });

	it('flags exactly the two spans, within 0.1 s', () => {
		expect(flags).toHaveLength(1);
		const spans = flags[0]!.spans;
		expect(spans).toHaveLength(truth.expected_spans_s!.length);
		truth.expected_spans_s!.forEach(([from, to], at) => {
			expect(Math.abs(spans[at]![0] - from)).toBeLessThanOrEqual(0.1);
			expect(Math.abs(spans[at]![1] - to)).toBeLessThanOrEqual(0.1);
		});
	});
	it('tells the worst as 3 % over', () =>
		expect((flags[0]!.worst.ratio! - 1) * 100).toBeCloseTo(truth.worst_over_limit_pct!, 1));
	it('flags the short span too where no time of holding is asked', () => {
		const strict = readyFile('energy-flow-limit.csv', { rules: [{ ...rule, holdS: 0 }] }).flags[0]!;
		const [from, to] = truth.not_a_flag![0]!;
		expect(strict.spans.some((span) => span[0] >= from - 0.05 && span[1] <= to + 0.05)).toBe(true);
	});
});

describe('files that are no trace', () => {
	it.each([
		['broken-binary.csv', /binary.*CSV/],
		['broken-empty.csv', /empty.*export/i],
		['broken-header-only.csv', /header .*no rows/],
		['broken-no-time.csv', /no time column.*“speed \[rpm\]”.*table of points/],
		['broken-page.csv', /web page/],
		['broken-text-in-numbers.csv', /“speed \[rpm\]” reads “x0” in row 2/]
	])('%s is refused with a sentence that helps', (file, sentence) => {
		const analysed = analyseFile(bytesOf(file), contextOf(file), { name: file });
		expect(analysed.state).toBe('refused');
		expect(analysed.state === 'refused' && analysed.error).toMatch(sentence);
	});

	it.each(['steady_points', 'free_log', 'endurance', 'motoring'] as const)(
		'no time column is refused for %s',
		(kind) => {
			expect(
				analyseFile(bytesOf('broken-no-time.csv'), contextOf('broken-no-time.csv', { kind }), { name: 'x' })
					.state
			).toBe('refused');
		}
	);

	it('no time column is right for a table of points', () => {
		const analysed = analyseFile(
			bytesOf('broken-no-time.csv'),
			contextOf('broken-no-time.csv', { kind: 'point_table' }),
			{ name: 'x' }
		);
		expect(analysed.state).toBe('ready');
		expect(analysed.state === 'ready' && analysed.points).toHaveLength(200);
		expect(analysed.state === 'ready' && analysed.sampleRateHz).toBeNull();
	});
});

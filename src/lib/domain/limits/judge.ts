import { channelOf } from '../channels/catalogue';
import { labelOf } from '../display/labels';
import type {
	Finding,
	Flag,
	FuelFacts,
	FuelPropertyName,
	Metrics,
	Relation,
	Rule,
	RuleLimit,
	RunContext
} from '../model';
import { atS, figure } from '../trace/spans';
import { columnOf, type Trace } from '../trace/trace';
import { evaluateExpression, parseExpression } from './expression';
import { spansOver } from './spans-over';

const DEFAULT_MERGE_GAP_S = 0.1;

export interface Judged {
	flags: Flag[];
	findings: Finding[];
}

/** A rule's subject over the trace, or why there is none. */
type Subject = { values: Float64Array; name: string; unit: string } | { reason: string };

type Table = readonly (readonly [x: number, y: number])[];

/** Straight lines between the points of a limit table, held constant past its ends; points in any order. */
function limitOver(table: Table): (x: number) => number {
	const points = [...table].sort((a, b) => a[0] - b[0]);
	const [first, last] = [points[0], points.at(-1)];
	if (!first || !last) return () => NaN;
	return (x) => {
		if (!(x > first[0])) return Number.isNaN(x) ? NaN : first[1];
		if (x >= last[0]) return last[1];
		let k = 1;
		while (points[k]![0] < x) k++;
		const [x0, y0] = points[k - 1]!;
		const [x1, y1] = points[k]!;
		return y0 + ((x - x0) / (x1 - x0)) * (y1 - y0);
	};
}

/** The limit of a table at one value of its axis: straight lines between the points, held constant past the ends. */
export const tableValue = (table: Table, x: number): number => limitOver(table)(x);

interface Bounds {
	lo: number;
	hi: number;
}

/** A rule's allowed range as a function of its table's axis; null where relation and form of the limit do not go together. */
function boundsOf(relation: Relation, limit: RuleLimit): ((over: number) => Bounds) | null {
	if (Array.isArray(limit)) {
		const fixed = { lo: Math.min(...limit), hi: Math.max(...limit) };
		return relation === 'between' ? () => fixed : null;
	}
	if (relation === 'between') return null;
	const one = (value: number): Bounds =>
		relation === 'at_most' ? { lo: -Infinity, hi: value } : { lo: value, hi: Infinity };
	if (typeof limit === 'number') {
		const fixed = one(limit);
		return () => fixed;
	}
	const value = limitOver(limit.table);
	return (over) => one(value(over));
}

function subjectOf(rule: Rule, trace: Trace): Subject {
	const { subject } = rule;
	if ('channel' in subject) {
		const column = columnOf(trace, subject.channel);
		return column
			? { values: column.values, name: column.code, unit: column.unit }
			: { reason: `the trace has no channel ${subject.channel}` };
	}
	if (!('expression' in subject)) return { reason: 'its subject is not a channel' };
	const parsed = parseExpression(subject.expression);
	if (!parsed.ok) return { reason: parsed.error.replace(/\.$/, '') };
	const channels = new Map<string, Float64Array>();
	for (const code of parsed.channels) {
		const values = code === 'time' ? trace.time : columnOf(trace, code)?.values;
		if (!values) return { reason: `the trace has no channel ${code}` };
		channels.set(code, values);
	}
	return {
		values: evaluateExpression(parsed.node, channels, trace.rows),
		name: subject.expression,
		unit: ''
	};
}

interface Worst {
	value: number;
	limit: number;
	row: number;
	excess: number;
}

/** How far a value is outside, as a share of the limit where that has a meaning. */
function excessOf(value: number, { lo, hi }: Bounds): { limit: number; excess: number } | null {
	const limit = value > hi ? hi : value < lo ? lo : null;
	if (limit === null) return null;
	const distance = Math.abs(value - limit);
	return { limit, excess: limit === 0 ? distance * 1e6 : distance / Math.abs(limit) };
}

const ratioOf = (value: number, limit: number) => (limit === 0 ? null : value / limit);

function sentence(
	rule: Rule,
	name: string,
	unit: string,
	worst: Worst,
	spans: number,
	totalS: number | null,
	at: number | null
): string {
	const side = worst.value > worst.limit ? 'above' : 'below';
	const ratio = ratioOf(worst.value, worst.limit);
	const share = ratio === null ? '' : ` (${ratio.toFixed(3)} times)`;
	const how =
		totalS === null
			? `${name} is ${figure(worst.value)}${unit && ` ${unit}`}, ${side} the limit of ${figure(worst.limit)}${share}`
			: `${name} was ${side} its limit ${spans === 1 ? 'once' : `in ${spans} stretches`} for ${figure(totalS)} s in all; worst ${figure(worst.value)}${unit && ` ${unit}`} against ${figure(worst.limit)}${share}`;
	return `${rule.title}: ${how}${at === null ? '' : ` at ${atS(at)}`}.`;
}

function judgeTrace(rule: Rule, trace: Trace): Flag | null | { reason: string } {
	const subject = subjectOf(rule, trace);
	if ('reason' in subject) return subject;
	const { limit } = rule;
	const over = typeof limit === 'object' && !Array.isArray(limit) ? limit.over : null;
	const axis = over === null ? null : over === 'time' ? trace.time : columnOf(trace, over)?.values;
	if (over !== null && !axis)
		return { reason: `the trace has no channel ${over}, over which the limit is given` };
	const bounds = boundsOf(rule.relation, limit);
	if (!bounds) return { reason: `a limit of this form does not go with “${rule.relation}”` };
	const at = (row: number) => bounds(axis ? axis[row]! : NaN);
	const state = new Int8Array(trace.rows).fill(-1);
	let known = 0;
	for (let row = 0; row < trace.rows; row++) {
		const value = subject.values[row]!;
		const { lo, hi } = at(row);
		if (Number.isNaN(value) || Number.isNaN(lo) || Number.isNaN(hi)) continue;
		known++;
		state[row] = value > hi || value < lo ? 1 : 0;
	}
	if (known === 0) return { reason: `${subject.name} has no known value in this trace` };
	const time = trace.time ?? Float64Array.from({ length: trace.rows }, (_, row) => row);
	const hold = trace.time ? rule.holdS : 0;
	const gap = trace.time ? (rule.mergeGapS ?? DEFAULT_MERGE_GAP_S) : 0;
	const { spans, ranges } = spansOver(time, state, hold, gap);
	if (spans.length === 0) return null;
	let worst: Worst | null = null;
	for (const [from, to] of ranges)
		for (let row = from; row < to; row++) {
			if (state[row] !== 1) continue;
			const value = subject.values[row]!;
			const outside = excessOf(value, at(row))!;
			if (worst === null || outside.excess > worst.excess) worst = { value, row, ...outside };
		}
	const total = trace.time ? spans.reduce((sum, [from, to]) => sum + to - from, 0) : 0;
	const when = trace.time ? trace.time[worst!.row]! : null;
	return {
		rule: rule.title,
		severity: rule.severity,
		spans: trace.time ? spans : [],
		worst: {
			value: worst!.value,
			limit: worst!.limit,
			unit: subject.unit,
			at: when,
			ratio: ratioOf(worst!.value, worst!.limit)
		},
		totalS: total,
		message: sentence(rule, subject.name, subject.unit, worst!, spans.length, trace.time ? total : null, when)
	};
}

/** A figure or a property of the fuel against its limit: one value, no spans. */
function judgeValue(
	rule: Rule,
	name: string,
	unit: string,
	value: number,
	over: number,
	at: number | null
): Flag | null | { reason: string } {
	const range = boundsOf(rule.relation, rule.limit)?.(over);
	if (!range) return { reason: `a limit of this form does not go with “${rule.relation}”` };
	if (Number.isNaN(range.lo) || Number.isNaN(range.hi))
		return { reason: 'its limit is given over a channel that the figure has no value of' };
	const outside = excessOf(value, range);
	if (!outside) return null;
	const worst = { value, row: 0, ...outside };
	return {
		rule: rule.title,
		severity: rule.severity,
		spans: [],
		worst: { value, limit: outside.limit, unit, at, ratio: ratioOf(value, outside.limit) },
		totalS: 0,
		message: sentence(rule, name, unit, worst, 0, null, at)
	};
}

function judgeFuelProperty(rule: Rule, value: number): Flag | null | { reason: string } {
	const { label, unit } = labelOf('fuel' in rule.subject ? rule.subject.fuel : '');
	return judgeValue(rule, label, unit, value, NaN, null);
}

function judgeRule(
	rule: Rule,
	trace: Trace,
	metrics: Metrics,
	context: RunContext
): Flag | null | { reason: string } {
	const { subject, limit } = rule;
	const axis = typeof limit === 'object' && !Array.isArray(limit) ? limit.over : null;
	if ('metric' in subject) {
		const metric = metrics[subject.metric];
		if (!metric) return { reason: `the run has no figure ${subject.metric}` };
		if (metric.outsideRange) return { reason: `${subject.metric} is outside its method's range` };
		const place = metric.at as Record<string, number> | null;
		return judgeValue(
			rule,
			subject.metric,
			metric.unit === '-' ? '' : metric.unit,
			metric.value,
			axis === null ? 0 : (place?.[axis] ?? NaN),
			metric.at?.time ?? null
		);
	}
	if ('fuel' in subject) {
		const property = (context.fuel as Record<string, { value: number } | undefined>)[subject.fuel];
		if (!property) return { reason: `the fuel batch states no “${labelOf(subject.fuel).label}”` };
		return judgeFuelProperty(rule, property.value);
	}
	return judgeTrace(rule, trace);
}

/**
 * Judges a run against its rules: channels and expressions on every sample (spikes included), figures, properties of the fuel.
 *
 * @returns a flag for each rule that was crossed; a finding for each that could not be judged, never silence
 */
export function judge(trace: Trace, metrics: Metrics, context: RunContext): Judged {
	const flags: Flag[] = [];
	const findings: Finding[] = [];
	for (const rule of context.rules) {
		const outcome = judgeRule(rule, trace, metrics, context);
		if (outcome === null) continue;
		if ('reason' in outcome)
			findings.push({
				code: 'rule_not_judged',
				severity: 'info',
				message: `The rule “${rule.title}” could not be judged: ${outcome.reason}.`,
				spans: [],
				channel:
					'channel' in rule.subject && channelOf(rule.subject.channel) ? rule.subject.channel : undefined
			});
		else flags.push(outcome);
	}
	return { flags, findings };
}

/** Judges a fuel batch by itself against those rules that speak of the fuel. @returns a flag for each that it crosses */
export function judgeFuel(rules: readonly Rule[], fuel: FuelFacts): Flag[] {
	return rules.flatMap((rule) => {
		const property = 'fuel' in rule.subject ? fuel[rule.subject.fuel as FuelPropertyName] : undefined;
		const outcome = property ? judgeFuelProperty(rule, property.value) : null;
		return outcome && !('reason' in outcome) ? [outcome] : [];
	});
}

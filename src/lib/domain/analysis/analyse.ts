import { channelOf } from '../channels/catalogue';
import { readTable, type ReadTable } from '../import/read-table';
import type { ChannelInfo, Curve, Finding, Flag, Metrics, Point, RunContext } from '../model';
import { judge } from '../limits/judge';
import { reduce } from '../reduction/reduce';
import { applyMap } from '../trace/apply-map';
import { checkMap, type MappedColumn } from '../trace/check-map';
import { importFindings } from '../trace/import-findings';
import { missingNeeds, proposeMap, toMap, type ProposedColumn } from '../trace/propose-map';
import { checkSamples } from '../trace/quality';
import { channelInfo, type Trace } from '../trace/trace';
import { throughGear } from '../trace/through-gear';
import { withDerived } from '../trace/with-derived';
import { contextFindings } from './context-findings';
import { figureFindings } from './figure-findings';
import { askSentence, needSentence, uncertainFindings } from './questions';

/** Changes with any formula, default or method below it, so that figures made by an older one are known as stale. */
export const METHOD_VERSION = 'trace-to-figures.1';

export type AnalysedFile =
	| {
			state: 'ready';
			trace: Trace;
			channels: ChannelInfo[];
			rows: number;
			/** Null for a table of points. */
			sampleRateHz: number | null;
			findings: Finding[];
			metrics: Metrics;
			points: Point[];
			curve: Curve;
			flags: Flag[];
	  }
	| { state: 'needs_map'; error: string; proposal: ProposedColumn[] }
	| { state: 'refused'; error: string };

/** A trace with fewer rows than this cannot be reduced. */
const LEAST_ROWS = 2;

const SEVERITY = { error: 0, warning: 1, info: 2 } as const;

/** Which map holds: the person's, else the proposal where nothing needed is uncertain. */
function chooseMap(
	read: ReadTable,
	context: RunContext
):
	| { ok: true; columns: MappedColumn[]; proposal: ProposedColumn[] }
	| Exclude<AnalysedFile, { state: 'ready' }> {
	const { table } = read;
	const proposal = proposeMap(table, context.kind);
	if (table.columns.every((column) => column.numbers === 0))
		return { state: 'refused', error: needSentence([], table, context.kind) };
	if (!context.map) {
		const possible = proposal.map((column) => (column.guess !== null ? column.guess : null));
		const numeric = new Set(
			table.columns.filter((column) => column.numbers > 0).map((column) => column.index)
		);
		const missing = missingNeeds(
			possible.filter((_, at) => numeric.has(proposal[at]!.index)),
			context.kind
		);
		if (missing.length > 0) {
			const error = needSentence(missing, table, context.kind);
			// A clock cannot be named where no column could be one; anything else a person may still point out.
			const hopeless =
				missing.some((choice) => choice.includes('time')) ||
				missing.some((choice) =>
					proposal.some(({ guess, index }) => guess !== null && choice.includes(guess) && !numeric.has(index))
				);
			return hopeless ? { state: 'refused', error } : { state: 'needs_map', error, proposal };
		}
		const asked = proposal.filter((column) => column.ask);
		if (asked.length > 0) return { state: 'needs_map', error: askSentence(asked), proposal };
	}
	const map = context.map ?? toMap(proposal);
	const checked = checkMap(table, map);
	if (!checked.ok) return { state: 'needs_map', error: checked.error, proposal };
	const missing = missingNeeds(
		checked.columns.map((column) => column.channel),
		context.kind
	);
	if (missing.length > 0)
		return { state: 'needs_map', error: needSentence(missing, table, context.kind, true), proposal };
	return { ok: true, columns: checked.columns, proposal };
}

function withConfidence(trace: Trace, proposal: readonly ProposedColumn[], byPerson: boolean): void {
	const found = new Map(proposal.map((column) => [column.index, column.confidence]));
	for (const column of trace.columns)
		if (column.index !== null) column.confidence = byPerson ? 1 : (found.get(column.index) ?? 0);
}

/**
 * From a file's bytes to figures: read, map, check, reduce, judge. Pure: the same bytes and context give the same answer.
 *
 * @param bytes the file as uploaded
 * @param context the run's kind, engine, cell, fuel, ambient, correction, settings, rules and, where a person made one, channel map
 * @param _file its name; the answer does not depend on it
 * @returns `ready` with everything, `needs_map` with a question, or `refused` with what is wrong and what to do
 */
export function analyseFile(bytes: Uint8Array, context: RunContext, _file: { name: string }): AnalysedFile {
	const read = readTable(bytes);
	if (!read.ok) return { state: 'refused', error: read.error };
	if (read.table.rows < LEAST_ROWS && context.kind !== 'point_table')
		return {
			state: 'refused',
			error:
				'The file holds a single row of samples; a trace needs more. Check that the recording ran, export it again and upload that file.'
		};
	const chosen = chooseMap(read, context);
	if (!('ok' in chosen)) return chosen;
	const applied = applyMap(read.table, chosen.columns, context.ambient);
	if (applied.trace.rows < LEAST_ROWS && applied.trace.time)
		return {
			state: 'refused',
			error:
				'No two rows have a readable time stamp, so there is no trace. Check the time column and export the file again.'
		};
	withConfidence(applied.trace, chosen.proposal, context.map !== undefined);
	const samples = checkSamples(applied.trace);
	const geared = throughGear(applied.trace, context.cell);
	const { trace, findings: derivedFindings } = withDerived(geared.trace, context);
	const reduced = reduce(trace, samples.spikes, applied.medianStepS, context);
	const judged = judge(trace, reduced.metrics, context);
	const findings = [
		...applied.findings,
		...importFindings(read, chosen.columns),
		...(context.map ? [] : uncertainFindings(chosen.proposal)),
		...samples.findings,
		...geared.findings,
		...derivedFindings,
		...figureFindings(trace, reduced, samples.spikes, context),
		...contextFindings(trace, context),
		...reduced.findings,
		...judged.findings
	].sort((a, b) => SEVERITY[a.severity] - SEVERITY[b.severity]);
	return {
		state: 'ready',
		trace,
		channels: [...timeChannel(chosen.columns), ...trace.columns.map(channelInfo)],
		rows: trace.rows,
		sampleRateHz: applied.medianStepS > 0 ? 1 / applied.medianStepS : null,
		findings,
		metrics: reduced.metrics,
		points: reduced.points,
		curve: reduced.curve,
		flags: judged.flags
	};
}

function timeChannel(columns: readonly MappedColumn[]): ChannelInfo[] {
	const clock = columns.find((column) => column.channel === 'time');
	if (!clock) return [];
	return [
		{
			code: 'time',
			header: clock.source.header,
			unit: channelOf('time')?.unit ?? 's',
			sourceUnit: clock.unitText,
			confidence: 1
		}
	];
}

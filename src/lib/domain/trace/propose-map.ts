import { channelOf, splitCode } from '../channels/catalogue';
import { classifyHeader } from '../channels/classify';
import { splitHeader } from '../channels/split-header';
import type { Table, TableColumn } from '../import/table';
import { forwardShare, medianStep, timeUnitBySize } from '../import/time';
import type { ColumnMap, RunKind } from '../model';
import { parseUnit } from '../units/parse';

/** From here on a header is taken at its word. */
export const SURE = 0.8;
/** From here on a header that figures could use is worth a question. */
const LIKELY = 0.5;

export interface ProposedColumn {
	index: number;
	header: string;
	/** Unit as found in the file. */
	unit: string | null;
	/** Canonical code that the header suggests; null where nothing fits. */
	guess: string | null;
	confidence: number;
	reasons: string[];
	/** A person must say what this column is before the figures can be made. */
	ask: boolean;
	/** First values, as numbers in the file's own unit. */
	sample: (number | null)[];
}

const FLOWS = ['fuel_flow', 'fuel_flow_volume', 'air_flow', 'air_flow_volume'];
/** Channels that figures of power, consumption and mixture stand on. */
const FIGURES = ['time', 'speed', 'torque', ...FLOWS, 'electrical_power'];

/** What a kind of run cannot do without: each line needs one of its channels. */
const NEEDS: Record<RunKind, readonly (readonly string[])[]> = {
	power_sweep: [['time'], ['speed'], ['torque', 'power']],
	steady_points: [['time'], ['speed'], ['torque', 'power']],
	motoring: [['time'], ['speed'], ['torque', 'power']],
	endurance: [['time']],
	free_log: [['time']],
	point_table: [['torque', 'power']]
};

function sampleOf(column: TableColumn): (number | null)[] {
	return Array.from(column.values.subarray(0, 5), (value) => (Number.isNaN(value) ? null : value));
}

function proposeColumn(column: TableColumn): ProposedColumn {
	const { name, unit: written } = splitHeader(column.header);
	const unit = written ?? column.unitCell;
	const { code, confidence, reasons } = classifyHeader(name, unit);
	const proposed: ProposedColumn = {
		index: column.index,
		header: column.header,
		unit,
		guess: code,
		confidence,
		reasons: [...reasons],
		ask: false,
		sample: sampleOf(column)
	};
	if (column.form !== 'number') return { ...proposed, guess: 'time', confidence: 0.95, unit: 's' };
	if (column.numbers === 0)
		return { ...proposed, confidence: 0, reasons: [...reasons, 'The column holds text, not numbers.'] };
	if (code === 'time') return withTimeUnit(proposed, column);
	// `t [ms]` says no more than its unit; that it goes forward at every row says the rest.
	if (parseUnit(unit)?.dimension === 'time' && forwardShare(column.values) > 0.98)
		return {
			...proposed,
			guess: 'time',
			confidence: 0.9,
			reasons: ['Its unit is one of time, and it goes forward.']
		};
	return proposed;
}

/** A clock without a unit is sure only where the size of its numbers leaves one reading. */
function withTimeUnit(proposed: ProposedColumn, column: TableColumn): ProposedColumn {
	const unit = parseUnit(proposed.unit);
	if (unit?.dimension === 'time') return proposed;
	const bySize = proposed.unit === null ? timeUnitBySize(column.values) : null;
	if (bySize)
		return {
			...proposed,
			unit: bySize.unit,
			reasons: [...proposed.reasons, `Its numbers can only count in ${bySize.unit}.`]
		};
	return {
		...proposed,
		confidence: Math.min(proposed.confidence, 0.6),
		reasons: [...proposed.reasons, 'The header does not say in what unit the time is.']
	};
}

/** Of several clocks the one that goes forward at every row is the trace's; the others stay under their own headers. */
function chooseTime(proposed: ProposedColumn[], table: Table): void {
	const columns = new Map(table.columns.map((column) => [column.index, column]));
	const clocks = proposed.filter((column) => column.guess === 'time');
	const rank = (column: ProposedColumn) => {
		const values = columns.get(column.index)?.values ?? new Float64Array();
		return forwardShare(values) + 0.2 * column.confidence - (Number.isNaN(medianStep(values)) ? 1 : 0);
	};
	const ranked = clocks
		.map((column) => ({ column, rank: rank(column) }))
		.sort((a, b) => b.rank - a.rank || a.column.index - b.column.index);
	for (const { column } of ranked.slice(1)) {
		column.guess = null;
		column.reasons.push('Another column serves better as the clock of the trace.');
	}
	if (ranked.length > 0) return;
	const unnamed = proposed.find((column) => {
		const source = columns.get(column.index);
		return (
			column.confidence < LIKELY &&
			source !== undefined &&
			source.numbers > 2 &&
			forwardShare(source.values) === 1
		);
	});
	if (!unnamed) return;
	Object.assign(unnamed, {
		guess: 'time',
		confidence: 0.3,
		reasons: ['No column is named as time; this one goes forward at every row.']
	});
}

/** Rows of a table of points are no samples of a clock; when each was taken is kept, and orders nothing. */
function leaveTime(proposed: ProposedColumn[]): void {
	for (const column of proposed) if (column.guess === 'time') column.guess = null;
}

function sameValues(a: TableColumn | undefined, b: TableColumn | undefined): boolean {
	return a !== undefined && b !== undefined && a.values.every((value, i) => Object.is(value, b.values[i]));
}

/** Several columns for one channel: numbered where a channel may occur often, else the surer one, else a question. */
function settleDoubles(proposed: ProposedColumn[], table: Table): void {
	const columns = new Map(table.columns.map((column) => [column.index, column]));
	const byCode = new Map<string, ProposedColumn[]>();
	for (const column of proposed)
		if (column.guess !== null && column.guess !== 'time' && column.confidence >= LIKELY)
			byCode.set(column.guess, [...(byCode.get(column.guess) ?? []), column]);
	for (const [code, same] of byCode) {
		if (same.length < 2) continue;
		const [first, ...rest] = same.sort((a, b) => b.confidence - a.confidence || a.index - b.index) as [
			ProposedColumn,
			...ProposedColumn[]
		];
		if (channelOf(code)?.indexable && !FLOWS.includes(code) && splitCode(code).index === null) {
			[...same]
				.sort((a, b) => a.index - b.index)
				.forEach((column, at) => (column.guess = `${code}.${at + 1}`));
			continue;
		}
		const clear =
			first.confidence >= SURE &&
			rest.every(
				(other) => other.confidence < SURE || sameValues(columns.get(first.index), columns.get(other.index))
			);
		for (const other of rest) other.reasons.push(`The column “${first.header}” is taken for ${code}.`);
		if (clear) for (const other of rest) other.guess = null;
		else
			for (const column of same) {
				column.confidence = Math.min(column.confidence, 0.4);
				column.reasons.push(`${same.length} columns could be ${code}.`);
			}
	}
}

const hasSure = (proposed: readonly ProposedColumn[], code: string) =>
	proposed.some(
		(column) => column.guess !== null && splitCode(column.guess).base === code && column.confidence >= SURE
	);

/** Marks the columns that must be asked about: needed for this kind's figures, and not certain. */
function markQuestions(proposed: ProposedColumn[], kind: RunKind): void {
	for (const choice of NEEDS[kind]) {
		if (choice.some((code) => hasSure(proposed, code))) continue;
		for (const column of proposed)
			if (column.guess !== null && choice.includes(splitCode(column.guess).base)) column.ask = true;
	}
	for (const column of proposed) {
		if (column.guess === null || column.confidence >= SURE) continue;
		const { base } = splitCode(column.guess);
		const twins = base.endsWith('_volume') ? [base, base.slice(0, -'_volume'.length)] : [base];
		const wanted = FIGURES.includes(base) && (kind !== 'point_table' || base !== 'time');
		const doubled = column.reasons.some((reason) => reason.includes('columns could be'));
		if (wanted && (column.confidence >= LIKELY || doubled) && !twins.some((code) => hasSure(proposed, code)))
			column.ask = true;
	}
}

/**
 * Proposes what each column is, with how sure it is.
 *
 * @param kind of run: decides which columns its figures need
 * @returns one entry per column; `ask` is set on those that are needed and not certain
 */
export function proposeMap(table: Table, kind: RunKind): ProposedColumn[] {
	const proposed = table.columns.map(proposeColumn);
	if (kind === 'point_table') leaveTime(proposed);
	else chooseTime(proposed, table);
	settleDoubles(proposed, table);
	markQuestions(proposed, kind);
	return proposed;
}

/** Channels of which this kind needs one and the codes offer none; empty when all is there. */
export function missingNeeds(codes: readonly (string | null)[], kind: RunKind): (readonly string[])[] {
	const bases = new Set(codes.map((code) => (code === null ? null : splitCode(code).base)));
	return NEEDS[kind].filter((choice) => !choice.some((code) => bases.has(code)));
}

/** The proposal as a map: what is sure under its channel, all else under its own header. */
export function toMap(proposed: readonly ProposedColumn[]): ColumnMap[] {
	return proposed.map(({ index, guess, confidence, unit }) => ({
		index,
		channel: confidence >= SURE ? guess : null,
		unit
	}));
}

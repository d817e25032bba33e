import type { Table } from '../import/table';
import type { Finding, RunKind } from '../model';
import { SURE, type ProposedColumn } from '../trace/propose-map';

const KIND: Record<RunKind, string> = {
	power_sweep: 'a power sweep',
	steady_points: 'a run of steady points',
	point_table: 'a table of points',
	motoring: 'a motoring run',
	endurance: 'an endurance run',
	free_log: 'a free log'
};

const quoted = (names: readonly string[]) => names.map((name) => `“${name}”`).join(', ');

/** Columns whose name promises something that a kind needs, but which hold text. */
function textSentence(table: Table): string {
	const texts = table.columns.filter((column) => column.numbers === 0 && column.firstText);
	if (texts.length === 0) return '';
	const examples = texts
		.slice(0, 3)
		.map((column) => `“${column.header}” reads “${column.firstText!.cell}” in row ${column.firstText!.row}`);
	return ` ${examples.join('; ')}: text where numbers belong. Check the export's number format and columns.`;
}

/**
 * Why a file cannot be reduced as this kind of run: which channels are not there, and what to do.
 *
 * @param byMap the columns are there, but the map in force gives none of them these channels
 */
export function needSentence(
	missing: readonly (readonly string[])[],
	table: Table,
	kind: RunKind,
	byMap = false
): string {
	const wanted = missing.map((choice) => choice.join(' or ')).join(', ');
	const headers = quoted(table.columns.slice(0, 12).map((column) => column.header));
	if (missing.length === 0) return `No column of the file holds numbers.${textSentence(table)}`;
	if (byMap)
		return `The channel map names no column as ${wanted}, which ${KIND[kind]} needs. The file has ${headers}.`;
	if (missing.some((choice) => choice.includes('time')))
		return `The file has no time column, which ${KIND[kind]} needs; it has ${headers}. Export it with its time column, or, where each row is a stabilised point, make the run a table of points.`;
	return `No column of the file is ${wanted}, which ${KIND[kind]} needs; it has ${headers}.${textSentence(table) || ' Say which column it is in the channel map, or export the file with it.'}`;
}

/** The reason that speaks against taking the header at its word; that name and unit agree does not. */
function tellingReason(reasons: readonly string[]): string | undefined {
	return reasons.find((reason) => !/^Name and unit/.test(reason)) ?? reasons[0];
}

/** The question that leaves a trace waiting: which columns are needed and not certain, and why. */
export function askSentence(asked: readonly ProposedColumn[]): string {
	const parts = asked.slice(0, 4).map(({ header, guess, reasons }) => {
		const reason = tellingReason(reasons);
		return `“${header}” may be ${guess ?? 'unknown'}${reason ? ` (${reason.replace(/\.$/, '')})` : ''}`;
	});
	const more = asked.length > 4 ? ` and ${asked.length - 4} more` : '';
	return `The figures need ${asked.length === 1 ? 'a column that is not certain' : 'columns that are not certain'}: ${parts.join('; ')}${more}. Say in the channel map what each column is and in which unit.`;
}

/** Columns kept under their own headers although the header suggested something: told, not guessed. */
export function uncertainFindings(proposal: readonly ProposedColumn[]): Finding[] {
	return proposal
		.filter(({ guess, confidence }) => guess !== null && confidence < SURE && confidence > 0)
		.map(({ header, guess, reasons }) => ({
			code: 'column_uncertain',
			severity: 'info',
			message:
				`“${header}” is kept under its own header; it may be ${guess}. ${tellingReason(reasons) ?? ''}`.trim(),
			spans: [],
			channel: header
		}));
}

import { labelOf } from '$lib/domain/display/labels';
import type { Principal } from '../access';
import { csvResponse, unitHead, type CsvCell } from '../csv';
import type { Deps } from '../deps';
import { LISTED, listRuns, type RunListQuery } from './list';

const PAGE_ROWS = 500;

/** All runs of a list as a table, in its order and with its figures. */
export async function runsCsv(
	deps: Deps,
	who: Principal,
	query: Omit<RunListQuery, 'limit' | 'cursor'>
): Promise<Response> {
	return csvResponse('runs.csv', pages(deps, who, query));
}

async function* pages(
	deps: Deps,
	who: Principal,
	query: Omit<RunListQuery, 'limit' | 'cursor'>
): AsyncGenerator<CsvCell[][]> {
	const codes = query.metrics ?? LISTED;
	let head: CsvCell[][] = [
		[
			'run',
			'client',
			'engine',
			'build',
			'build_title',
			'cell',
			'batch',
			'kind',
			'state',
			'flags',
			'started_at',
			'logged_by',
			...codes.map((code) => unitHead(code, storedUnit(code)))
		]
	];
	let cursor: string | undefined;
	do {
		const page = await listRuns(deps, who, { ...query, limit: PAGE_ROWS, cursor });
		yield [
			...head,
			...page.items.map((run) => [
				run.number,
				run.client,
				run.engine,
				run.build,
				run.buildTitle,
				run.cell,
				run.fuelBatch,
				run.kind,
				run.state,
				run.flags,
				new Date(run.startedAt).toISOString(),
				run.loggedBy,
				...codes.map((code) => run.metrics[code] ?? null)
			])
		];
		head = [];
		cursor = page.nextCursor ?? undefined;
	} while (cursor);
}

/** Fractions are given as they are stored, not in per cent. */
function storedUnit(code: string): string {
	const { unit, percent } = labelOf(code);
	return percent ? '' : unit;
}

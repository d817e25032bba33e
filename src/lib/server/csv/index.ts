import Papa from 'papaparse';

export type CsvCell = string | number | null;

/** How a spreadsheet's formula begins, whatever follows: the library's own rule lets one with a line break through. */
const FORMULA = /^[=+\-@\t\r]/;

/** A table as RFC 4180 has it: CRLF, quotes doubled. Text that a spreadsheet would take for a formula gets an apostrophe; numbers are left alone. */
function csvText(rows: readonly (readonly CsvCell[])[]): string {
	if (rows.length === 0) return '';
	return `${Papa.unparse(rows as CsvCell[][], { escapeFormulae: FORMULA, newline: '\r\n' })}\r\n`;
}

/** `name [unit]`: a column's head that says in what its numbers are; a pure number says 1. */
export const unitHead = (name: string, unit: string | null | undefined): string =>
	`${name} [${!unit || unit === '-' ? '1' : unit === 'rev/min' ? 'rpm' : unit}]`;

/** Whether the caller wants a table of text: by `?format=csv`, which a link can say, or by Accept. */
export function wantsCsv(request: Request, format: 'json' | 'csv' | undefined): boolean {
	if (format) return format === 'csv';
	return /(^|[\s,])text\/csv\b/i.test(request.headers.get('accept') ?? '');
}

/**
 * A table sent page by page as it is read, so that neither memory nor the first byte waits for the whole.
 * The first page is read before the answer begins: a refusal is still an answer then.
 */
export async function csvResponse(
	filename: string,
	pages: AsyncGenerator<readonly (readonly CsvCell[])[], void>
): Promise<Response> {
	const first = await pages.next();
	let text: string | null = first.done ? '' : csvText(first.value);
	const encoder = new TextEncoder();
	const body = new ReadableStream<Uint8Array>({
		async pull(controller) {
			if (text === null) {
				const next = await pages.next();
				if (next.done) return controller.close();
				text = csvText(next.value);
			}
			controller.enqueue(encoder.encode(text));
			text = null;
		},
		async cancel() {
			await pages.return();
		}
	});
	return new Response(body, {
		headers: {
			'content-type': 'text/csv; charset=utf-8; header=present',
			'content-disposition': `attachment; filename="${filename.replace(/[^\w.-]+/g, '-')}"`,
			'cache-control': 'no-store'
		}
	});
}

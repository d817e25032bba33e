import { SENTINELS, OVERFLOW, isMissingMark, readLoose, readNumber } from './numbers';
import type { Dialect } from './dialect';
import type { Layout } from './layout';
import { readClock, type ClockForm } from './time';

export interface TableColumn {
	/** Place in the file, from 0. */
	index: number;
	header: string;
	/** Unit from the unit row, or written behind the numbers; null where neither. */
	unitCell: string | null;
	form: 'number' | ClockForm;
	/** One value per row; NaN where missing. */
	values: Float64Array;
	blanks: number;
	/** Marks for "no value" other than a blank, with how often each was met. */
	missingMarks: Map<string, number>;
	/** Cells that are neither a number nor a mark. */
	texts: number;
	firstText: { row: number; cell: string } | null;
	numbers: number;
}

export interface Table {
	columns: TableColumn[];
	rows: number;
	/** Row of the file (from 1) that each row comes from. */
	rowNumbers: Uint32Array;
	repeatedHeaders: number;
	/** Rows with fewer cells than usual, read as far as they go. */
	shortRows: number;
	firstShortRow: number;
	/** Rows with more cells than there are columns; the surplus is not read. */
	longRows: number;
	firstLongRow: number;
	/** Text rows between or below the data (remarks, min/max/mean, end marks); not samples. */
	textRows: number;
	firstTextRow: number;
	/** The last row was cut short and is left out: its row in the file. */
	cutRow: number | null;
	/** A second table starts here; what follows is not read. */
	secondTableRow: number | null;
	rowsNotRead: number;
}

interface Filling {
	values: Float64Array;
	blanks: number;
	marks: Map<string, number>;
	texts: number;
	firstText: { row: number; cell: string } | null;
	numbers: number;
	suffix: string | null;
	sentinels: Map<number, number>;
	lo: number;
	hi: number;
}

const FOOTER =
	/^(min|max|mean|avg|average|std|stdev|sd|sum|total|minimum|maximum|mittel(wert)?|summe|count|median|end( of.*)?|ende|eof)\b/i;

/**
 * Takes the records of a table in pieces of any size and grows one array of numbers per column. Nothing is dropped
 * without being counted.
 */
export class TableBuilder {
	readonly #layout: Layout;
	readonly #dialect: Dialect;
	readonly #fill: Filling[];
	#capacity: number;
	#rowNumbers: Uint32Array;
	#rows = 0;
	#record = 0;
	#lastWidth = 0;
	#lastRecordIsData = false;
	#afterBlank = false;
	readonly #seen = {
		repeatedHeaders: 0,
		shortRows: 0,
		firstShortRow: 0,
		longRows: 0,
		firstLongRow: 0,
		textRows: 0,
		firstTextRow: 0,
		rowsNotRead: 0
	};
	#secondTableRow: number | null = null;

	/** @param expectedRows about how many rows will come; any number does, a good one saves copying */
	constructor(layout: Layout, dialect: Dialect, expectedRows = 1024) {
		this.#layout = layout;
		this.#dialect = dialect;
		this.#capacity = Math.max(16, Math.ceil(expectedRows));
		this.#rowNumbers = new Uint32Array(this.#capacity);
		this.#fill = layout.headers.map(() => ({
			values: new Float64Array(this.#capacity),
			blanks: 0,
			marks: new Map(),
			texts: 0,
			firstText: null,
			numbers: 0,
			suffix: null,
			sentinels: new Map(),
			lo: Infinity,
			hi: -Infinity
		}));
	}

	/** The next records of the file, in order, from its first record on. */
	addRows(rows: readonly (readonly string[])[]): void {
		for (const row of rows) {
			const record = this.#record++;
			if (record < this.#layout.dataRecord) continue;
			if (
				row.length === 0 ||
				(row.length === 1 && row[0]!.trim() === '') ||
				row.every((cell) => cell.trim() === '')
			) {
				this.#afterBlank = true;
				continue;
			}
			if (this.#secondTableRow !== null) this.#seen.rowsNotRead++;
			else if (!this.#isRemark(row, record + 1)) this.#addRow(row, record + 1);
			this.#afterBlank = false;
		}
	}

	/** A repeated header, a remark, a footer, or the head of a second table: counted, not a sample. */
	#isRemark(row: readonly string[], rowNumber: number): boolean {
		const first = row[0]!;
		const code = first.charCodeAt(0);
		// A row that starts with a digit, a sign or a point is a sample; this is the path of nearly all rows.
		if ((code >= 48 && code <= 57) || code === 45 || code === 46 || code === 43) return false;
		if (
			this.#layout.headRecords.some((head) =>
				head.every((cell, at) => cell.trim() === (row[at] ?? '').trim())
			)
		) {
			this.#seen.repeatedHeaders++;
			return true;
		}
		const cells = row.filter((cell) => cell.trim() !== '');
		const values = cells.filter((cell) => !isMissingMark(cell) && readLoose(cell, this.#dialect.numbers));
		const footer = FOOTER.test(first.trim());
		const textOnly =
			values.length === 0 && cells.some((cell) => !isMissingMark(cell)) && this.#holdsNumbers();
		if (!footer && !(textOnly && this.#layout.forms[0] === 'number')) return false;
		if (this.#afterBlank && !footer && cells.length >= 2 && this.#rows > 0) {
			this.#secondTableRow = rowNumber;
			return true;
		}
		this.#seen.textRows++;
		this.#seen.firstTextRow ||= rowNumber;
		this.#lastRecordIsData = false;
		return true;
	}

	#holdsNumbers(): boolean {
		return this.#fill.some((fill) => fill.numbers > 0) || this.#rows === 0;
	}

	#addRow(row: readonly string[], rowNumber: number): void {
		if (this.#rows === this.#capacity) this.#grow();
		const at = this.#rows++;
		this.#rowNumbers[at] = rowNumber;
		const columns = this.#fill.length;
		for (let column = 0; column < columns; column++) {
			const fill = this.#fill[column]!;
			const cell = row[column];
			if (cell === undefined || cell === '') {
				fill.values[at] = NaN;
				fill.blanks++;
				continue;
			}
			const form = this.#layout.forms[column]!;
			const value = form === 'number' ? readNumber(cell, this.#dialect.numbers) : readClock(cell, form);
			if (value === value) this.#keep(fill, at, value, form);
			else fill.values[at] = this.#unusual(fill, cell, rowNumber, form);
		}
		if (row.length < this.#layout.width) {
			this.#seen.shortRows++;
			this.#seen.firstShortRow ||= rowNumber;
		} else if (row.length > columns && row.slice(columns).some((cell) => cell.trim() !== '')) {
			this.#seen.longRows++;
			this.#seen.firstLongRow ||= rowNumber;
		}
		this.#lastWidth = row.length;
		this.#lastRecordIsData = true;
	}

	#keep(fill: Filling, at: number, value: number, form: 'number' | ClockForm): void {
		if (form === 'number') {
			if (value >= OVERFLOW || value <= -OVERFLOW) {
				fill.marks.set('1E+30', (fill.marks.get('1E+30') ?? 0) + 1);
				fill.values[at] = NaN;
				return;
			}
			if ((value < -998 || value > 9999) && SENTINELS.includes(value)) {
				fill.sentinels.set(value, (fill.sentinels.get(value) ?? 0) + 1);
				fill.values[at] = value;
				return;
			}
		}
		if (value < fill.lo) fill.lo = value;
		if (value > fill.hi) fill.hi = value;
		fill.values[at] = value;
		fill.numbers++;
	}

	#unusual(fill: Filling, cell: string, rowNumber: number, form: 'number' | ClockForm): number {
		const text = cell.trim();
		if (text === '') {
			fill.blanks++;
			return NaN;
		}
		if (isMissingMark(text)) {
			fill.marks.set(text, (fill.marks.get(text) ?? 0) + 1);
			return NaN;
		}
		const loose = form === 'number' ? readLoose(text, this.#dialect.numbers) : null;
		if (loose && (loose.suffix === null || fill.suffix === null || fill.suffix === loose.suffix)) {
			fill.suffix ??= loose.suffix;
			fill.numbers++;
			if (loose.value < fill.lo) fill.lo = loose.value;
			if (loose.value > fill.hi) fill.hi = loose.value;
			return loose.value;
		}
		fill.texts++;
		fill.firstText ??= { row: rowNumber, cell: text.slice(0, 40) };
		return NaN;
	}

	#grow(): void {
		this.#capacity = Math.ceil(this.#capacity * 1.5);
		const rowNumbers = new Uint32Array(this.#capacity);
		rowNumbers.set(this.#rowNumbers);
		this.#rowNumbers = rowNumbers;
		for (const fill of this.#fill) {
			const values = new Float64Array(this.#capacity);
			values.set(fill.values);
			fill.values = values;
		}
	}

	/** The whole table. A last row that ends early is left out and told. */
	finish(): Table {
		let cutRow: number | null = null;
		if (this.#lastRecordIsData && this.#lastWidth < this.#layout.width && this.#rows > 1) {
			this.#rows--;
			this.#forgetLast();
			cutRow = this.#rowNumbers[this.#rows]!;
			this.#seen.shortRows--;
			if (this.#seen.shortRows === 0) this.#seen.firstShortRow = 0;
		}
		const columns = this.#fill.map((fill, index) => this.#column(fill, index));
		return {
			columns: columns.filter((column) => column.numbers + column.texts > 0 || this.#isNamed(column)),
			rows: this.#rows,
			rowNumbers: this.#rowNumbers.subarray(0, this.#rows),
			...this.#seen,
			cutRow,
			secondTableRow: this.#secondTableRow
		};
	}

	/** Takes the cut row out of the counts of its columns. */
	#forgetLast(): void {
		for (const [column, fill] of this.#fill.entries()) {
			if (!Number.isNaN(fill.values[this.#rows]!)) fill.numbers--;
			else if (column >= this.#lastWidth) fill.blanks--;
		}
	}

	/** An unnamed column without any value is the shadow of a trailing delimiter. */
	#isNamed(column: TableColumn): boolean {
		return !/^column \d+$/.test(column.header) || column.missingMarks.size > 0;
	}

	#column(fill: Filling, index: number): TableColumn {
		const values = fill.values.subarray(0, this.#rows);
		const reach = Math.max(fill.hi - fill.lo, 0.1 * Math.abs(fill.hi));
		for (const [sentinel, count] of fill.sentinels) {
			const apart =
				fill.numbers === 0 || sentinel < fill.lo - reach * 0.5 || sentinel > fill.hi + reach * 0.5;
			if (!apart) {
				fill.numbers += count;
				continue;
			}
			fill.marks.set(String(sentinel), count);
			for (let i = 0; i < values.length; i++) if (values[i] === sentinel) values[i] = NaN;
		}
		return {
			index,
			header: this.#layout.headers[index]!,
			unitCell: this.#layout.unitCells[index] ?? fill.suffix,
			form: this.#layout.forms[index]!,
			values,
			blanks: fill.blanks,
			missingMarks: fill.marks,
			texts: fill.texts,
			firstText: fill.firstText,
			numbers: fill.numbers
		};
	}
}

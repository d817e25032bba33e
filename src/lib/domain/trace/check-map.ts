import { channelOf, splitCode } from '../channels/catalogue';
import { splitHeader } from '../channels/split-header';
import type { Table, TableColumn } from '../import/table';
import { timeUnitBySize } from '../import/time';
import type { ColumnMap } from '../model';
import { converter } from '../units/convert';
import { parseUnit, refusedUnit, type Unit } from '../units/parse';

export interface MappedColumn {
	source: TableColumn;
	/** Canonical code; null keeps the column under its own header. */
	channel: string | null;
	/** Unit of the file's numbers; null where it does not matter (own header, no unit). */
	unit: Unit | null;
	/** The unit as the file or the map names it. */
	unitText: string | null;
	reference: 'gauge' | 'absolute' | null;
	delayS: number;
}

export type CheckedMap = { ok: true; columns: MappedColumn[] } | { ok: false; error: string };

const named = (column: TableColumn) => `column ${column.index + 1} (“${column.header}”)`;

function unitOf(entry: ColumnMap | undefined, column: TableColumn): string | null {
	if (entry?.unit != null && entry.unit.trim() !== '') return entry.unit.trim();
	return splitHeader(column.header).unit ?? column.unitCell;
}

function checkColumn(column: TableColumn, entry: ColumnMap | undefined): MappedColumn | string {
	const unitText = column.form === 'number' ? unitOf(entry, column) : 's';
	const unit = parseUnit(unitText);
	const channel = entry?.channel ?? null;
	const mapped: MappedColumn = {
		source: column,
		channel,
		unit,
		unitText,
		reference: entry?.reference ?? unit?.reference ?? null,
		delayS: entry?.delayS ?? 0
	};
	if (!Number.isFinite(mapped.delayS)) return `The delay of ${named(column)} is not a number of seconds.`;
	if (channel === null) return mapped;
	const target = channelOf(channel);
	if (!target)
		return `The map gives ${named(column)} the channel “${channel}”, which is not known. Choose one of the canonical channels, or none to keep the column under its own header.`;
	if (column.numbers === 0)
		return `The map gives ${named(column)} the channel ${channel}, but the column holds no numbers${
			column.firstText ? ` (row ${column.firstText.row} reads “${column.firstText.cell}”)` : ''
		}.`;
	if (unitText !== null && unit === null)
		return (
			refusedUnit(unitText) ??
			`The unit “${unitText}” of ${named(column)} is not known. Give the unit that its numbers are in, for example ${target.unit}.`
		);
	if (unit === null) {
		const bySize = channel === 'time' && unitText === null ? timeUnitBySize(column.values) : null;
		if (bySize) return { ...mapped, unit: parseUnit(bySize.unit), unitText: bySize.unit };
		if (target.dimension === 'ratio') return { ...mapped, unit: parseUnit(target.unit) };
		return `The map gives ${named(column)} no unit; ${channel} needs one, for example ${target.unit}.`;
	}
	const kept = parseUnit(target.unit);
	if (!kept || !converter(unit, kept))
		return `The unit ${unit.unit} of ${named(column)} is no unit of ${channel}, which is kept in ${target.unit}.`;
	if (mapped.reference === 'gauge' && target.dimension !== 'pressure')
		return `The map says gauge for ${named(column)}, but ${channel} is not a pressure.`;
	return mapped;
}

/**
 * Checks a channel map against the file's columns. Columns that the map does not name stay under their own headers.
 *
 * @returns the map with its units read, or one sentence that names the first thing that is wrong with it
 */
export function checkMap(table: Table, map: readonly ColumnMap[]): CheckedMap {
	const byIndex = new Map(table.columns.map((column) => [column.index, column]));
	const entries = new Map<number, ColumnMap>();
	const holders = new Map<string, number>();
	for (const entry of map) {
		const column = byIndex.get(entry.index);
		if (!column) {
			const last = Math.max(...byIndex.keys()) + 1;
			return {
				ok: false,
				error: `The map names column ${entry.index + 1} (index ${entry.index}), but the file has ${last} columns (index 0 to ${last - 1}).`
			};
		}
		if (entries.has(entry.index)) return { ok: false, error: `The map names ${named(column)} twice.` };
		entries.set(entry.index, entry);
		if (entry.channel === null) continue;
		const holder = holders.get(entry.channel);
		if (holder !== undefined)
			return {
				ok: false,
				error: `The map gives two columns the channel ${entry.channel}: ${named(byIndex.get(holder)!)} and ${named(column)}. Give it to one${
					channelOf(entry.channel)?.indexable
						? `, or number them ${splitCode(entry.channel).base}.1 and ${splitCode(entry.channel).base}.2`
						: ''
				}.`
			};
		holders.set(entry.channel, entry.index);
	}
	const columns: MappedColumn[] = [];
	for (const column of table.columns) {
		const checked = checkColumn(column, entries.get(column.index));
		if (typeof checked === 'string') return { ok: false, error: checked };
		columns.push(checked);
	}
	return { ok: true, columns };
}

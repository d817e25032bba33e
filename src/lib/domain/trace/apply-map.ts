import { CATALOGUE, channelOf } from '../channels/catalogue';
import type { Ambient, Finding } from '../model';
import { converter } from '../units/convert';
import { parseUnit } from '../units/parse';
import type { Table } from '../import/table';
import type { MappedColumn } from './check-map';
import { makeClock } from './clock';
import { delayed } from './delay';
import type { Trace, TraceColumn } from './trace';

export interface Applied {
	trace: Trace;
	findings: Finding[];
	/** Middle step of the clock, s; NaN without one. */
	medianStepS: number;
}

/** A copy in the order of the clock; null keeps the file's. */
function inOrder(source: Float64Array, order: Uint32Array | null): Float64Array {
	if (!order) return source.slice();
	const values = new Float64Array(order.length);
	for (let i = 0; i < order.length; i++) values[i] = source[order[i]!]!;
	return values;
}

/** The file's numbers in the kept unit, in the order of the clock. */
function converted(mapped: MappedColumn, order: Uint32Array | null): Float64Array {
	const { source, channel, unit } = mapped;
	const values = inOrder(source.values, order);
	const kept = channel === null ? null : parseUnit(channelOf(channel)?.unit);
	const convert = unit && kept ? converter(unit, kept) : null;
	if (!convert || unit?.unit === kept?.unit) return values;
	for (let i = 0; i < values.length; i++) values[i] = convert(values[i]!);
	return values;
}

/** Pressures that are measured against the air more often than not, so that silence about it is worth a line. */
const isPressure = (mapped: MappedColumn) =>
	mapped.channel !== null && channelOf(mapped.channel)?.dimension === 'pressure';

/** A code of its own for a column without a channel; never one that means something else. */
function ownCode(header: string, taken: ReadonlySet<string>): string {
	const base = CATALOGUE.has(header) || channelOf(header) ? `${header} (as recorded)` : header;
	for (let n = 1; ; n++) {
		const code = n === 1 ? base : `${base} (${n})`;
		if (!taken.has(code)) return code;
	}
}

interface Pressures {
	findings: Finding[];
	/** Channels whose gauge reading could not be made absolute. */
	left: Set<TraceColumn>;
}

/** Gauge pressures become absolute by the barometer channel of the same sample, else by the run's entry. */
function makeAbsolute(pairs: readonly (readonly [MappedColumn, TraceColumn])[], ambient: Ambient): Pressures {
	const findings: Finding[] = [];
	const left = new Set<TraceColumn>();
	const barometer = pairs.find(([, column]) => column.code === 'barometer')?.[1].values;
	const entry = ambient.barometerKpa ?? NaN;
	const assumed: string[] = [];
	for (const [mapped, column] of pairs) {
		if (!isPressure(mapped) || column.code === 'barometer' || column.code === 'vapour_pressure') continue;
		let { reference } = mapped;
		if (reference === null && column.values.some((value) => value < 0)) {
			reference = 'gauge';
			findings.push({
				code: 'pressure_taken_as_gauge',
				severity: 'warning',
				message: `${column.code} reads below zero, so it is taken as gauge and the barometer is added. Say gauge or absolute in the channel map.`,
				spans: [],
				channel: column.code
			});
		}
		if (reference === null) assumed.push(column.code);
		if (reference !== 'gauge') continue;
		if (!barometer && Number.isNaN(entry)) {
			left.add(column);
			findings.push({
				code: 'barometer_missing',
				severity: 'warning',
				message: `${column.code} is a gauge pressure and the run has no barometer to make it absolute; it is kept as recorded under its own header. Enter the barometer and compute again.`,
				spans: [],
				channel: column.code
			});
			continue;
		}
		for (let i = 0; i < column.values.length; i++) {
			const local = barometer?.[i] ?? NaN;
			column.values[i] = column.values[i]! + (Number.isNaN(local) ? entry : local);
		}
	}
	if (assumed.length > 0)
		findings.push({
			code: 'pressure_reference_assumed',
			severity: 'info',
			message: `The file does not say gauge or absolute for ${assumed.join(', ')}; taken as absolute. Say it in the channel map if it is not so.`,
			spans: []
		});
	return { findings, left };
}

/**
 * Turns a table into a trace by a checked map: clock, units, delays (`t_true = t_recorded − delay`), gauge pressures made
 * absolute; in that order, before anything is computed.
 *
 * @param ambient the run's own entry, kPa and °C; a barometer channel of the trace beats it
 */
export function applyMap(table: Table, columns: readonly MappedColumn[], ambient: Ambient): Applied {
	const clockColumn = columns.find((mapped) => mapped.channel === 'time') ?? null;
	const clock = clockColumn
		? makeClock(
				clockColumn.source.form === 'number' ? converted(clockColumn, null) : clockColumn.source.values,
				clockColumn.source.form
			)
		: null;
	const time = clock?.time ?? null;
	const order = clock?.order ?? null;
	const findings: Finding[] = [...(clock?.findings ?? [])];
	const taken = new Set(columns.flatMap((mapped) => (mapped.channel === null ? [] : [mapped.channel])));
	const pairs: (readonly [MappedColumn, TraceColumn])[] = [];
	for (const mapped of columns) {
		if (mapped === clockColumn || mapped.source.numbers === 0) continue;
		let values = converted(mapped, order);
		if (mapped.delayS !== 0 && time) values = delayed(time, values, mapped.delayS);
		const code = mapped.channel ?? ownCode(mapped.source.header, taken);
		taken.add(code);
		pairs.push([
			mapped,
			{
				code,
				header: mapped.source.header,
				unit: mapped.channel === null ? (mapped.unitText ?? '') : (channelOf(mapped.channel)?.unit ?? ''),
				sourceUnit: mapped.unitText,
				confidence: 1,
				index: mapped.source.index,
				values
			}
		]);
	}
	const pressures = makeAbsolute(pairs, ambient);
	for (const column of pressures.left) column.code = ownCode(column.header, taken);
	return {
		trace: {
			time,
			columns: pairs.map(([, column]) => column),
			rowNumbers: order ? Uint32Array.from(order, (row) => table.rowNumbers[row]!) : table.rowNumbers,
			rows: time?.length ?? table.rows
		},
		findings: [...findings, ...pressures.findings],
		medianStepS: clock?.medianStepS ?? NaN
	};
}

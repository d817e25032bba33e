import uPlot from 'uplot';
import 'uplot/dist/uPlot.min.css';
import { formatNumber } from '$lib/domain/display/format';
import { colour, type Scheme } from '../theme/tokens';

/** Left and right room of every pane, px, so that panes and span rows under one another stay aligned. */
export const GUTTER = 52;
export const RIGHT = 12;

const FONT = '12px "Archivo Variable", system-ui, sans-serif';

export type PlotOptions = Omit<uPlot.Options, 'width' | 'height'>;

/** Decimals without which neighbouring ticks would read alike or wrong: 0.25 needs two. */
export function decimalsOfStep(step: number): number {
	for (let decimals = 0; decimals < 9; decimals++) {
		const scaled = step * 10 ** decimals;
		if (Math.abs(scaled - Math.round(scaled)) < 1e-6 * scaled) return decimals;
	}
	return 9;
}

/** Texts of an axis; none beside a curve where there is nothing to read off (no data yet, or all of it gaps). */
function tickTexts(plot: uPlot, ticks: number[], axis: number, _space: number, step: number): string[] {
	const isEmpty =
		axis > 0 && !plot.data.slice(1).some((values) => Array.from(values ?? []).some((value) => value != null));
	const decimals = decimalsOfStep(step);
	return ticks.map((tick) => (isEmpty ? '' : formatNumber(tick, decimals)));
}

interface AxisOf {
	scheme: Scheme;
	scale: string;
	side: 'left' | 'right' | 'bottom';
	/** Printed at the axis; the unit belongs in it. */
	label?: string;
	/** Ink of ticks and label: the series' own where two share a pane. */
	ink?: string;
	grid?: boolean;
	/** Least px between ticks. */
	space?: number;
}

const SIDES = { bottom: 2, left: 3, right: 1 } as const;

export function axisOf({ scheme, scale, side, label, ink, grid = true, space }: AxisOf): uPlot.Axis {
	const rule = colour('rule', scheme);
	return {
		scale,
		side: SIDES[side],
		font: FONT,
		labelFont: FONT,
		stroke: ink ?? colour('muted', scheme),
		values: tickTexts,
		size: side === 'bottom' ? 26 : GUTTER,
		gap: 4,
		space: space ?? (side === 'bottom' ? 72 : 24),
		grid: { show: grid, stroke: rule, width: 1 },
		ticks: { show: false },
		...(label ? { label, labelSize: 18, labelGap: 0 } : {})
	};
}

/** A cursor that several panes share; `key` names the group. */
export function sharedCursor(key: string, scheme: Scheme, drag: boolean): uPlot.Cursor {
	return {
		y: false,
		sync: { key, setSeries: false, scales: ['x', null] },
		drag: { x: drag, y: false, setScale: false },
		points: { size: 7, width: 2, fill: () => colour('sheet', scheme) }
	};
}

/** From the lowest to the highest value with a twelfth of the range to spare; a flat line gets room on both sides. */
export function paddedRange(_: unknown, low: number | null, high: number | null): [number, number] {
	if (low === null || high === null || !Number.isFinite(low) || !Number.isFinite(high)) return [0, 1];
	const pad = high > low ? (high - low) / 12 : Math.max(Math.abs(high) * 0.05, 0.5);
	return [low - pad, high + pad];
}

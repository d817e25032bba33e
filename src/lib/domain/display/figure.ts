import type { MetricValue } from '../model';
import { formatNumber, formatWithUncertainty, NONE } from './format';
import { labelOf } from './labels';

/** Coverage factor where no degrees of freedom are known: about 95 % for a normal distribution (JCGM 100:2008, 6.3.3). */
export const COVERAGE = 2;

/** A metric as it is read: text only, nothing left to compute. */
export interface FigureText {
	label: string;
	value: string;
	/** Expanded uncertainty U = k·u in the same unit and decimals; null when none is known. */
	plusMinus: string | null;
	unit: string;
	/** `at 6 516 rev/min`; null when the metric has no place on the run. */
	at: string | null;
	/** Why the value stands outside its method's range. */
	outside: string | null;
}

/** A metric ready to print. `u` of 0 or null shows the metric's usual decimals and no ±. */
export function figureText(code: string, metric: MetricValue | null): FigureText {
	const { label, unit, decimals, percent } = labelOf(code, metric?.unit);
	if (!metric) return { label, value: NONE, plusMinus: null, unit, at: null, outside: null };
	const scale = percent ? 100 : 1;
	const expanded = metric.u === null ? 0 : metric.u * COVERAGE * scale;
	// What arithmetic alone leaves over is no uncertainty.
	const known = expanded > Math.abs(metric.value * scale) * 1e-9 && Number.isFinite(metric.value);
	const shown = known
		? formatWithUncertainty(metric.value * scale, expanded)
		: { value: formatNumber(metric.value * scale, decimals), plusMinus: null };
	return { label, ...shown, unit, at: placeText(code, metric.at), outside: metric.outsideRange ?? null };
}

/** One value of a channel or a metric, unit apart: for table cells and readouts. */
export function valueText(code: string, value: number | null | undefined): string {
	const { decimals, percent } = labelOf(code);
	return formatNumber(value == null ? value : value * (percent ? 100 : 1), decimals);
}

/** A value with its unit in one line of text: for a sentence, a title, a screen reader. */
export function valueWithUnit(code: string, value: number | null | undefined): string {
	const { unit } = labelOf(code);
	return `${valueText(code, value)}${unit ? `\u00A0${unit}` : ''}`;
}

function placeText(code: string, at: MetricValue['at']): string | null {
	if (at?.speed !== undefined && !code.endsWith('_speed')) return `at ${valueWithUnit('speed', at.speed)}`;
	if (at?.torque !== undefined) return `at ${valueWithUnit('torque', at.torque)}`;
	if (at?.time !== undefined) return `at ${valueWithUnit('time', at.time)}`;
	return null;
}

import type { MetricValue } from '../model';
import { formatNumber, formatWithUncertainty, NONE } from './format';
import { labelOf, type Label } from './labels';
import { shownAs, type UnitSystem } from './unit-system';

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
export function figureText(code: string, metric: MetricValue | null, system: UnitSystem = 'si'): FigureText {
	const { label, unit, decimals, percent, as } = shownLabel(code, metric?.unit, system);
	if (!metric) return { label, value: NONE, plusMinus: null, unit, at: null, outside: null };
	const scale = percent ? 100 : 1;
	const value = as.value(metric.value) * scale;
	const expanded = metric.u === null ? 0 : as.difference(metric.u) * COVERAGE * scale;
	// What arithmetic alone leaves over is no uncertainty.
	const known = expanded > Math.abs(value) * 1e-9 && Number.isFinite(metric.value);
	const shown = known
		? formatWithUncertainty(value, expanded)
		: { value: formatNumber(value, decimals), plusMinus: null };
	const at = placeText(code, metric.at, system);
	return { label, ...shown, unit, at, outside: metric.outsideRange ?? null };
}

/** The label of a quantity as this reader sees it: unit and decimals in their own custom. */
export function shownLabel(
	code: string,
	unit: string | undefined,
	system: UnitSystem
): Label & { as: ReturnType<typeof shownAs> } {
	const label = labelOf(code, unit);
	const as = shownAs(system, code, label.unit);
	return { ...label, unit: as.unit, decimals: label.decimals + as.moreDecimals, as };
}

/** One value of a channel or a metric, unit apart: for table cells and readouts. */
export function valueText(
	code: string,
	value: number | null | undefined,
	system: UnitSystem = 'si',
	unit?: string
): string {
	const { decimals, percent, as } = shownLabel(code, unit, system);
	return formatNumber(value == null ? value : as.value(value) * (percent ? 100 : 1), decimals);
}

/** A value with its unit in one line of text: for a sentence, a title, a screen reader. */
export function valueWithUnit(
	code: string,
	value: number | null | undefined,
	system: UnitSystem = 'si'
): string {
	const { unit } = shownLabel(code, undefined, system);
	return `${valueText(code, value, system)}${unit ? `\u00A0${unit}` : ''}`;
}

function placeText(code: string, at: MetricValue['at'], system: UnitSystem): string | null {
	if (at?.speed !== undefined && !code.endsWith('_speed'))
		return `at ${valueWithUnit('speed', at.speed, system)}`;
	if (at?.torque !== undefined) return `at ${valueWithUnit('torque', at.torque, system)}`;
	if (at?.time !== undefined) return `at ${valueWithUnit('time', at.time, system)}`;
	return null;
}

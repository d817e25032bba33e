import { shownLabel } from '$lib/domain/display/figure';
import { METRIC_CODES, metricGroup } from '$lib/domain/display/labels';
import type { UnitSystem } from '$lib/domain/display/unit-system';

export interface MetricOption {
	value: string;
	/** Name, and the unit that the reader prefers. */
	label: string;
	group: string;
}

/** Figures for a chooser: all that are known, those that runs have first said as such, and what else runs have. */
export function metricOptions(present: readonly string[], units: UnitSystem): MetricOption[] {
	const has = new Set(present);
	return [...METRIC_CODES, ...present.filter((code) => !METRIC_CODES.includes(code))].map((code) => {
		const { label, unit } = shownLabel(code, undefined, units);
		return {
			value: code,
			label: `${label}${unit ? `, ${unit}` : ''}${has.has(code) ? '' : ' (no run has it)'}`,
			group: metricGroup(code)
		};
	});
}

/** Options group by group, groups in the order of their first. */
export function groupsOf<T extends { group?: string }>(options: readonly T[]): [string, T[]][] {
	const groups = new Map<string, T[]>();
	for (const option of options) {
		const name = option.group ?? '';
		groups.set(name, [...(groups.get(name) ?? []), option]);
	}
	return [...groups];
}

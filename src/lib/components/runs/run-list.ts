import { shownLabel } from '$lib/domain/display/figure';
import { labelOf } from '$lib/domain/display/labels';
import type { UnitSystem } from '$lib/domain/display/unit-system';
import type { Column } from '../table/columns';

/** Heads that are shorter in a column than the figure's own name. */
const SHORT: Readonly<Record<string, string>> = {
	peak_power: 'Power',
	peak_torque: 'Torque',
	bte_max: 'Best efficiency',
	bsfc_min: 'BSFC'
};

/** Columns of the run list, the chosen figures among them. */
export function listColumns(
	metrics: readonly string[],
	isStaff: boolean,
	units: UnitSystem = 'si'
): Column[] {
	const figures = metrics.map((code) => {
		const { label, unit } = shownLabel(code, undefined, units);
		return { key: code, head: SHORT[code] ?? label, unit, numeric: true, sort: code };
	});
	return [
		{ key: 'number', head: 'Run', sort: 'number' },
		{ key: 'curve', head: 'Curve', quietHead: true },
		...figures,
		{ key: 'flags', head: 'Flags' },
		{ key: 'state', head: 'State' },
		{ key: 'startedAt', head: 'Started', sort: 'started', largestFirst: true },
		{ key: 'cell', head: 'Cell' },
		{ key: 'build', head: 'Build' },
		{ key: 'batch', head: 'Batch' },
		{ key: 'kind', head: 'Kind' },
		...(isStaff ? [{ key: 'client', head: 'Client' }] : [])
	];
}

/** How the list is sorted, as the beginning of a sentence: "Runs, newest first". */
export function listLead(sort: string | undefined): string {
	const isDown = !sort || sort.startsWith('-');
	const by = (sort ?? 'started').replace('-', '');
	if (by === 'started') return `Runs, ${isDown ? 'newest' : 'oldest'} first`;
	if (by === 'number') return `Runs by number, ${isDown ? 'last' : 'first'} first`;
	const name = labelOf(by).label.replace(/^[A-Z](?![A-Z])/, (letter) => letter.toLowerCase());
	return `Runs by ${name}, ${isDown ? 'highest' : 'lowest'} first`;
}

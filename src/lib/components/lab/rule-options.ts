import { CATALOGUE } from '$lib/domain/channels/catalogue';
import { labelOf, METRIC_CODES } from '$lib/domain/display/labels';
import { FUEL_PROPERTIES } from '$lib/domain/model';

interface Choice {
	value: string;
	label: string;
	group?: string;
}

const named = (code: string) => {
	const { label, unit } = labelOf(code);
	return unit ? `${label}, ${unit}` : label;
};
const channels = [...CATALOGUE.keys()];

/** All that a rule can judge, by what kind of thing it is. */
export const SUBJECT_CHOICES: readonly Choice[] = [
	...channels
		.filter((code) => code !== 'time')
		.map((code) => ({ value: `channel:${code}`, label: named(code), group: 'Channels' })),
	...METRIC_CODES.map((code) => ({ value: `metric:${code}`, label: named(code), group: 'Figures' })),
	...FUEL_PROPERTIES.map((code) => ({ value: `fuel:${code}`, label: named(code), group: 'Fuel batch' })),
	{ value: 'expression', label: 'An expression over channels', group: 'Written out' },
	{ value: 'column', label: 'A numbered channel, or a column’s own header', group: 'Written out' },
	{ value: 'figure', label: 'Another figure by its code', group: 'Written out' }
];

/** What a table can run over. */
export const AXIS_CHOICES: readonly Choice[] = channels.map((code) => ({ value: code, label: named(code) }));

/** Label and hint of what is written out, by the kind of subject. */
export const WRITTEN: Readonly<Record<string, { label: string; hint: string }>> = {
	expression: {
		label: 'Expression',
		hint: 'Channel codes, numbers, + − * / ^, brackets, min, max, abs, sqrt; for example fuel_flow / power.'
	},
	column: {
		label: 'Code or header',
		hint: 'A code with its number, such as exhaust_temp.2, or the header as it stands in the file.'
	},
	figure: { label: 'Figure code', hint: 'As the API spells it, such as raw_max_power.' }
};

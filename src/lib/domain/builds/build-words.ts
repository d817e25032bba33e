import { changesInWords, type FieldWords } from '../history/changes';
import { partChanges, type Part } from './part-changes';

const STATE_WORDS: Readonly<Record<string, string>> = {
	in_preparation: 'in preparation',
	ready: 'ready',
	retired: 'retired'
};
const FIELDS: Readonly<Record<string, FieldWords>> = {
	state: { label: 'State', text: (value) => STATE_WORDS[String(value)] ?? String(value) },
	title: { label: 'Title', text: (value) => `“${String(value)}”` }
};

const fitted = (value: string | null) => (value === null ? 'not fitted' : value || 'fitted');
const partsOf = (build: Record<string, unknown>) =>
	Array.isArray(build.parts) ? (build.parts as Part[]) : [];

/** What was changed on a build, part by part: `State in preparation → ready; Jet 120 → 125`. */
export function buildChangesInWords(before: Record<string, unknown>, after: Record<string, unknown>): string {
	const parts =
		'parts' in after
			? partChanges(partsOf(after), partsOf(before))
					.filter(({ change }) => change !== 'same')
					.map((row) => `${row.name} ${fitted(row.before)} → ${fitted(row.value)}`)
			: [];
	return [changesInWords(before, after, FIELDS), ...parts].filter(Boolean).join('; ');
}

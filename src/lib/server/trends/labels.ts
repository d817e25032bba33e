import type { GroupRow } from './select';

/** Two clients may each have a build B12: then, and only then, the owner's code goes before it. */
export function labelsOf(groups: Pick<GroupRow, 'id' | 'label' | 'client'>[]): Map<string, string> {
	const times = new Map<string, number>();
	for (const { label } of groups) times.set(label, (times.get(label) ?? 0) + 1);
	return new Map(
		groups.map(({ id, label, client }) => [
			id,
			times.get(label)! > 1 && client ? `${client} ${label}` : label
		])
	);
}

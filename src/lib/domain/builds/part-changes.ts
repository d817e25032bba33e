export interface Part {
	name: string;
	value: string;
}

export type Change = 'changed' | 'added' | 'removed' | 'same';

export interface PartRow {
	key: string;
	name: string;
	/** Null: not in this build. */
	value: string | null;
	/** Null: not in the parent build. */
	before: string | null;
	change: Change;
}

const ORDER: readonly Change[] = ['changed', 'added', 'removed', 'same'];

/** Parts of the same name are told apart by their order: the second piston of one is compared with the second of the other. */
function keyed(parts: readonly Part[]): Map<string, Part> {
	const seen = new Map<string, number>();
	return new Map(
		parts.map((part) => {
			const times = (seen.get(part.name) ?? 0) + 1;
			seen.set(part.name, times);
			return [`${part.name}#${times}`, part];
		})
	);
}

/** What a build changes against its parent, differences first, else in the order in which the parts are listed. */
export function partChanges(parts: readonly Part[], parent: readonly Part[]): PartRow[] {
	const [now, before] = [keyed(parts), keyed(parent)];
	const rows = [...new Set([...now.keys(), ...before.keys()])].map((key): PartRow => {
		const [mine, theirs] = [now.get(key), before.get(key)];
		const change = !theirs ? 'added' : !mine ? 'removed' : mine.value === theirs.value ? 'same' : 'changed';
		const name = mine?.name ?? theirs?.name ?? '';
		return { key, name, value: mine?.value ?? null, before: theirs?.value ?? null, change };
	});
	return ORDER.flatMap((change) => rows.filter((row) => row.change === change));
}

/** `1 changed, 2 added`; `nothing changed` when they are equal. */
export function changesInWords(rows: readonly PartRow[]): string {
	const counted = ORDER.filter((change) => change !== 'same')
		.map((change) => [rows.filter((row) => row.change === change).length, change] as const)
		.filter(([count]) => count > 0)
		.map(([count, change]) => `${count} ${change}`);
	return counted.length ? counted.join(', ') : 'nothing changed';
}

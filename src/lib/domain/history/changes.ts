/** How a field's change is said: its name, and one of its values as text. */
export interface FieldWords {
	label: string;
	text(value: unknown): string;
}

/** Key order does not matter: a database keeps its own. */
function same(a: unknown, b: unknown): boolean {
	if (a === b || (a == null && b == null)) return true;
	if (typeof a !== 'object' || typeof b !== 'object' || a === null || b === null) return false;
	const keys = new Set([...Object.keys(a), ...Object.keys(b)]);
	return [...keys].every((key) => same((a as never)[key], (b as never)[key]));
}

/** The fields of a change whose values differ from what stood before; null and absent are alike. */
export function changedFields<T extends object>(before: T, change: Partial<T>): (keyof T)[] {
	return (Object.keys(change) as (keyof T)[]).filter(
		(field) => change[field] !== undefined && !same(before[field], change[field])
	);
}

/** `Displacement 1.998 L → 2.1 L; Name Old → New`, in the order of the words; a field without words is not told. */
export function changesInWords(
	before: Record<string, unknown>,
	after: Record<string, unknown>,
	words: Readonly<Record<string, FieldWords>>
): string {
	return Object.entries(words)
		.filter(([field]) => field in after && !same(before[field], after[field]))
		.map(([field, { label, text }]) => `${label} ${text(before[field])} → ${text(after[field])}`)
		.join('; ');
}

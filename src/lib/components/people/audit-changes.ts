/** One field of an audit line: what it was, and what it became. */
interface FieldChange {
	field: string;
	/** Null where there is no before (or no after): then only the other is told. */
	before: string | null;
	after: string | null;
}

const isRecord = (value: unknown): value is Record<string, unknown> =>
	typeof value === 'object' && value !== null && !Array.isArray(value);

/** `expectedTorque` → `expected torque`. */
const wordsOf = (key: string) =>
	key.replace(/[A-Z]/g, (letter) => ` ${letter.toLowerCase()}`).replaceAll('_', ' ');

function textOf(value: unknown): string | null {
	if (value === undefined || value === null || value === '') return null;
	if (typeof value === 'string') return value;
	return JSON.stringify(value).replaceAll(/[{}"]/g, '').replaceAll(',', ', ').replaceAll(':', ': ');
}

/** The fields that an audit line changed, those that stayed left out; a value that is no record is one field without a name. */
export function changesOf(before: unknown, after: unknown): FieldChange[] {
	if (!isRecord(before) && !isRecord(after)) {
		const [was, is] = [textOf(before), textOf(after)];
		return was === is ? [] : [{ field: '', before: was, after: is }];
	}
	const [was, is] = [isRecord(before) ? before : {}, isRecord(after) ? after : {}];
	return [...new Set([...Object.keys(was), ...Object.keys(is)])]
		.map((key) => ({ field: wordsOf(key), before: textOf(was[key]), after: textOf(is[key]) }))
		.filter((change) => change.before !== change.after);
}

import type { DrawnEntry } from './entries';
import { laterOnTheWall, wallText } from './wall';

/** Where a bar would stand, on the lab's wall clock. */
export interface Place {
	cell: string;
	from: string;
	to: string;
}
/** A bar that looks for a place: an existing booking, or none yet. */
interface Wanted extends Place {
	id: string | null;
	/** Number of the slot that it would replace: not in its own way. */
	replaces?: string | null;
	build?: string | null;
}
export interface RigTimes {
	code: string;
	rigUpMinutes: number;
	rigDownMinutes: number;
}

const HOLDS = new Set<DrawnEntry['kind']>(['confirmed', 'done', 'rig_up', 'rig_down', 'taken', 'closed']);

/**
 * With what a place clashes, rigging included, from what is on the screen already, as a sentence; null where it is free.
 * The server has the last word: it knows what lies outside these days, and what changed a moment ago.
 */
export function clashSentence(
	drawn: readonly DrawnEntry[],
	cells: readonly RigTimes[],
	wanted: Wanted
): string | null {
	const rig = cells.find(({ code }) => code === wanted.cell);
	const from = laterOnTheWall(wanted.from, -(rig?.rigUpMinutes ?? 0));
	const to = laterOnTheWall(wanted.to, rig?.rigDownMinutes ?? 0);
	const holding = new Map(drawn.flatMap(({ test, id }) => (test && id ? [[id, test] as const] : [])));
	const inTheWay = drawn.filter((entry) => {
		if (entry.to <= from || to <= entry.from) return false;
		const test = entry.id ? holding.get(entry.id) : undefined;
		if (entry.id && entry.id === wanted.id) return false;
		if (test && (test.state === 'requested' || test.number === wanted.replaces)) return false;
		if (!HOLDS.has(entry.kind)) return false;
		return entry.cell === wanted.cell || (test !== undefined && test.build === wanted.build);
	});
	const [first] = inTheWay;
	if (first) return sentenceOf(first, wanted.cell, first.id ? holding.get(first.id) : undefined);
	const shut = drawn.find(
		({ kind, cell, ...at }) => kind === 'shut' && cell === wanted.cell && at.to > from && to > at.from
	);
	return shut ? `Reaches outside the opening hours of ${wanted.cell}, rigging included.` : null;
}

function sentenceOf(entry: DrawnEntry, cell: string, test: DrawnEntry['test'] | undefined): string {
	const when = wallText(entry.from, entry.to);
	if (entry.kind === 'closed')
		return `Clashes: ${cell} is closed ${when}${entry.title ? ` (${entry.title})` : ''}.`;
	if (!test) return `Clashes: ${cell} is taken ${when}.`;
	const rig =
		entry.kind === 'rig_up' ? 'the rig-up of ' : entry.kind === 'rig_down' ? 'the rig-down of ' : '';
	return entry.cell === cell
		? `Clashes with ${rig}${test.number}, ${when}.`
		: `Clashes: build ${test.build} stands in ${entry.cell} then, for ${test.number}.`;
}

/** What runs can be grouped by. */
export const GROUPS = ['build', 'engine', 'fuel', 'batch', 'cell', 'month'] as const;
type Group = (typeof GROUPS)[number];

export interface Question {
	metric: string;
	groupBy: Group;
	engine: string;
	fuel: string;
	cell: string;
	from: string;
	to: string;
}

/** The question as the API is asked: what is not said is left out. */
export const queryOf = (question: Question): string =>
	new URLSearchParams(Object.entries(question).filter(([, value]) => value !== '')).toString();

export function groupWord(group: string, isHead = false): string {
	const word = group === 'batch' ? 'fuel batch' : group;
	return isHead ? word.charAt(0).toUpperCase() + word.slice(1) : word;
}

const FIRST = 'bte_max';

/** What an address asks; a figure or a group that there is not becomes the usual one. */
export function questionOf(query: URLSearchParams, metrics: readonly string[]): Question {
	const of = (name: string) => query.get(name) ?? '';
	const usual = metrics.includes(FIRST) ? FIRST : (metrics[0] ?? FIRST);
	const day = (name: string) => (/^\d{4}-\d\d-\d\d$/.test(of(name)) ? of(name) : '');
	return {
		metric: metrics.includes(of('metric')) ? of('metric') : usual,
		groupBy: GROUPS.find((group) => group === of('groupBy')) ?? 'build',
		engine: of('engine'),
		fuel: of('fuel'),
		cell: of('cell'),
		from: day('from'),
		to: day('to')
	};
}

/** What runs can be grouped by, and how it is said. */
export const GROUP_WORDS = {
	build: 'build',
	engine: 'engine',
	fuel: 'fuel',
	batch: 'fuel batch',
	cell: 'cell',
	month: 'month'
} as const;
type GroupBy = keyof typeof GROUP_WORDS;

const FILTERS = [
	'client',
	'engine',
	'build',
	'fuel',
	'batch',
	'cell',
	'kind',
	'state',
	'from',
	'to',
	'runs'
] as const;

export interface Question {
	metric: string;
	groupBy: GroupBy;
	/** Side by side by group, or over time. */
	view: 'groups' | 'time';
	/** Group that the others are compared with; empty: the first that can be. */
	against: string;
	/** Filters and how repeats count, as the address has them; only those that are set. */
	asked: Record<string, string>;
}

const FIRST = 'bte_max';

/**
 * What an address asks. What it leaves out, and a group or view that there is not, is the usual one; a filter or a figure
 * stays as it is, so that an answer of nothing says why.
 */
export function questionOf(query: URLSearchParams, metrics: readonly string[]): Question {
	const of = (name: string) => query.get(name) ?? '';
	const usual = metrics.includes(FIRST) ? FIRST : (metrics[0] ?? FIRST);
	const asked = Object.fromEntries(
		FILTERS.map((name) => [name, of(name)]).filter(([, value]) => value !== '')
	) as Record<string, string>;
	// All but void runs, each counted, is what holds anyway: no word of its own.
	if (asked.state === 'not_voided') delete asked.state;
	if (of('repeats') === 'once') asked.repeats = 'once';
	return {
		metric: /^[a-z][a-z0-9_]{1,60}$/.test(of('metric')) ? of('metric') : usual,
		groupBy: of('groupBy') in GROUP_WORDS ? (of('groupBy') as GroupBy) : 'build',
		view: of('view') === 'time' ? 'time' : 'groups',
		against: of('against'),
		asked
	};
}

/** The question as the API is asked. */
export function queryOf({ metric, groupBy, against, asked }: Question): string {
	return new URLSearchParams({ metric, groupBy, ...asked, ...(against ? { against } : {}) }).toString();
}

import { sql } from 'kysely';
import type { Principal } from '../access';
import { reading } from '../db';
import type { Deps } from '../deps';

const CHOSEN_BY = ['client', 'engine', 'build', 'fuel', 'batch', 'cell'] as const;
type ChosenBy = (typeof CHOSEN_BY)[number];

/** Something that runs can be filtered by. */
interface Choice {
	/** What the address says: the code where one thing alone has it, else the id. */
	value: string;
	code: string;
	label: string;
}
export type Choices = Record<ChosenBy, Choice[]>;

/** Newest builds that a chooser offers; an address may name any. */
const MOST_BUILDS = 500;

/** All that this person can filter runs by, in one transaction. */
export async function runChoices(deps: Deps, who: Principal): Promise<Choices> {
	const { rows } = await reading(deps.pools, who, (trx) =>
		sql<{ of: ChosenBy; id: string; code: string; title: string; client: string | null }>`
			select 'client' as of, id, code, name as title, null as client from client
			union all select 'engine', e.id, e.code, e.name, c.code from engine e join client c on c.id = e.client_id
			union all select 'fuel', id, code, name, null from fuel
			union all select 'batch', b.id, b.code, f.name, c.code from fuel_batch b join fuel f on f.id = b.fuel_id
				left join client c on c.id = b.client_id
			union all select 'cell', id, code, name, null from cell
			union all (select 'build', b.id, b.number, b.title, c.code from build b join client c on c.id = b.client_id
				order by b.created_at desc limit ${MOST_BUILDS})`.execute(trx)
	);
	const choices = Object.fromEntries(CHOSEN_BY.map((of) => [of, []])) as unknown as Choices;
	const times = new Map<string, number>();
	const name = (row: { of: string; code: string }) => `${row.of} ${row.code}`;
	for (const row of rows) times.set(name(row), (times.get(name(row)) ?? 0) + 1);
	for (const row of rows) {
		const owner = row.client && who.clientId === null ? `${row.client} ` : '';
		choices[row.of].push({
			value: times.get(name(row)) === 1 ? row.code : row.id,
			code: row.code,
			label: `${owner}${row.code} · ${row.title}`
		});
	}
	for (const of of CHOSEN_BY) choices[of].sort((one, other) => (one.label < other.label ? -1 : 1));
	return choices;
}

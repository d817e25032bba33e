import { sql } from 'kysely';
import { spanInWords, type Interval } from '$lib/domain/scheduling';
import { isViolation, jsonb, reading, type Actor, type InstantRange, type Trx } from '../db';
import type { Deps } from '../deps';
import { conflict, type Problem } from '../problem';
import type { Booking } from './schemas';

/** Time that is wanted in a cell, rigging included, and what of it is not in the way: the slot itself, or the one it replaces. */
export interface Wish {
	key: string;
	cellId: string;
	buildId: string | null;
	during: Interval;
	ignore: string[];
}

export interface Clash {
	kind: 'booking' | 'closed' | 'taken';
	number?: string;
	/** Set when it is not the cell but this build that is elsewhere. */
	build?: string;
	title?: string;
	cell: string;
	during: InstantRange;
}

const wishTable = (wishes: Wish[]) =>
	sql`jsonb_to_recordset(${jsonb(
		wishes.map(({ key, cellId, buildId, during, ignore }) => ({
			key,
			cell_id: cellId,
			build_id: buildId,
			from_at: during.from,
			to_at: during.to,
			ignore
		}))
	)}) as w(key text, cell_id uuid, build_id uuid, from_at timestamptz, to_at timestamptz, ignore jsonb)`;

/** What stands where these wishes want to, as far as this person may know: rows they may see, and else only that a cell is taken. */
export async function clashesOf(trx: Trx, who: Actor, wishes: Wish[]): Promise<Map<string, Clash[]>> {
	const found = new Map<string, Clash[]>();
	if (!wishes.length) return found;
	const add = (key: string, clash: Clash) => found.set(key, [...(found.get(key) ?? []), clash]);
	const seen = await sql<{
		key: string;
		kind: string;
		number: string | null;
		build: string | null;
		title: string | null;
		cell: string;
		during: InstantRange;
		inCell: boolean;
	}>`select w.key, o.kind, b.number, bu.number as build, o.title, c.code as cell, o.during, o.cell_id = w.cell_id as in_cell
		from ${wishTable(wishes)}
		join occupancy o on (o.cell_id = w.cell_id or o.build_id = w.build_id) and o.during && tstzrange(w.from_at, w.to_at)
		join cell c on c.id = o.cell_id
		left join booking b on b.id = o.booking_id
		left join build bu on bu.id = o.build_id
		where o.booking_id is null or not (w.ignore ? o.booking_id::text)
		order by lower(o.during)`.execute(trx);
	for (const { key, cell, during, ...row } of seen.rows)
		add(key, {
			kind: row.kind === 'closure' ? 'closed' : row.number ? 'booking' : 'taken',
			...(row.number ? { number: row.number } : {}),
			...(!row.inCell && row.build ? { build: row.build } : {}),
			...(row.title && !who.clientId ? { title: row.title } : {}),
			cell,
			during
		});
	if (!who.clientId) return found;
	const taken = await sql<{ key: string; cell: string; during: InstantRange }>`
		select w.key, c.code as cell, t.during
		from ${wishTable(wishes)}
		cross join lateral taken(w.from_at, w.to_at) t
		join cell c on c.id = t.cell_id
		where t.cell_id = w.cell_id
			and not exists (select from occupancy o where o.cell_id = t.cell_id and o.during = t.during)
		order by lower(t.during)`.execute(trx);
	for (const { key, cell, during } of taken.rows) add(key, { kind: 'taken', cell, during });
	return found;
}

const SAID_AT_MOST = 3;

function clause(clash: Clash, zone: string): string {
	const when = spanInWords(clash.during, zone);
	if (clash.build) return `build ${clash.build} stands in ${clash.cell} ${when}, for ${clash.number}`;
	if (clash.kind === 'closed')
		return `${clash.cell} is closed ${when}${clash.title ? ` (${clash.title})` : ''}`;
	return clash.number
		? `${clash.cell} is taken by ${clash.number} ${when}, rigging included`
		: `${clash.cell} is taken ${when}`;
}

/** One sentence that says with what, in the lab's time. */
export function clashSentence(clashes: Clash[], zone: string): string {
	const said = clashes.slice(0, SAID_AT_MOST).map((clash) => clause(clash, zone));
	const more = clashes.length > SAID_AT_MOST ? `; and ${clashes.length - SAID_AT_MOST} more` : '';
	const text = `${said.join('; ')}${more}`;
	return `${text.charAt(0).toUpperCase()}${text.slice(1)} (${zone}).`;
}

export const clashViews = (clashes: Clash[]): Booking['clashesWith'] =>
	clashes.map(({ kind, number, cell, during }) => ({
		kind,
		...(number ? { number } : {}),
		cell,
		from: during.from.toISOString(),
		to: during.to.toISOString()
	}));

function clashProblem(clashes: Clash[], zone: string): Problem {
	return clashes.length
		? conflict(clashSentence(clashes, zone), { clashesWith: clashViews(clashes) })
		: conflict('This time was taken a moment ago. Read the schedule again.');
}

/**
 * Refuses early what already clashes. Called before the cell is waited for, so that of many who want the same hour the losers
 * do not queue; only the exclusion constraint decides who wins.
 */
export async function requireFree(trx: Trx, deps: Deps, who: Actor, wish: Wish): Promise<void> {
	const clashes = (await clashesOf(trx, who, [wish])).get(wish.key);
	if (clashes) throw clashProblem(clashes, deps.config.labTimeZone);
}

/**
 * Runs a change that may meet the exclusion constraint. When it does, everything is rolled back, and a new transaction asks,
 * as this person, what stands there.
 * @param wishOf the time that was wanted, once `change` knows it
 */
export async function tellingClash<T>(
	deps: Deps,
	who: Actor,
	wishOf: () => Wish | null,
	change: () => Promise<T>
): Promise<T> {
	try {
		return await change();
	} catch (error) {
		const wish = wishOf();
		const clashed =
			isViolation(error, 'occupancy_cell_no_overlap') || isViolation(error, 'occupancy_build_no_overlap');
		if (!clashed || !wish) throw error;
		const found = await reading(deps.pools, who, (trx) => clashesOf(trx, who, [wish]));
		throw clashProblem(found.get(wish.key) ?? [], deps.config.labTimeZone);
	}
}

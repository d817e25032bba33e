import { getJson } from './api';

/** Something that can be found by typing: its id, its own code or number, and what else tells it apart. */
export interface Choice {
	id: string;
	code: string;
	text: string;
}

const MOST = 20;

/** Builds whose number or title holds this text, newest first. */
export async function findBuilds(text: string, among: { engine?: string } = {}): Promise<Choice[]> {
	const { items } = await getJson<{ items: { id: string; number: string; title: string }[] }>('/builds', {
		query: { q: text, limit: MOST, ...among }
	});
	return items.map(({ id, number, title }) => ({ id, code: number, text: title }));
}

import { slotText } from '$lib/domain/display/clock';
import type { ListedEntry } from './entries';

const SAID_AT_MOST = 2;
const STATES: Readonly<Record<string, string>> = { confirmed: 'is confirmed', done: 'is over' };

/**
 * What is another in the same days than a moment ago, as sentences, the few first; null when nothing is.
 * @param zone IANA name
 */
export function changesText(
	before: readonly ListedEntry[],
	after: readonly ListedEntry[],
	zone: string
): string | null {
	const said: string[] = [];
	const bookings = (list: readonly ListedEntry[]) =>
		new Map(list.flatMap((entry) => (entry.booking ? [[entry.booking.id, entry] as const] : [])));
	const [was, is] = [bookings(before), bookings(after)];
	const place = ({ cell, from, to }: ListedEntry) => `${cell}, ${slotText(from, to, zone)}`;
	for (const [id, entry] of is) {
		const old = was.get(id);
		const { number, state } = entry.booking!;
		if (!old) said.push(`${number} is ${state === 'requested' ? 'asked for' : 'there'}: ${place(entry)}.`);
		else {
			if (place(old) !== place(entry)) said.push(`${number} now stands in ${place(entry)}.`);
			if (old.booking!.state !== state && STATES[state]) said.push(`${number} ${STATES[state]}.`);
		}
	}
	for (const [id, { booking }] of was)
		if (!is.has(id)) said.push(`${booking!.number} is gone from these days.`);
	for (const [kind, word] of [
		['closed', 'Closed'],
		['taken', 'Taken']
	] as const) {
		const spans = (list: readonly ListedEntry[]) =>
			list.filter((entry) => entry.kind === kind).map(({ cell, from, to }) => `${cell} ${from} ${to}`);
		const [old, now] = [spans(before), spans(after)];
		const cells = [
			...now.filter((span) => !old.includes(span)),
			...old.filter((span) => !now.includes(span))
		];
		const names = [...new Set(cells.map((span) => span.split(' ')[0]))];
		if (names.length) said.push(`${word} time of ${names.join(', ')} changed.`);
	}
	if (!said.length) return null;
	const more = said.length - SAID_AT_MOST;
	return [...said.slice(0, SAID_AT_MOST), ...(more > 0 ? [`And ${more} more changes.`] : [])].join(' ');
}

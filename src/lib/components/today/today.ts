import { RUN_KIND_WORDS } from '$lib/domain/display/words';
import type { RunKind } from '$lib/domain/model';

/** Work in a cell as the board shows it: a booked slot with its runs, or a run without one. */
export interface Work {
	booking: {
		id: string;
		number: string;
		client: string;
		build: string;
		buildId: string;
		buildTitle: string;
		kind: RunKind | null;
		rigUpMinutes: number;
	} | null;
	runs: {
		number: string;
		client: string;
		build: string;
		buildId: string;
		buildTitle: string;
		kind: RunKind;
		state: 'open' | 'closed' | 'accepted' | 'voided';
		loggedBy: string;
	}[];
	from: string;
	to: string | null;
	elapsedMinutes: number;
	remainingMinutes: number | null;
	lateMinutes: number;
	overrunMinutes: number;
	affects: {
		kind: 'booking' | 'taken' | 'closed';
		number: string | null;
		client: string | null;
		occupiedFrom: string;
		waitsMinutes: number;
	} | null;
	needs: { code: string; message: string; run: string | null }[];
}

/** Where what is lacking is put right; null where this person cannot. */
export function needHref(need: Work['needs'][number], work: Work, may: readonly string[]): string | null {
	if (need.run)
		return `/runs/${encodeURIComponent(need.run)}${need.code === 'checklist_open' ? '#checklist' : ''}`;
	const { booking } = work;
	if (!booking) return null;
	if (need.code === 'no_record' && may.includes('run.open'))
		return `/runs/new?booking=${encodeURIComponent(booking.id)}`;
	if (need.code === 'build_not_ready') return `/builds/${encodeURIComponent(booking.buildId)}`;
	return `/bookings/${encodeURIComponent(booking.id)}`;
}

/** `As delivered, power sweep`. */
export function whatIsDone(work: Work): string {
	const run = work.runs.at(-1);
	const title = work.booking?.buildTitle ?? run?.buildTitle ?? '';
	const kind = run?.kind ?? work.booking?.kind;
	return kind ? `${title}, ${RUN_KIND_WORDS[kind].toLowerCase()}` : title;
}

import { untrack } from 'svelte';
import { getJson } from './api';
import { ApiError } from './problem';

export interface TrendAnswer {
	metric: string;
	unit: string | null;
	groups: {
		key: string;
		title: string | null;
		/** What counts: runs, or sets of repeats. */
		n: number;
		runs: number;
		sets: number;
		mean: number;
		sd: number | null;
		ci95: [lo: number, hi: number] | null;
		difference: { value: number; df: number; ci95: [lo: number, hi: number] } | null;
	}[];
	against: string | null;
	points: { run: string; group: string; at: string; value: number; u: number | null }[];
	/** Of all runs that count; `points` holds the newest. */
	pointsTotal: number;
	/** Why a filter can match nothing. */
	notes: string[];
}

/** Fetches what is asked; keeps the last answer until the next has come. */
export class TrendLoader {
	answer: TrendAnswer | null = $state.raw(null);
	/** What the answer is grouped by. */
	groupBy = $state('');
	error: ApiError | null = $state.raw(null);
	isLoading = $state(true);
	#again: () => void = () => {};

	/**
	 * @param query of the address, as the API takes it
	 * @returns ends the call, where another question makes it needless
	 */
	ask(query: string, groupBy: string): () => void {
		const running = new AbortController();
		this.#again = () => void this.#fetch(query, groupBy, running.signal);
		untrack(() => this.#again());
		return () => running.abort();
	}

	retry() {
		this.#again();
	}

	async #fetch(query: string, groupBy: string, signal: AbortSignal) {
		this.isLoading = true;
		this.error = null;
		try {
			const answer = await getJson<TrendAnswer>(`/trends?${query}`, { signal });
			if (signal.aborted) return;
			this.answer = answer;
			this.groupBy = groupBy;
		} catch (cause) {
			if (signal.aborted) return;
			this.error = cause instanceof ApiError ? cause : new ApiError(0, 'The trend could not be fetched.');
		}
		this.isLoading = false;
	}
}

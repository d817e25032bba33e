import { untrack } from 'svelte';
import { getJson } from './api';
import { ApiError } from './problem';

export interface TrendAnswer {
	metric: string;
	unit: string | null;
	groups: {
		key: string;
		title: string | null;
		n: number;
		mean: number;
		sd: number | null;
		ci95: [lo: number, hi: number] | null;
	}[];
	points: { run: string; group: string; at: string; value: number; u: number | null }[];
	/** Of all runs that count; `points` holds the newest. */
	pointsTotal: number;
}

type Question = Record<'metric' | 'groupBy', string> & Record<string, string>;

/** Fetches what is asked; keeps the last answer until the next has come. */
export class TrendLoader {
	answer: TrendAnswer | null = $state.raw(null);
	/** What the answer is grouped by. */
	groupBy = $state('');
	error: ApiError | null = $state.raw(null);
	isLoading = $state(true);
	#again: () => void = () => {};

	/** @returns ends the call, where another question makes it needless */
	ask(question: Question): () => void {
		const running = new AbortController();
		this.#again = () => void this.#fetch(question, running.signal);
		untrack(() => this.#again());
		return () => running.abort();
	}

	retry() {
		this.#again();
	}

	async #fetch(question: Question, signal: AbortSignal) {
		this.isLoading = true;
		this.error = null;
		try {
			const answer = await getJson<TrendAnswer>('/trends', { query: question, signal });
			if (signal.aborted) return;
			this.answer = answer;
			this.groupBy = question.groupBy;
		} catch (cause) {
			if (signal.aborted) return;
			this.error = cause instanceof ApiError ? cause : new ApiError(0, 'The trend could not be fetched.');
		}
		this.isLoading = false;
	}
}

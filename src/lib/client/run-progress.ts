import { getJson } from './api';
import { ApiError } from './problem';

interface Watched {
	id: string;
	state: string;
}

const EVERY_MS = 1000;
const SLOWEST_MS = 15_000;

/** Whether the server is still at work on one of them. */
export const isPending = (traces: readonly Watched[]): boolean =>
	traces.some(({ state }) => state === 'received' || state === 'processing');

/** What a watcher compares: the traces there are and the state of each. */
export const stateOf = (traces: readonly Watched[]): string =>
	traces.map(({ id, state }) => `${id} ${state}`).join(',');

/**
 * Asks about every second how far a run's traces are, and tells once when that is no longer `known`. A server that does not
 * answer is asked ever less often; a page that nobody looks at asks nothing.
 * @returns ends the watch
 */
export function watchRun(run: string, known: string, onchange: () => void): () => void {
	const ended = new AbortController();
	let waitMs = EVERY_MS;
	let timer = setTimeout(look, waitMs);

	async function look() {
		if (!document.hidden) {
			try {
				const { traces } = await getJson<{ traces: Watched[] }>(`/runs/${encodeURIComponent(run)}`, {
					signal: ended.signal
				});
				if (stateOf(traces) !== known) return onchange();
				waitMs = EVERY_MS;
			} catch (cause) {
				if (ended.signal.aborted || (cause instanceof ApiError && !cause.mayRetry)) return;
				waitMs = Math.min(waitMs * 2, SLOWEST_MS);
			}
		}
		if (!ended.signal.aborted) timer = setTimeout(look, waitMs);
	}

	return () => {
		clearTimeout(timer);
		ended.abort();
	};
}

import type { TraceWindow } from '$lib/client/trace-window';
import type { Window } from './window';

export type LoadTrace = (
	channels: readonly string[],
	from: number,
	to: number,
	points: number,
	signal: AbortSignal
) => Promise<TraceWindow>;

/** Dragging and wheeling ask many times a second; only the last is fetched. */
const SETTLE_MS = 70;

/** Fetches what a trace chart shows; keeps the last answer on screen until the next has come. */
export class TraceLoader {
	data: TraceWindow = $state.raw({ time: [], series: {} });
	isLoading = $state(true);
	error: string | null = $state(null);
	#last: (() => Promise<void>) | undefined;
	#timer: ReturnType<typeof setTimeout> | undefined;
	#running: AbortController | undefined;

	ask(load: LoadTrace, channels: readonly string[], { from, to }: Window, points: number) {
		this.#last = () => this.#fetch(load, channels, from, to, points);
		this.isLoading = true;
		clearTimeout(this.#timer);
		this.#timer = setTimeout(() => void this.#last?.(), this.data.time.length === 0 ? 0 : SETTLE_MS);
	}

	retry() {
		this.isLoading = true;
		void this.#last?.();
	}

	stop() {
		clearTimeout(this.#timer);
		this.#running?.abort();
	}

	async #fetch(load: LoadTrace, channels: readonly string[], from: number, to: number, points: number) {
		this.#running?.abort();
		const running = new AbortController();
		this.#running = running;
		try {
			const data = await load(channels, from, to, points, running.signal);
			if (running.signal.aborted) return;
			this.data = data;
			this.error = null;
		} catch (cause) {
			if (running.signal.aborted) return;
			this.error = cause instanceof Error ? cause.message : 'The trace could not be fetched.';
		}
		this.isLoading = false;
	}
}

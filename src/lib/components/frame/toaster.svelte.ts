import { getContext, setContext } from 'svelte';

export interface Toast {
	id: number;
	/** What happened, as a sentence. */
	text: string;
	undo?: (() => void | Promise<void>) | undefined;
}

/** Long enough to read and to reach the undo button; held while pointer or focus is on the toast. */
const SHOWN_MS = 8_000;
const SHOWN_WITH_UNDO_MS = 15_000;

export class Toaster {
	shown = $state<Toast[]>([]);
	#next = 1;
	readonly #timers: Record<number, ReturnType<typeof setTimeout>> = {};

	say(text: string, undo?: Toast['undo']) {
		const toast = { id: this.#next++, text, undo };
		this.shown.push(toast);
		this.release(toast);
	}

	dismiss(id: number) {
		this.hold(id);
		this.shown = this.shown.filter((toast) => toast.id !== id);
	}

	hold(id: number) {
		clearTimeout(this.#timers[id]);
		delete this.#timers[id];
	}

	release(toast: Toast) {
		this.hold(toast.id);
		const shownMs = toast.undo ? SHOWN_WITH_UNDO_MS : SHOWN_MS;
		this.#timers[toast.id] = setTimeout(() => this.dismiss(toast.id), shownMs);
	}
}

const KEY = Symbol('toaster');

export const provideToaster = (): Toaster => setContext(KEY, new Toaster());
export const useToaster = (): Toaster => getContext<Toaster>(KEY);

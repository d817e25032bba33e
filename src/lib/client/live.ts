const POLL_MS = 20_000;
/** How soon the stream is tried again after the server refused it; while it only broke, the browser comes back by itself. */
const RETRY_MS = 30_000;

interface Live {
	/** Something may be another: read again. */
	onchange: () => void;
	/** Whether changes are told at once; when not, they are asked for every now and then. */
	onstate: (isLive: boolean) => void;
}

/**
 * Listens to a stream of changes while the page is seen, and asks every now and then where there is no stream. A hidden page
 * holds no connection: a browser has few of them for all its windows.
 * @returns ends it
 */
export function listenLive(url: string, { onchange, onstate }: Live): () => void {
	let source: EventSource | null = null;
	let poll: ReturnType<typeof setInterval> | undefined;
	let retry: ReturnType<typeof setTimeout> | undefined;
	let hasMissed = false;

	function fallBack() {
		hasMissed = true;
		onstate(false);
		poll ??= setInterval(onchange, POLL_MS);
	}
	function open() {
		clearTimeout(retry);
		source?.close();
		source = new EventSource(url);
		source.addEventListener('changed', onchange);
		source.onopen = () => {
			clearInterval(poll);
			poll = undefined;
			onstate(true);
			if (hasMissed) onchange();
			hasMissed = false;
		};
		source.onerror = () => {
			fallBack();
			if (source?.readyState === EventSource.CLOSED) retry = setTimeout(open, RETRY_MS);
		};
	}
	function close() {
		clearTimeout(retry);
		clearInterval(poll);
		poll = undefined;
		source?.close();
		source = null;
	}
	function seen() {
		if (document.visibilityState === 'hidden') {
			close();
			hasMissed = true;
		} else if (!source) open();
	}
	document.addEventListener('visibilitychange', seen);
	seen();
	return () => {
		document.removeEventListener('visibilitychange', seen);
		close();
	};
}

import type { Principal } from '../access';

const HEARTBEAT_MS = 15_000;
/** How soon a browser comes back after the stream has ended. */
const RETRY_MS = 2_000;
const CHANGED = 'event: changed\ndata: {}\n\n';

export interface Stream {
	readonly who: Principal;
	readonly body: ReadableStream<Uint8Array>;
	/** Something this person may know of has changed. Said once to a reader who is behind, however often it is. */
	tell(): void;
	end(): void;
}

/** Server-sent events that say that something changed, never what: the reader asks again with their own rights. */
export function makeStream(who: Principal, onend: (stream: Stream) => void): Stream {
	const encoder = new TextEncoder();
	let to: ReadableStreamDefaultController<Uint8Array> | null = null;
	let isWaiting = false;
	const send = (text: string) => to?.enqueue(encoder.encode(text));
	const isBehind = () => (to?.desiredSize ?? 0) <= 0;
	const heartbeat = setInterval(() => {
		if (!isBehind()) send(':\n\n');
	}, HEARTBEAT_MS).unref();
	const finish = () => {
		clearInterval(heartbeat);
		to = null;
		onend(stream);
	};
	const stream: Stream = {
		who,
		body: new ReadableStream<Uint8Array>(
			{
				start: (controller) => {
					to = controller;
					send(`retry: ${RETRY_MS}\n\n`);
				},
				pull: () => {
					if (!isWaiting) return;
					isWaiting = false;
					send(CHANGED);
				},
				cancel: finish
			},
			{ highWaterMark: 2 }
		),
		tell: () => {
			if (isBehind()) isWaiting = true;
			else send(CHANGED);
		},
		end: () => {
			to?.close();
			finish();
		}
	};
	return stream;
}

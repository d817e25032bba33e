import { requireMay, type Principal } from '../access';
import { isStillIn } from '../auth';
import { log } from '../config';
import type { Deps } from '../deps';
import { Problem } from '../problem';
import { openListener, type Channel, type Listener } from './listener';
import { makeStream, type Stream } from './stream';

const MOST_PER_PERSON = 20;
/** Sessions also run out by the clock, which no trigger tells. */
const RECHECK_MS = 30_000;

/** All streams of this process, and the connection that hears for them: opened with the first, kept for the rest. */
class Hub {
	readonly #streams = new Set<Stream>();
	#listener: Promise<Listener> | null = null;
	#isClosed = false;
	readonly #recheck: ReturnType<typeof setInterval>;

	constructor(readonly deps: Deps) {
		this.#recheck = setInterval(() => void this.#endThoseOut(() => true), RECHECK_MS).unref();
	}

	async open(who: Principal): Promise<Stream> {
		const own = [...this.#streams].filter((stream) => stream.who.personId === who.personId);
		if (own.length >= MOST_PER_PERSON)
			throw new Problem(429, 'Too many streams', `At most ${MOST_PER_PERSON} at a time.`);
		await this.#listen();
		// Whoever went out while the connection was made has no word coming.
		if (this.#isClosed || !(await isStillIn(this.deps, who)))
			throw new Problem(503, 'Not now', 'Changes cannot be told at the moment. Read again later.');
		const stream = makeStream(who, (ended) => this.#streams.delete(ended));
		this.#streams.add(stream);
		return stream;
	}

	async #listen(): Promise<void> {
		this.#listener ??= openListener(
			this.deps,
			(channel, payload) => this.#hear(channel, payload),
			() => {
				this.#listener = null;
				this.#endAll();
			}
		);
		try {
			await this.#listener;
		} catch (error) {
			this.#listener = null;
			log.warn({ err: error }, 'changes cannot be heard');
			throw new Problem(503, 'Not now', 'Changes cannot be told at the moment. Read again later.');
		}
	}

	#hear(channel: Channel, payload: string): void {
		if (channel === 'access') {
			void this.#endThoseOut((who) => who.personId === payload);
			return;
		}
		const [what, clientId] = payload.split(' ');
		for (const stream of this.#streams) {
			const mayKnow = what === 'taken' || !stream.who.clientId || stream.who.clientId === clientId;
			if (mayKnow) stream.tell();
		}
	}

	async #endThoseOut(concerned: (who: Principal) => boolean): Promise<void> {
		for (const stream of [...this.#streams].filter(({ who }) => concerned(who))) {
			const isIn = await isStillIn(this.deps, stream.who).catch(() => false);
			if (!isIn) stream.end();
		}
	}

	#endAll(): void {
		for (const stream of [...this.#streams]) stream.end();
	}

	async close(): Promise<void> {
		this.#isClosed = true;
		clearInterval(this.#recheck);
		this.#endAll();
		const listener = await this.#listener?.catch(() => null);
		await listener?.close();
	}
}

const hubs = new WeakMap<Deps, Hub>();
function of(deps: Deps): Hub {
	let hub = hubs.get(deps);
	if (!hub) hubs.set(deps, (hub = new Hub(deps)));
	return hub;
}

/** An answer that stays open and says each time the schedule, as this person may see it, has changed. */
export async function scheduleEvents(deps: Deps, who: Principal): Promise<Response> {
	requireMay(who, 'schedule.read');
	const { body } = await of(deps).open(who);
	return new Response(body, {
		headers: {
			'content-type': 'text/event-stream',
			'cache-control': 'no-store',
			// Proxies that gather answers before passing them on would hold the word back.
			'x-accel-buffering': 'no'
		}
	});
}

/** Ends every stream: a server that is to stop waits for its last answer. */
export async function closeEvents(deps: Deps): Promise<void> {
	await hubs.get(deps)?.close();
}

import pg from 'pg';
import { log } from '../config';
import type { Deps } from '../deps';

const CHANNELS = ['schedule', 'access'] as const;
export type Channel = (typeof CHANNELS)[number];

const BEAT_MS = 10_000;
const BEAT_TIMEOUT_MS = 5_000;

export interface Listener {
	close(): Promise<void>;
}

/**
 * The one connection that hears for all streams of this process.
 * @param onlost it no longer hears, and what was said meanwhile is missed
 */
export async function openListener(
	deps: Deps,
	onword: (channel: Channel, payload: string) => void,
	onlost: () => void
): Promise<Listener> {
	const client = new pg.Client({
		connectionString: deps.config.databaseUrl('lab'),
		connectionTimeoutMillis: 10_000,
		query_timeout: BEAT_TIMEOUT_MS,
		keepAlive: true,
		application_name: 'trunnion events'
	});
	let isOpen = true;
	const lose = (error?: Error) => {
		if (!isOpen) return;
		isOpen = false;
		clearInterval(beat);
		if (error) log.warn({ err: error }, 'the connection that hears of changes is lost');
		onlost();
		client.end().catch(() => undefined);
	};
	// A peer that vanished without a word is found out by asking it.
	const beat = setInterval(() => void client.query('select 1').catch(lose), BEAT_MS).unref();
	client.on('error', lose);
	client.on('end', () => lose());
	client.on('notification', ({ channel, payload }) => {
		const known = CHANNELS.find((each) => each === channel);
		if (known) onword(known, payload ?? '');
	});
	try {
		await client.connect();
		for (const channel of CHANNELS) await client.query(`listen ${channel}`);
	} catch (error) {
		isOpen = false;
		clearInterval(beat);
		client.end().catch(() => undefined);
		throw error;
	}
	return {
		close: async () => {
			isOpen = false;
			clearInterval(beat);
			await client.end();
		}
	};
}

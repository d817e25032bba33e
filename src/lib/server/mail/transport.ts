import { createTransport, type Transporter } from 'nodemailer';
import type { Config } from '../config';
import type { Deps } from '../deps';

const transports = new WeakMap<Deps, Transporter>();

function open(smtpUrl: string): Transporter {
	return createTransport({
		url: smtpUrl,
		pool: true,
		maxConnections: 2,
		// Only the job queue tries again: it counts, waits longer each time, and is not lost with this process.
		maxRequeues: 0,
		connectionTimeout: 10_000,
		greetingTimeout: 10_000,
		socketTimeout: 30_000,
		// A letter's words must never make the library read a file or an address.
		disableFileAccess: true,
		disableUrlAccess: true
	});
}

/** One pool of connections for a process. */
export function transportOf(deps: Deps): Transporter {
	let transport = transports.get(deps);
	if (!transport) transports.set(deps, (transport = open(deps.config.smtpUrl)));
	return transport;
}

/** Ends the connections, so that the process can end. */
export function closeMail(deps: Deps): void {
	transports.get(deps)?.close();
	transports.delete(deps);
}

/** The lab's own mailbox: `Name <address>`, or the bare address. */
export function senderOf(config: Config): { name: string; address: string } {
	const parts = /^\s*(.*?)\s*<([^<>\s]+)>\s*$/.exec(config.mailFrom);
	return parts ? { name: parts[1]!, address: parts[2]! } : { name: '', address: config.mailFrom.trim() };
}

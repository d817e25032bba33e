import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import pg from 'pg';
import { afterAll, beforeAll } from 'vitest';
import type { Role } from '../../src/lib/server/access';
import { addPerson, createTokenFor } from '../../src/lib/server/auth';
import { readConfig } from '../../src/lib/server/config';
import { closeDeps, openDeps, type Deps } from '../../src/lib/server/deps';
import { testServices } from '../setup/services';
import { useStack, type CaughtMail } from '../setup/stack';

export const PASSWORD = 'a sentence nobody guesses';

export interface Answer {
	status: number;
	text: string;
	location: string | null;
	headers: Headers;
}

/** The built server with its worker and a mail server, and people who use it as browsers and programs do. */
export function useAccountsLab() {
	const stack = useStack();
	let deps: Deps;
	let behind: pg.Client;
	let made = 0;

	beforeAll(async () => {
		deps = openDeps(readConfig({ ...process.env, ...stack.current.env }), 4);
		behind = new pg.Client({ connectionString: stack.current.database.url('superuser') });
		await behind.connect();
	});
	afterAll(async () => {
		await behind.end();
		await closeDeps(deps);
	});

	async function answerOf(response: Response): Promise<Answer> {
		const { status, headers } = response;
		return { status, headers, text: await response.text(), location: headers.get('location') };
	}

	const lab = {
		stack,
		/** Past every policy, to look at what is kept. */
		sql: async <T extends pg.QueryResultRow>(text: string, values: unknown[] = []) =>
			(await behind.query<T>(text, values)).rows,
		/** A person who can sign in, with a token. */
		async person(role: Role, clientCode?: string) {
			const email = `${role}${++made}@fellmoor.example`;
			const id = await addPerson(deps, {
				email,
				name: `Sam ${role} ${made}`,
				role,
				clientCode,
				password: PASSWORD
			});
			return { id, email, token: await createTokenFor(deps, email, 'test') };
		},
		async api(token: string, method: string, address: string, body?: unknown, headers = {}): Promise<Answer> {
			return answerOf(
				await fetch(`${stack.current.origin}/api/v1${address}`, {
					method,
					headers: {
						authorization: `Bearer ${token}`,
						...(body === undefined ? {} : { 'content-type': 'application/json' }),
						...headers
					},
					...(body === undefined ? {} : { body: JSON.stringify(body) })
				})
			);
		},
		/** As a browser without a script asks for a page, or sends its form. */
		async browse(address: string, form?: Record<string, string>, cookie?: string): Promise<Answer> {
			return answerOf(
				await fetch(new URL(address, stack.current.origin), {
					method: form ? 'POST' : 'GET',
					redirect: 'manual',
					headers: {
						accept: 'text/html',
						...(cookie ? { cookie } : {}),
						...(form
							? {
									origin: stack.current.origin,
									'sec-fetch-site': 'same-origin',
									'content-type': 'application/x-www-form-urlencoded'
								}
							: {})
					},
					...(form ? { body: new URLSearchParams(form).toString() } : {})
				})
			);
		},
		/** @returns the session's cookie, or null when the sign-in was refused */
		async signIn(email: string, password = PASSWORD): Promise<string | null> {
			const { status, headers } = await lab.browse('/sign-in', { email, password });
			return status === 303 ? (headers.get('set-cookie')?.split(';')[0] ?? null) : null;
		},
		/** The next mails to this address, oldest first, once there are so many. */
		async mailsTo(email: string, count: number): Promise<CaughtMail[]> {
			for (const until = Date.now() + 30_000; Date.now() < until; await sleep(100)) {
				const mails = (await stack.current.mails()).filter((mail) => mail.to.includes(email));
				if (mails.length >= count) return mails.sort((a, b) => a.number - b.number);
			}
			throw new Error(`fewer than ${count} mails to ${email}`);
		},
		/** All that the server and the worker have written into their logs. */
		logs(): string {
			const folder = path.join(testServices().home, 'stacks', stack.current.database.name);
			return readdirSync(folder)
				.filter((file) => file.endsWith('.log'))
				.map((file) => readFileSync(path.join(folder, file), 'utf8'))
				.join('\n');
		}
	};
	return lab;
}

/** The link in a mail, as one paragraph of its own. */
export function linkIn(mail: CaughtMail): { path: string; secret: string } {
	const [, path, secret] =
		/(\/(?:invitation|reset)\/[0-9a-f-]{36}\.([A-Za-z0-9_-]{43}))\s*$/m.exec(mail.text) ?? [];
	if (!path || !secret) throw new Error(`no link in: ${mail.text}`);
	return { path, secret };
}

import { mkdirSync } from 'node:fs';
import path from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { afterAll, beforeAll } from 'vitest';
import { root } from '../../src/local/place.js';
import { endProcess, freePort, lastLines, startProcess, type Running } from '../../src/local/processes.js';
import { startMailCatcher } from '../../src/local/services.js';
import { createDatabase, hasFailed, type TestDatabase } from './database';
import { testServices } from './services';

export interface CaughtMail {
	number: number;
	at: string;
	from: string;
	to: string[];
	subject: string;
	messageId: string;
	text: string;
	hasHtml: boolean;
	attachments: { filename: string; contentType: string; sizeB: number }[];
}

/** How the mail server shall misbehave; see src/local/mail-behaviour.js. */
export interface MailRule {
	recipient: string;
	action: 'refuse' | 'delay' | 'close_after_data';
	code?: number;
	delayMs?: number;
	times?: number;
}

export interface Stack {
	/** Where the web server listens, as browsers write it. */
	origin: string;
	env: Record<string, string>;
	database: TestDatabase;
	mailPage: string;
	/** All mails caught so far, newest first. */
	mails(): Promise<CaughtMail[]>;
	/** A caught mail as it came in. */
	rawMail(number: number): Promise<string>;
	misbehave(rules: MailRule[]): Promise<void>;
	/** Ends the worker or the web server with this signal, as a crash or a deployment does. */
	end(part: 'web' | 'worker', signal: NodeJS.Signals): Promise<void>;
	start(part: 'web' | 'worker'): Promise<void>;
	stop(): Promise<void>;
}

/** The built server, a worker and a mail catcher on random ports, over a database and a bucket of their own. */
async function startStack(extra: Record<string, string> = {}): Promise<Stack> {
	const database = await createDatabase();
	const folder = path.join(testServices().home, 'stacks', database.name);
	mkdirSync(folder, { recursive: true });
	const log = (name: string) => path.join(folder, `${name}.log`);
	const mail = await startMailCatcher(path.join(folder, 'mail'), log('mail-catcher'), database.env);
	const port = await freePort();
	const origin = `http://localhost:${port}`;
	const env = {
		...database.env,
		SMTP_URL: mail.smtpUrl,
		HOST: '127.0.0.1',
		PORT: String(port),
		ORIGIN: origin,
		...extra
	};
	const parts = new Map<'web' | 'worker', Running>();
	const commands = { web: ['build/index.js'], worker: ['--import', 'tsx', 'src/worker.ts'] };

	const stack: Stack = {
		origin,
		env,
		database,
		mailPage: mail.page,
		mails: async () => (await (await fetch(`${mail.page}/mails.json`)).json()) as CaughtMail[],
		rawMail: async (number) => (await fetch(`${mail.page}/mails/${number}.eml`)).text(),
		misbehave: async (rules) => {
			const answer = await fetch(`${mail.page}/behaviour`, {
				method: 'POST',
				headers: { 'content-type': 'application/json' },
				body: JSON.stringify(rules)
			});
			if (!answer.ok) throw new Error(await answer.text());
		},
		end: async (part, signal) => {
			const running = parts.get(part);
			if (running) await endProcess(running, signal, 20_000);
			parts.delete(part);
		},
		start: async (part) => {
			const command = [process.execPath, ...commands[part]];
			const running = startProcess(part, command, { env, cwd: root, log: log(part) });
			parts.set(part, running);
			if (parts.has('web')) await waitForHealth(origin, running, parts.has('worker'));
		},
		stop: async () => {
			await stack.end('web', 'SIGTERM');
			await stack.end('worker', 'SIGTERM');
			await endProcess(mail.running, 'SIGTERM', 3_000);
		}
	};
	try {
		await stack.start('worker');
		await stack.start('web');
	} catch (error) {
		await stack.stop();
		throw error;
	}
	return stack;
}

/** Until the web server answers, and with a worker until all is well. */
async function waitForHealth(origin: string, running: Running, hasWorker: boolean): Promise<void> {
	let ended: string | undefined;
	void running.gone.then((how) => (ended = how));
	const until = performance.now() + 60_000;
	let said = '';
	while (performance.now() < until) {
		if (ended !== undefined) throw new Error(`${running.name} ${ended}: ${lastLines(running.log, 20)}`);
		const answer = await fetch(`${origin}/api/v1/health`).catch(() => null);
		said = answer ? await answer.text() : 'no answer';
		if (answer?.status === 200 && (!hasWorker || (JSON.parse(said) as { status: string }).status === 'ok'))
			return;
		await sleep(100);
	}
	throw new Error(`not healthy after a minute: ${said}\n${lastLines(running.log, 20)}`);
}

/** A stack for this test file; its logs and database are kept while the run lasts when a test of the file failed. */
export function useStack(extra: Record<string, string> = {}): { readonly current: Stack } {
	let made: Stack | undefined;
	beforeAll(async () => {
		made = await startStack(extra);
	});
	afterAll(async ({}, suite) => {
		await made?.stop();
		if (!hasFailed(suite)) await made?.database.drop();
	});
	return {
		get current() {
			if (!made) throw new Error('The stack is there from the first hook or test on, not before.');
			return made;
		}
	};
}

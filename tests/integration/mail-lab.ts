import { mkdirSync } from 'node:fs';
import path from 'node:path';
import { Logger, runOnce, type TaskList } from 'graphile-worker';
import ICAL from 'ical.js';
import { simpleParser, type ParsedMail } from 'mailparser';
import { afterAll, beforeAll } from 'vitest';
import { JOBS } from '../../src/lib/server/jobs';
import { closeMail, mailHandlers } from '../../src/lib/server/mail';
import { endProcess } from '../../src/local/processes.js';
import { startMailCatcher } from '../../src/local/services.js';
import { testServices } from '../setup/services';
import type { CaughtMail, MailRule } from '../setup/stack';
import { useBookingLab } from './booking-lab';

export const ORIGIN = 'https://bench.fellmoor.example';

const silent = new Logger(() => () => undefined);

/** A lab whose mail goes to a mail server process of its own. */
export function useMailLab() {
	let catcher: Awaited<ReturnType<typeof startMailCatcher>> | undefined;
	let seen = 0;
	const page = () => catcher!.page;

	beforeAll(async () => {
		const folder = path.join(testServices().home, `mail-${process.pid}-${Date.now()}`);
		mkdirSync(folder, { recursive: true });
		const { PATH = '' } = process.env;
		catcher = await startMailCatcher(path.join(folder, 'mails'), path.join(folder, 'log'), { PATH });
	});
	const lab = useBookingLab(() => ({ SMTP_URL: catcher!.smtpUrl, ORIGIN }));
	afterAll(async () => {
		closeMail(lab.deps);
		if (catcher) await endProcess(catcher.running, 'SIGTERM', 3000);
	});

	const caught = async () => (await (await fetch(`${page()}/mails.json`)).json()) as CaughtMail[];
	return {
		lab,
		/** Runs every job that is due, and those that they add. */
		async work() {
			const handlers = mailHandlers(lab.deps);
			const { 'mail.notify': notify, 'mail.account': ofAccount, 'mail.send': send } = handlers;
			const taskList: TaskList = {
				'mail.notify': (payload) => notify(JOBS['mail.notify'].payload.parse(payload)),
				'mail.account': (payload) => ofAccount(JOBS['mail.account'].payload.parse(payload)),
				'mail.send': (payload) => send(JOBS['mail.send'].payload.parse(payload))
			};
			await runOnce({ pgPool: lab.deps.pools.queuePool, taskList, noHandleSignals: true, logger: silent });
		},
		/** What came in since the last look, oldest first. */
		async arrived(): Promise<CaughtMail[]> {
			const fresh = (await caught()).filter((mail) => mail.number > seen).sort((a, b) => a.number - b.number);
			seen = Math.max(seen, ...fresh.map((mail) => mail.number));
			return fresh;
		},
		async raw(number: number): Promise<string> {
			return (await fetch(`${page()}/mails/${number}.eml`)).text();
		},
		async misbehave(rules: MailRule[]): Promise<void> {
			const answer = await fetch(`${page()}/behaviour`, {
				method: 'POST',
				headers: { 'content-type': 'application/json' },
				body: JSON.stringify(rules)
			});
			if (!answer.ok) throw new Error(await answer.text());
		},
		async parsed(mail: CaughtMail): Promise<ParsedMail> {
			return simpleParser(await this.raw(mail.number));
		},
		/** The calendar part as a strict reader of RFC 5545 reads it. */
		async calendar(mail: CaughtMail) {
			const part = (await this.parsed(mail)).attachments.find((one) => one.contentType === 'text/calendar');
			const file = (await this.parsed(mail)).attachments.find((one) => one.filename === 'booking.ics');
			const text = (part ?? file)!.content.toString('utf8');
			const calendar = new ICAL.Component(ICAL.parse(text) as unknown[]);
			return { text, calendar, event: calendar.getFirstSubcomponent('vevent')! };
		}
	};
}

import ICAL from 'ical.js';
import { simpleParser, type ParsedMail } from 'mailparser';
import { setTimeout as sleep } from 'node:timers/promises';
import type { Page } from 'playwright-core';
import { expect } from 'vitest';
import type { Stack } from '../setup/stack';

/** The newest mail to someone whose subject is so, as a mail program reads it. */
export async function mailTo(stack: Stack, recipient: string, subject: RegExp): Promise<ParsedMail> {
	for (const until = Date.now() + 30_000; Date.now() < until; await sleep(250)) {
		const found = (await stack.mails()).find(
			(mail) => mail.to.includes(recipient) && subject.test(mail.subject)
		);
		if (found) return simpleParser(await stack.rawMail(found.number));
	}
	throw new Error(`No mail to ${recipient} like ${subject} in half a minute.`);
}

/** The one event that a mail brings into a calendar. */
export function entryOf(mail: ParsedMail) {
	const entry = mail.attachments.find(({ contentType }) => contentType === 'text/calendar');
	expect(entry, 'the mail carries a calendar').toBeDefined();
	const calendar = new ICAL.Component(ICAL.parse(String(entry?.content)) as unknown[]);
	const events = calendar.getAllSubcomponents('vevent').map((each) => new ICAL.Event(each));
	expect(events).toHaveLength(1);
	const [{ uid, sequence, startDate, endDate }] = events as [ICAL.Event];
	return {
		method: calendar.getFirstPropertyValue('method'),
		uid,
		sequence,
		from: startDate.toJSDate().toISOString(),
		to: endDate.toJSDate().toISOString()
	};
}

/** The address that a mail sends its reader to, which begins with this path. */
export async function linkFrom(
	stack: Stack,
	recipient: string,
	subject: RegExp,
	path: string
): Promise<string> {
	const { text } = await mailTo(stack, recipient, subject);
	const link = new RegExp(`${stack.origin}/${path}/\\S+`).exec(text ?? '')?.[0];
	expect(link, text).toBeDefined();
	return link!;
}

export async function choosePassword(page: Page, link: string, password: string): Promise<void> {
	await page.goto(link, { waitUntil: 'networkidle' });
	await page.getByLabel('Password', { exact: true }).fill(password);
	await page.getByLabel('Password again').fill(password);
	await page.getByRole('button', { name: 'Set password' }).click();
	await page.waitForURL('**/sign-in?done=password');
}

import { mkdtempSync, rmSync } from 'node:fs';
import { request } from 'node:http';
import path from 'node:path';
import { createTransport } from 'nodemailer';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { endProcess, type Running } from '../../src/local/processes.js';
import { startMailCatcher } from '../../src/local/services.js';
import type { CaughtMail } from '../setup/stack';

let folder: string;
let running: Running;
let page: string;
let smtpUrl: string;

const start = async () => {
	({ running, page, smtpUrl } = await startMailCatcher(path.join(folder, 'mail'), path.join(folder, 'log'), {
		PATH: process.env.PATH
	}));
};
const stop = () => endProcess(running, 'SIGTERM', 3_000);

beforeAll(async () => {
	folder = mkdtempSync('/var/tmp/trunnion-test-mail-');
	await start();
});
afterAll(async () => {
	await stop();
	rmSync(folder, { recursive: true, force: true });
});

const send = (to: string, more: object = {}) =>
	createTransport(smtpUrl).sendMail({
		from: 'lab@lab.example',
		to,
		subject: 'A word',
		text: 'text',
		...more
	});
const caught = async () => (await (await fetch(`${page}/mails.json`)).json()) as CaughtMail[];
const behave = (rules: unknown, type = 'application/json') =>
	fetch(`${page}/behaviour`, {
		method: 'POST',
		headers: { 'content-type': type },
		body: JSON.stringify(rules)
	});

it('says what will be here while nothing is', async () => {
	const answer = await fetch(page);
	expect(answer.headers.get('content-security-policy')).toContain("default-src 'none'");
	expect(await answer.text()).toContain('Nothing has been sent yet.');
});

it('shows what was sent without letting any of it act', async () => {
	await send('one@a.example, two@b.example', {
		subject: '<script>alert(1)</script>',
		text: 'See https://lab.example/reset?a=1&b=2 <img src=x onerror=alert(2)>',
		html: '<p>Hello</p><script>alert(3)</script>',
		attachments: [{ filename: 'sl"ot\r\n.ics', content: 'BEGIN:VCALENDAR', contentType: 'text/calendar' }]
	});
	const [mail] = await caught();
	expect(mail).toMatchObject({
		number: 1,
		from: 'lab@lab.example',
		to: ['one@a.example', 'two@b.example'],
		subject: '<script>alert(1)</script>',
		hasHtml: true,
		attachments: [{ contentType: 'text/calendar', sizeB: 15 }]
	});
	for (const address of [page, `${page}/mails/1`]) {
		const html = await (await fetch(address)).text();
		expect(html).toContain('&lt;script&gt;alert(1)');
		expect(html).not.toMatch(/<script|<img/);
	}
	const shown = await (await fetch(`${page}/mails/1`)).text();
	expect(shown).toContain('<iframe sandbox src="/mails/1/html"');
	expect(shown).toContain('<a href="https://lab.example/reset?a=1&amp;b=2" rel="noreferrer">');
	const html = await fetch(`${page}/mails/1/html`);
	expect(html.headers.get('content-security-policy')).toMatch(/^sandbox; default-src 'none'/);
	const attachment = await fetch(`${page}/mails/1/attachments/0`);
	expect(attachment.headers.get('content-disposition')).toMatch(/^attachment; /);
	expect(attachment.headers.get('content-type')).toBe('application/octet-stream');
	expect(await attachment.text()).toBe('BEGIN:VCALENDAR');
	expect(await (await fetch(`${page}/mails/1.eml`)).text()).toContain('Subject: ');
	expect((await fetch(`${page}/mails/2`)).status).toBe(404);
});

it('keeps its mails over a stop, and shows the newest first', async () => {
	await stop();
	await start();
	await send('three@a.example', { subject: 'Later' });
	expect((await caught()).map((mail) => mail.subject)).toEqual(['Later', '<script>alert(1)</script>']);
});

it('misbehaves as it is told, so often as it is told', async () => {
	const known = (await caught()).length;
	await behave([
		{ recipient: '^slow@', action: 'delay', delayMs: 300 },
		{ recipient: '^no@', action: 'refuse', code: 550 },
		{ recipient: '^busy@', action: 'refuse', code: 451, times: 1 },
		{ recipient: '^gone@', action: 'refuse', code: 421, times: 1 },
		{ recipient: '^cut@', action: 'close_after_data', times: 1 }
	]);
	await expect(send('no@a.example')).rejects.toMatchObject({ responseCode: 550 });
	await expect(send('busy@a.example')).rejects.toMatchObject({ responseCode: 451 });
	await send('busy@a.example');
	await expect(send('gone@a.example')).rejects.toMatchObject({ responseCode: 421 });
	await send('gone@a.example');
	// Taken, yet never confirmed: the sender has to send it again.
	await expect(send('cut@a.example')).rejects.toThrow();
	await send('cut@a.example');
	const began = performance.now();
	await send('slow@a.example');
	expect(performance.now() - began).toBeGreaterThan(290);
	const since = (await caught()).slice(0, -known).map((mail) => mail.to[0]!.split('@')[0]);
	expect(since).toEqual(['slow', 'cut', 'cut', 'gone', 'busy']);
	expect((await behave([])).status).toBe(200);
});

it('takes its orders from tests, and is read on this machine, alone', async () => {
	expect((await behave([{ recipient: '(', action: 'refuse' }])).status).toBe(400);
	expect((await behave({ recipient: 'a' })).status).toBe(400);
	expect((await behave([], 'text/plain')).status).toBe(415);
	const { hostname, port } = new URL(page);
	const status = await new Promise((resolve, reject) => {
		const get = request(
			{ hostname, port, path: '/mails.json', headers: { host: 'other.example' } },
			(answer) => {
				answer.resume();
				resolve(answer.statusCode);
			}
		);
		get.on('error', reject);
		get.end();
	});
	expect(status).toBe(421);
});

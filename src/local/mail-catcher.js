import { createServer } from 'node:http';
import { buffer, text as readText } from 'node:stream/consumers';
import { setTimeout as sleep } from 'node:timers/promises';
import { parseArgs } from 'node:util';
import { SMTPServer } from 'smtp-server';
import { parseRules, takeRule } from './mail-behaviour.js';
import { STYLE, listPage, mailPage, notFoundPage } from './mail-page.js';
import { MailStore } from './mail-store.js';
import { textOf } from './place.js';

/**
 * The mail server of a machine that has none: takes every mail on a loopback port and shows it on a page; delivers none.
 * `node mail-catcher.js --folder F [--page-port P]`; tells its parent both ports. Tests read `/mails.json` and
 * `/mails/<number>.eml`, and set rules with `POST /behaviour`.
 *
 * @typedef {import('node:http').IncomingMessage} IncomingMessage
 * @typedef {import('node:http').ServerResponse} ServerResponse
 */
const { values } = parseArgs({
	options: { folder: { type: 'string' }, 'page-port': { type: 'string', default: '0' } }
});
if (!values.folder) throw new Error('mail-catcher.js needs --folder.');

const store = new MailStore(values.folder);
/** @type {import('./mail-behaviour.js').Rule[]} */
let rules = [];
/** @type {Map<number, import('node:net').Socket>} by the sender's port */
const sockets = new Map();

const smtp = new SMTPServer({
	disabledCommands: ['AUTH', 'STARTTLS'],
	authOptional: true,
	size: 50_000_000,
	onRcptTo({ address }, session, done) {
		const rule = takeRule(rules, ['refuse'], [address]);
		if (!rule) return done();
		done(Object.assign(new Error(`${rule.code} as the test wants`), { responseCode: rule.code }));
		if (rule.code === 421) setTimeout(() => sockets.get(session.remotePort)?.destroy(), 20);
	},
	onData(stream, session, done) {
		const to = session.envelope.rcptTo.map(({ address }) => address);
		const from = session.envelope.mailFrom ? session.envelope.mailFrom.address : '';
		const receive = async () => {
			const raw = await buffer(stream);
			if (stream.sizeExceeded)
				throw Object.assign(new Error('The mail is larger than 50 MB.'), { responseCode: 552 });
			const rule = takeRule(rules, ['delay', 'close_after_data'], to);
			if (rule?.action === 'delay') await sleep(rule.delayMs);
			await store.add(raw, { from, to });
			if (rule?.action === 'close_after_data') sockets.get(session.remotePort)?.destroy();
			else done();
		};
		receive().catch(done);
	}
});
smtp.server.on('connection', (/** @type {import('node:net').Socket} */ socket) => {
	const port = socket.remotePort ?? 0;
	sockets.set(port, socket);
	socket.on('close', () => sockets.delete(port));
});
// A sender that goes away in mid-sentence is none of the other senders' business.
smtp.on('error', (error) => console.error(new Date().toISOString(), textOf(error)));

const SAFE = {
	'content-security-policy':
		"default-src 'none'; style-src 'self'; frame-src 'self'; base-uri 'none'; form-action 'none'; frame-ancestors 'none'",
	'x-content-type-options': 'nosniff',
	'referrer-policy': 'no-referrer',
	'cache-control': 'no-store'
};
const HTML = 'text/html; charset=utf-8';
/** A mail's own HTML: no script, no request to anywhere, no origin. */
const MAIL_HTML =
	"sandbox; default-src 'none'; style-src 'unsafe-inline'; img-src data:; frame-ancestors 'self'";

/**
 * @param {ServerResponse} response
 * @param {number} status
 * @param {string} type
 * @param {string | Buffer} body
 * @param {Record<string, string>} [headers]
 */
const answer = (response, status, type, body, headers = {}) =>
	response.writeHead(status, { ...SAFE, 'content-type': type, ...headers }).end(body);

/**
 * @param {IncomingMessage} request
 * @param {ServerResponse} response
 */
async function respond(request, response) {
	// A page on the internet whose name was made to point here must not read the mail.
	const host = (request.headers.host ?? '').replace(/:\d+$/, '');
	if (!['127.0.0.1', 'localhost', '[::1]'].includes(host))
		return answer(response, 421, 'text/plain', 'Open this page as localhost.\n');
	const url = new URL(request.url ?? '/', 'http://127.0.0.1');
	if (url.pathname === '/behaviour' && request.method === 'POST') return behave(request, response);
	if (request.method !== 'GET' && request.method !== 'HEAD')
		return answer(response, 405, 'text/plain', 'Only GET here.\n', { allow: 'GET' });
	if (url.pathname === '/') {
		const before = Number(url.searchParams.get('before'));
		return answer(response, 200, HTML, listPage(store.summaries, before > 0 ? before : null));
	}
	if (url.pathname === '/style.css') return answer(response, 200, 'text/css; charset=utf-8', STYLE);
	if (url.pathname === '/mails.json')
		return answer(response, 200, 'application/json', JSON.stringify([...store.summaries].reverse()));
	return one(url.pathname, response);
}

/**
 * @param {string} pathname
 * @param {ServerResponse} response
 */
async function one(pathname, response) {
	const [, number, rest = ''] = /^\/mails\/(\d+)(.*)$/.exec(pathname) ?? [];
	const mail = number === undefined ? null : store.find(Number(number));
	const missing = () => answer(response, 404, HTML, notFoundPage());
	if (!mail) return missing();
	if (rest === '') return answer(response, 200, HTML, mailPage(mail));
	if (rest === '.eml')
		return answer(response, 200, 'message/rfc822', await store.raw(mail.number), {
			'content-disposition': `attachment; filename="${mail.number}.eml"`
		});
	const { html, attachments } = await store.parts(mail.number);
	if (rest === '/html' && html !== null)
		return answer(response, 200, HTML, html, { 'content-security-policy': MAIL_HTML });
	const attachment = attachments[Number(/^\/attachments\/(\d+)$/.exec(rest)?.[1] ?? -1)];
	if (!attachment) return missing();
	return answer(response, 200, 'application/octet-stream', attachment.content, {
		'content-disposition': `attachment; filename*=UTF-8''${encodeURIComponent(attachment.filename).replaceAll("'", '%27')}`
	});
}

/**
 * @param {IncomingMessage} request
 * @param {ServerResponse} response
 */
async function behave(request, response) {
	// A foreign page can send a form, but not this content type.
	if (request.headers['content-type'] !== 'application/json')
		return answer(response, 415, 'text/plain', 'Send application/json.\n');
	/** @type {unknown} */
	let given;
	try {
		given = JSON.parse(await readText(request));
	} catch {
		return answer(response, 400, 'text/plain', 'That is not JSON.\n');
	}
	const parsed = parseRules(given);
	if (typeof parsed === 'string') return answer(response, 400, 'text/plain', `${parsed}\n`);
	rules = parsed;
	return answer(response, 200, 'application/json', JSON.stringify(rules));
}

const web = createServer((request, response) => {
	respond(request, response).catch((error) => {
		console.error(new Date().toISOString(), error);
		if (!response.headersSent)
			answer(response, 500, 'text/plain', 'The mail page failed; its log says why.\n');
		else response.destroy();
	});
});

/** @param {import('node:net').Server} server */
function portOf(server) {
	const address = server.address();
	return typeof address === 'object' && address ? address.port : 0;
}
smtp.listen(0, '127.0.0.1', () =>
	web.listen(Number(values['page-port']), '127.0.0.1', () =>
		process.send?.({ smtpPort: portOf(smtp.server), pagePort: portOf(web) })
	)
);
const stop = () => {
	setTimeout(() => process.exit(0), 1_000).unref();
	web.close();
	web.closeIdleConnections();
	smtp.close(() => process.exit(0));
};
process.once('SIGTERM', stop);
process.once('disconnect', stop);

/** The pages of the mail catcher. Everything in them came from outside: nothing goes in without `text`. */

/** @typedef {import('./mail-store.js').Summary} Summary */

/** @param {string} value */
const text = (value) =>
	value
		.replaceAll('&', '&amp;')
		.replaceAll('<', '&lt;')
		.replaceAll('>', '&gt;')
		.replaceAll('"', '&quot;')
		.replaceAll("'", '&#39;');

/**
 * The text of a mail with its web addresses as links: an invitation is of no use if it cannot be followed.
 * @param {string} value
 */
const textWithLinks = (value) =>
	value
		.split(/(https?:\/\/[^\s<>"']+)/)
		.map((part, index) =>
			index % 2 ? `<a href="${text(part)}" rel="noreferrer">${text(part)}</a>` : text(part)
		)
		.join('');

const PAGE_LENGTH = 100;

export const STYLE = `
:root { color-scheme: light dark; --ground: #f3f5f2; --sheet: #fff; --ink: #14201d; --muted: #55635e; --rule: #d3dad5; --accent: #005f56; }
@media (prefers-color-scheme: dark) {
	:root { --ground: #0e1513; --sheet: #161f1c; --ink: #e7eeea; --muted: #9fb0a9; --rule: #2a3833; --accent: #4fc3b0; }
}
* { box-sizing: border-box; }
body { margin: 0 auto; max-width: 60rem; padding: 1.5rem 1rem; background: var(--ground); color: var(--ink); font: 16px/1.5 system-ui, sans-serif; }
h1 { font-size: 1.25rem; margin: 0 0 0.25rem; overflow-wrap: anywhere; }
p.about, time, dt, .to { color: var(--muted); }
p.about { margin: 0 0 1.25rem; }
a { color: var(--accent); }
ol { list-style: none; margin: 0; padding: 0; }
li.mail { display: grid; grid-template-columns: 1fr auto; gap: 0 1rem; padding: 0.75rem 1rem; background: var(--sheet); border-bottom: 1px solid var(--rule); }
li.mail a { font-weight: 600; overflow-wrap: anywhere; }
li.mail .to { grid-column: 1 / -1; overflow-wrap: anywhere; font-size: 0.875rem; }
time { font-variant-numeric: tabular-nums; white-space: nowrap; font-size: 0.875rem; }
dl { display: grid; grid-template-columns: auto 1fr; gap: 0.25rem 1rem; margin: 1rem 0; }
dd { margin: 0; overflow-wrap: anywhere; }
pre, iframe, p.empty { background: var(--sheet); border: 1px solid var(--rule); padding: 1rem; margin: 0 0 1rem; }
pre { white-space: pre-wrap; overflow-wrap: anywhere; font: inherit; }
iframe { width: 100%; height: 18rem; padding: 0; background: #fff; }
h2 { font-size: 1rem; margin: 1.5rem 0 0.5rem; }
@media (max-width: 40rem) { li.mail { grid-template-columns: 1fr; } }
`;

/**
 * @param {string} title
 * @param {string} body
 */
const page = (title, body) => `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>${text(title)}</title>
<link rel="stylesheet" href="/style.css">
</head>
<body>
${body}
</body>
</html>
`;

/** @param {string} at */
const clock = (at) =>
	`<time datetime="${text(at)}">${text(at.slice(0, 10))} ${text(at.slice(11, 19))} UTC</time>`;

/** @param {Summary} mail */
const subjectOf = (mail) => text(mail.subject || '(no subject)');

/**
 * @param {Summary[]} summaries oldest first
 * @param {number | null} before only mails with a smaller number
 */
export function listPage(summaries, before) {
	const wanted = summaries.filter((one) => before === null || one.number < before).reverse();
	const shown = wanted.slice(0, PAGE_LENGTH);
	const rows = shown.map(
		(mail) =>
			`<li class="mail"><a href="/mails/${mail.number}">${subjectOf(mail)}</a>${clock(mail.at)}` +
			`<span class="to">to ${text(mail.to.join(', '))}</span></li>`
	);
	const older =
		wanted.length > shown.length
			? `<p><a href="/?before=${shown.at(-1)?.number ?? 0}">Older mails</a></p>`
			: '';
	const list = rows.length
		? `<ol>\n${rows.join('\n')}\n</ol>${older}`
		: '<p class="empty">Nothing has been sent yet. Every mail of this laboratory will be kept here and goes nowhere else.</p>';
	return page(
		'Caught mail',
		`<h1>Caught mail</h1>\n<p class="about">${summaries.length} kept on this machine; none was delivered to anyone.</p>\n${list}`
	);
}

/** @param {Summary} mail */
export function mailPage(mail) {
	const attachments = mail.attachments.map(
		(one, index) =>
			`<li><a href="/mails/${mail.number}/attachments/${index}" download>${text(one.filename)}</a> <span class="to">${text(one.contentType)}, ${one.sizeB} B</span></li>`
	);
	return page(
		mail.subject || 'Mail',
		[
			'<p><a href="/">All caught mail</a></p>',
			`<h1>${subjectOf(mail)}</h1>`,
			`<dl><dt>From</dt><dd>${text(mail.from)}</dd><dt>To</dt><dd>${text(mail.to.join(', '))}</dd><dt>Received</dt><dd>${clock(mail.at)}</dd>` +
				`<dt>Message-ID</dt><dd>${text(mail.messageId)}</dd></dl>`,
			mail.text ? `<h2>Text</h2><pre>${textWithLinks(mail.text)}</pre>` : '',
			mail.hasHtml
				? `<h2>HTML</h2><iframe sandbox src="/mails/${mail.number}/html" title="The HTML form of this mail"></iframe>`
				: '',
			attachments.length ? `<h2>Attachments</h2><ol>${attachments.join('')}</ol>` : '',
			`<p><a href="/mails/${mail.number}.eml" download>As it came in (.eml)</a></p>`
		].join('\n')
	);
}

export const notFoundPage = () =>
	page('Not found', '<h1>There is no such mail</h1><p><a href="/">All caught mail</a></p>');

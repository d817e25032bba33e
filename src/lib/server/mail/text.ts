/** Controls (also the Unicode line and paragraph separators) and the marks that reverse a line's direction. */
const UNSEEN = /[\p{Cc}\u2028\u2029\u200e\u200f\u202a-\u202e\u2066-\u2069]/u;
const LONGEST_HEADER = 180;

/** Text for one header or calendar line: nothing in it can begin another. */
export function oneLine(text: string, longest = LONGEST_HEADER): string {
	const plain = Array.from(text, (c) => (UNSEEN.test(c) ? ' ' : c))
		.join('')
		.replace(/\s+/g, ' ')
		.trim();
	const characters = Array.from(plain);
	return characters.length > longest ? `${characters.slice(0, longest - 1).join('')}…` : plain;
}

/** Whether an address or a name may go to the mail library as it is. */
export function isOneLine(text: string): boolean {
	return !UNSEEN.test(text);
}

export interface Letter {
	subject: string;
	/** The first sentence says all that matters. */
	opening: string;
	facts: [label: string, value: string | null][];
	paragraphs?: string[];
	link: string;
}

/** The plain text of a letter; facts that are absent are left out. */
export function bodyOf(letter: Letter): string {
	const facts = letter.facts
		.filter((fact): fact is [string, string] => Boolean(fact[1]))
		.map(([label, value]) => `${label}: ${oneLine(value, 500)}`);
	return [letter.opening, facts.join('\n'), ...(letter.paragraphs ?? []), letter.link]
		.filter((part) => part !== '')
		.join('\n\n');
}

const ESCAPES: Record<string, string> = {
	'&': '&amp;',
	'<': '&lt;',
	'>': '&gt;',
	'"': '&quot;',
	"'": '&#39;'
};
const escape = (text: string) => text.replace(/[&<>"']/g, (c) => ESCAPES[c]!);

const FACT = /^([A-Z][A-Za-z ]{1,30}): (.+)$/;

function paragraphHtml(paragraph: string, origin: string): string {
	const lines = paragraph.split('\n');
	const facts = lines.map((line) => FACT.exec(line));
	if (facts.every((fact) => fact !== null)) {
		const rows = facts.map(
			(fact) =>
				`<tr><th scope="row" style="text-align:left;vertical-align:top;padding:2px 16px 2px 0;font-weight:600">${escape(fact[1]!)}</th><td style="padding:2px 0">${escape(fact[2]!)}</td></tr>`
		);
		return `<table style="border-collapse:collapse">${rows.join('')}</table>`;
	}
	if (lines.length === 1 && paragraph.startsWith(`${origin}/`) && !/\s/.test(paragraph))
		return `<p><a href="${escape(paragraph)}">${escape(paragraph)}</a></p>`;
	return `<p>${lines.map(escape).join('<br>')}</p>`;
}

/** The same letter for programs that show HTML: every word of it escaped, and no address but our own made a link. */
export function htmlOf(body: string, origin: string): string {
	const parts = body.split(/\n{2,}/).map((paragraph) => paragraphHtml(paragraph, origin));
	return `<!doctype html><html lang="en"><head><meta charset="utf-8"></head><body style="font:15px/1.5 system-ui,sans-serif;max-width:40rem">${parts.join('')}</body></html>`;
}

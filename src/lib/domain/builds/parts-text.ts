/** Parts as a form's text, one a line: name, colon, value. */

interface Part {
	name: string;
	value: string;
}

const LONGEST_NAME = 80;
const LONGEST_VALUE = 500;
const MOST_PARTS = 200;

const linesOf = (text: string) =>
	text
		.split('\n')
		.map((line) => line.trim())
		.filter(Boolean);

function partOf(line: string): Part {
	const colon = line.indexOf(':');
	if (colon < 0) return { name: line, value: '' };
	return { name: line.slice(0, colon).trim(), value: line.slice(colon + 1).trim() };
}

export const partsOf = (text: string): Part[] => linesOf(text).map(partOf);

export const partsText = (parts: readonly Part[]): string =>
	parts.map(({ name, value }) => (value ? `${name}: ${value}` : name)).join('\n');

/** What is wrong with the text, each with its line: nothing that was typed is cut. */
export function partProblems(text: string): string[] {
	const parts = partsOf(text);
	if (parts.length > MOST_PARTS) return [`At most ${MOST_PARTS} parts; these are ${parts.length}.`];
	return parts.flatMap(({ name, value }, at) => [
		...(name ? [] : [`Part ${at + 1} has no name before its colon.`]),
		...(name.length > LONGEST_NAME
			? [`The name of part ${at + 1} is longer than ${LONGEST_NAME} characters.`]
			: []),
		...(value.length > LONGEST_VALUE
			? [`What part ${at + 1} is takes more than ${LONGEST_VALUE} characters.`]
			: [])
	]);
}

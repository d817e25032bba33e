import { plainDayText } from '$lib/domain/display/clock';
import { RUN_KIND_WORDS } from '$lib/domain/display/words';

/** Part of the sentence that says what is shown. */
export interface FilterWord {
	/** The address parameter that it stands for: what is taken out to remove it. */
	name: string;
	text: string;
}

type Asked = Readonly<Record<string, string | undefined>>;
type Choices = Readonly<Record<string, readonly { value: string; code: string }[]>>;

const THINGS = {
	client: 'client',
	engine: 'engine',
	build: 'build',
	fuel: 'fuel',
	batch: 'batch',
	cell: 'cell'
};
const STATES: Readonly<Record<string, string>> = {
	open: 'open runs',
	closed: 'closed runs',
	accepted: 'accepted runs',
	voided: 'void runs'
};
const FLAGS: Readonly<Record<string, string>> = { true: 'with flags', false: 'without flags' };

/** Filters of an address in words, in the order of a sentence. What the address asks and there is not stands there as it was typed. */
export function filterWords(asked: Asked, choices: Choices): FilterWord[] {
	const kinds: Readonly<Record<string, string>> = RUN_KIND_WORDS;
	const words: Record<string, (value: string) => string> = {
		...Object.fromEntries(
			Object.entries(THINGS).map(([name, word]) => [
				name,
				(value: string) => `${word} ${choices[name]?.find((each) => each.value === value)?.code ?? value}`
			])
		),
		kind: (value) => (kinds[value] ? `kind ${kinds[value].toLowerCase()}` : `kind ${value}`),
		state: (value) => STATES[value] ?? `state ${value}`,
		flagged: (value) => FLAGS[value] ?? `flags ${value}`,
		repeats: () => 'each set of repeats once',
		text: (value) => `with “${value}” in number or title`,
		runs: (value) => {
			const count = value.split(',').filter(Boolean).length;
			return count === 1 ? `only run ${value}` : `${count} chosen runs`;
		},
		from: (value) => `since ${plainDayText(value)}`,
		to: (value) => `until ${plainDayText(value)}`
	};
	return Object.entries(words).flatMap(([name, say]) => {
		const value = asked[name];
		return value ? [{ name, text: say(value) }] : [];
	});
}

/** The address without some of its parameters, and on the first page. */
export function without(url: URL, ...names: string[]): string {
	const query = new URLSearchParams(url.searchParams);
	for (const name of [...names, 'cursor']) query.delete(name);
	return `?${query.toString()}`;
}

/** What a booking's warnings are in a word or two, for a list; the sentences stand on its page. */
const WORDS: Readonly<Record<string, string>> = {
	clash: 'Another time',
	outside_hours: 'Opening hours',
	fuel_not_plumbed: 'Fuel in the cell',
	build_not_ready: 'Build ready'
};
const ABSORBER = 'Look at the absorber';

/** Each need once, in the order of the warnings. A code that is not known here is shown by its own name rather than hidden. */
export function needsOf(warnings: readonly { code: string }[]): string[] {
	const words = warnings.map(({ code }) =>
		code.startsWith('absorber_') ? ABSORBER : (WORDS[code] ?? code.replaceAll('_', ' '))
	);
	return [...new Set(words)];
}

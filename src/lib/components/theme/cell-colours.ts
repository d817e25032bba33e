import { getContext, setContext } from 'svelte';
import { CELL_COLOURS, cellHue } from './tokens';

/** Place in the set of cell colours by the cell's code, as the lab chose them. */
type Chosen = Readonly<Record<string, number>>;
const KEY = Symbol('cell colours');

/** @param chosen read again whenever it is asked, so that a changed colour shows everywhere at once */
export const provideCellColours = (chosen: () => Chosen): void => {
	setContext(KEY, chosen);
};

/** Which `hue-N` a cell has: the lab's choice, or by its code where that is not known. */
export function useCellHue(): (code: string) => number {
	const chosen = getContext<(() => Chosen) | undefined>(KEY);
	return (code) => {
		const place = chosen?.()[code];
		return place === undefined ? cellHue(code) : place % CELL_COLOURS.length;
	};
}

import type { Place } from './clash';
import { laterOnTheWall } from './wall';

const STEP_MINUTES = 30;
const DAY_MINUTES = 24 * 60;

/**
 * Where a bar would stand after this key: Alt with arrows moves it by half an hour or to the next cell, Alt with page keys by
 * a day, Alt and Shift with arrows changes its end. Null for a key that moves nothing.
 * @param cells codes in the order of the columns
 */
export function afterKey(
	place: Place,
	key: { key: string; altKey: boolean; shiftKey: boolean; ctrlKey: boolean; metaKey: boolean },
	cells: readonly string[]
): Place | null {
	if (!key.altKey || key.ctrlKey || key.metaKey) return null;
	const { cell, from, to } = place;
	const by = (minutes: number): Place => ({
		cell,
		from: laterOnTheWall(from, minutes),
		to: laterOnTheWall(to, minutes)
	});
	const beside = (step: number): Place => ({ ...place, cell: cells[cells.indexOf(cell) + step] ?? cell });
	if (key.shiftKey) {
		const end = (minutes: number) => ({ ...place, to: laterOnTheWall(to, minutes) });
		if (key.key === 'ArrowDown') return end(STEP_MINUTES);
		if (key.key === 'ArrowUp') return end(-STEP_MINUTES).to > from ? end(-STEP_MINUTES) : place;
		return null;
	}
	switch (key.key) {
		case 'ArrowUp':
			return by(-STEP_MINUTES);
		case 'ArrowDown':
			return by(STEP_MINUTES);
		case 'ArrowLeft':
			return beside(-1);
		case 'ArrowRight':
			return beside(1);
		case 'PageUp':
			return by(-DAY_MINUTES);
		case 'PageDown':
			return by(DAY_MINUTES);
		default:
			return null;
	}
}

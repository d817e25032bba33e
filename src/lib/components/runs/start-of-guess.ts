import type { RunGuess } from '$lib/domain/analysis/guess-run';
import { wallClock } from '$lib/domain/time';

/** Loggers whose clock was never set begin long before any lab kept files. */
const EARLIEST = '1995-01-01T00:00';

/**
 * The start that a file tells, on the lab's wall clock; null where it tells none, or one that cannot be.
 * @param now the lab's wall clock at this moment: nothing was recorded later
 */
export function startOfGuess({ start }: RunGuess, now: string, zone: string): string | null {
	if (!start) return null;
	const local = 'instant' in start ? wallClock(start.instant, zone) : start.wallClock;
	return local > EARLIEST && local.slice(0, now.length) <= now ? local : null;
}

/** Something kept in dated versions: a later one takes over at its date, and none is ever edited. */
export interface Dated {
	/** Counts from 1 in the order of writing. */
	version: number;
	/** Null: from the beginning. */
	validFrom: Date | null;
}

/** Half-open `[from, to)`; null: without an end on that side. */
export interface Period {
	from: Date | null;
	to: Date | null;
}

/**
 * When each version is in force: from its date to the next one's. Of two with one date the one written later holds; what came
 * before every date is the earliest version's. A version that is overtaken on its own date is in none.
 * @returns versions that are ever in force, in the order of time
 */
export function periodsOf<V extends Dated>(versions: readonly V[]): { version: V; period: Period }[] {
	const at = ({ validFrom }: Dated) => (validFrom ? validFrom.getTime() : -Infinity);
	// An equal pair of infinities has no difference.
	const ordered = [...versions].sort((a, b) => (at(a) === at(b) ? a.version - b.version : at(a) - at(b)));
	const holding = ordered.filter((each, place) => {
		const next = ordered[place + 1];
		return !next || at(next) !== at(each);
	});
	return holding.map((version, place) => ({
		version,
		period: { from: place === 0 ? null : version.validFrom, to: holding[place + 1]?.validFrom ?? null }
	}));
}

/** The version in force at an instant; undefined only where there is none at all. */
export function inForceAt<V extends Dated>(versions: readonly V[], at: Date): V | undefined {
	return periodsOf(versions).find(
		({ period }) => (!period.from || period.from <= at) && (!period.to || at < period.to)
	)?.version;
}

/** When a version that is now written would be in force. */
export function reachOf(versions: readonly Dated[], validFrom: Date): Period {
	const version = 1 + Math.max(0, ...versions.map((each) => each.version));
	const found = periodsOf([...versions, { version, validFrom }]).find(
		(each) => each.version.version === version
	);
	return found?.period ?? { from: validFrom, to: validFrom };
}

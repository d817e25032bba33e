interface Line {
	id: string;
	supersedes: string | null;
}

/** A line as first written, and what was put in its place, oldest first; the last of them holds. */
export interface LogThread<L> {
	first: L;
	corrections: L[];
}

/**
 * Log lines with their corrections under them. A correction stands with the line that it corrects however often that was
 * corrected before; one whose line is not there stands by itself.
 * @param lines by clock, oldest first
 */
export function logThreads<L extends Line>(lines: readonly L[]): LogThread<L>[] {
	const byId = new Map(lines.map((line) => [line.id, line]));
	const rootOf = (line: L): L => {
		let root = line;
		const seen = new Set([line.id]);
		for (;;) {
			const before = root.supersedes === null ? undefined : byId.get(root.supersedes);
			if (!before || seen.has(before.id)) return root;
			seen.add(before.id);
			root = before;
		}
	};
	const threads = new Map<string, LogThread<L>>();
	for (const line of lines) if (rootOf(line) === line) threads.set(line.id, { first: line, corrections: [] });
	for (const line of lines) {
		const root = rootOf(line);
		if (root !== line) threads.get(root.id)?.corrections.push(line);
	}
	return [...threads.values()];
}

import type { RunGuess } from '$lib/domain/analysis/guess-run';

/** Beyond that a file is not read before it is sent: the page would stand still over it. */
const READ_AT_MOST_BYTES = 8 * 1024 * 1024;
/** Enough to tell columns and the first time stamp of a larger one. */
const READ_OF_LARGER_BYTES = 512 * 1024;

/** What a chosen file tells about its run; nothing where it cannot be read, since the server tells why better. */
export async function lookAtFile(file: Blob): Promise<RunGuess> {
	try {
		const isWhole = file.size <= READ_AT_MOST_BYTES;
		const part = isWhole ? file : file.slice(0, READ_OF_LARGER_BYTES);
		const [{ guessRun }, bytes] = await Promise.all([
			import('$lib/domain/analysis/guess-run'),
			part.arrayBuffer()
		]);
		return guessRun(new Uint8Array(bytes), isWhole);
	} catch {
		return { kind: null, start: null };
	}
}

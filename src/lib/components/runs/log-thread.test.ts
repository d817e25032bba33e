import { describe, expect, it } from 'vitest';
import { logThreads } from './log-thread';

const line = (id: string, supersedes: string | null = null) => ({ id, supersedes });
const shape = (...lines: ReturnType<typeof line>[]) =>
	logThreads(lines).map(({ first, corrections }) => [first.id, ...corrections.map(({ id }) => id)]);

describe('log lines and their corrections', () => {
	it('keeps lines that nobody corrected in their order', () => {
		expect(shape(line('a'), line('b'))).toEqual([['a'], ['b']]);
	});
	it('puts a correction under its line, though others were written in between', () => {
		expect(shape(line('a'), line('b'), line('c', 'a'))).toEqual([['a', 'c'], ['b']]);
	});
	it('puts the correction of a correction under the first line, in the order of writing', () => {
		expect(shape(line('a'), line('b', 'a'), line('c', 'b'), line('d', 'a'))).toEqual([['a', 'b', 'c', 'd']]);
	});
	it('shows a correction dated before the line that it corrects', () => {
		expect(shape(line('b', 'a'), line('a'))).toEqual([['a', 'b']]);
	});
	it('loses no line whose own is missing', () => {
		expect(shape(line('b', 'gone'), line('c', 'b'))).toEqual([['b', 'c']]);
	});
});

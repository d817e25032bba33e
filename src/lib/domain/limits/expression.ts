/**
 * Expressions of limit rules: numbers, channel codes, + − * / ^, brackets and a closed list of functions. Parsed here and
 * worked out over arrays, so that no text of a user is ever run as code.
 */

export type Node =
	| { kind: 'number'; value: number }
	| { kind: 'channel'; code: string }
	| { kind: 'negate'; of: Node }
	| { kind: 'binary'; operator: '+' | '-' | '*' | '/' | '^'; left: Node; right: Node }
	| { kind: 'call'; name: FunctionName; args: Node[] };

export type ParsedExpression = { ok: true; node: Node; channels: string[] } | { ok: false; error: string };

const FUNCTIONS = {
	min: { least: 2, most: 8 },
	max: { least: 2, most: 8 },
	abs: { least: 1, most: 1 },
	sqrt: { least: 1, most: 1 }
} as const;
type FunctionName = keyof typeof FUNCTIONS;

const MOST_CHARACTERS = 500;
const MOST_NODES = 200;
const MOST_DEPTH = 20;

const TOKEN =
	/\s*(?:(\d+\.?\d*(?:[eE][+-]?\d+)?|\.\d+(?:[eE][+-]?\d+)?)|([a-z][a-z0-9_]*(?:\.\d+)?)|([-+*/^(),−·×]))/y;

class ExpressionError extends Error {}

interface Token {
	kind: 'number' | 'name' | 'mark';
	text: string;
}

function tokens(text: string): Token[] {
	const found: Token[] = [];
	TOKEN.lastIndex = 0;
	while (TOKEN.lastIndex < text.length) {
		const at = TOKEN.lastIndex;
		const match = TOKEN.exec(text);
		if (!match) {
			if (text.slice(at).trim() === '') break;
			throw new ExpressionError(`“${text.slice(at).trim().slice(0, 12)}” cannot be read`);
		}
		if (match[1] !== undefined) found.push({ kind: 'number', text: match[1] });
		else if (match[2] !== undefined) found.push({ kind: 'name', text: match[2] });
		else found.push({ kind: 'mark', text: match[3]!.replace('−', '-').replace(/[·×]/, '*') });
	}
	return found;
}

class Parser {
	#at = 0;
	#nodes = 0;
	readonly channels = new Set<string>();

	constructor(private readonly list: readonly Token[]) {}

	whole(): Node {
		const node = this.#sum(0);
		if (this.#at < this.list.length)
			throw new ExpressionError(`“${this.list[this.#at]!.text}” was not expected`);
		return node;
	}

	#made(node: Node): Node {
		if (++this.#nodes > MOST_NODES) throw new ExpressionError('it is too long');
		return node;
	}

	#take(...marks: string[]): string | null {
		const token = this.list[this.#at];
		if (token?.kind !== 'mark' || !marks.includes(token.text)) return null;
		this.#at++;
		return token.text;
	}

	#sum(depth: number): Node {
		if (depth > MOST_DEPTH) throw new ExpressionError('its brackets are too deep');
		let left = this.#product(depth);
		for (let mark = this.#take('+', '-'); mark; mark = this.#take('+', '-'))
			left = this.#made({ kind: 'binary', operator: mark as '+' | '-', left, right: this.#product(depth) });
		return left;
	}

	#product(depth: number): Node {
		let left = this.#signed(depth);
		for (let mark = this.#take('*', '/'); mark; mark = this.#take('*', '/'))
			left = this.#made({ kind: 'binary', operator: mark as '*' | '/', left, right: this.#signed(depth) });
		return left;
	}

	#signed(depth: number): Node {
		if (depth > MOST_DEPTH) throw new ExpressionError('it is nested too deep');
		if (this.#take('-')) return this.#made({ kind: 'negate', of: this.#signed(depth + 1) });
		if (this.#take('+')) return this.#signed(depth + 1);
		return this.#power(depth);
	}

	/** Binds to the right and stronger than a sign before it: −2^2 is −4. */
	#power(depth: number): Node {
		const base = this.#atom(depth);
		if (!this.#take('^')) return base;
		return this.#made({ kind: 'binary', operator: '^', left: base, right: this.#signed(depth + 1) });
	}

	#atom(depth: number): Node {
		if (this.#take('(')) {
			const inner = this.#sum(depth + 1);
			this.#close();
			return inner;
		}
		const token = this.list[this.#at++];
		if (!token) throw new ExpressionError('it ends too early');
		if (token.kind === 'number') return this.#made({ kind: 'number', value: Number(token.text) });
		if (token.kind === 'name')
			return this.#take('(') ? this.#call(token.text, depth) : this.#channel(token.text);
		throw new ExpressionError(`“${token.text}” was not expected`);
	}

	#channel(code: string): Node {
		this.channels.add(code);
		return this.#made({ kind: 'channel', code });
	}

	#call(name: string, depth: number): Node {
		if (!Object.hasOwn(FUNCTIONS, name))
			throw new ExpressionError(
				`“${name}” is not a function here; there are ${Object.keys(FUNCTIONS).join(', ')}`
			);
		const known = name as FunctionName;
		const args = [this.#sum(depth + 1)];
		while (this.#take(',')) args.push(this.#sum(depth + 1));
		this.#close();
		const { least, most } = FUNCTIONS[known];
		if (args.length < least || args.length > most)
			throw new ExpressionError(
				`${name} takes ${least === most ? least : `${least} to ${most}`} values, not ${args.length}`
			);
		return this.#made({ kind: 'call', name: known, args });
	}

	#close(): void {
		if (!this.#take(')')) throw new ExpressionError('a bracket is not closed');
	}
}

/**
 * Reads an expression over channel codes.
 *
 * @returns the tree and the codes in it, or a sentence that says what cannot be read
 */
export function parseExpression(text: string): ParsedExpression {
	if (text.length > MOST_CHARACTERS)
		return {
			ok: false,
			error: `The expression has ${text.length} characters; at most ${MOST_CHARACTERS} are read.`
		};
	try {
		const parser = new Parser(tokens(text));
		const node = parser.whole();
		return { ok: true, node, channels: [...parser.channels] };
	} catch (cause) {
		if (!(cause instanceof ExpressionError)) throw cause;
		return { ok: false, error: `The expression “${text}” cannot be read: ${cause.message}.` };
	}
}

type Value = number | Float64Array;

function combined(values: readonly Value[], rows: number, work: (...numbers: number[]) => number): Value {
	if (values.every((value) => typeof value === 'number')) return work(...(values as number[]));
	const result = new Float64Array(rows);
	const row = new Array<number>(values.length);
	for (let i = 0; i < rows; i++) {
		for (let k = 0; k < values.length; k++) {
			const value = values[k]!;
			row[k] = typeof value === 'number' ? value : value[i]!;
		}
		result[i] = work(...row);
	}
	return result;
}

const BINARY: Record<'+' | '-' | '*' | '/' | '^', (a: number, b: number) => number> = {
	'+': (a, b) => a + b,
	'-': (a, b) => a - b,
	'*': (a, b) => a * b,
	'/': (a, b) => a / b,
	'^': (a, b) => a ** b
};

function work(node: Node, channels: ReadonlyMap<string, Float64Array>, rows: number): Value {
	switch (node.kind) {
		case 'number':
			return node.value;
		case 'channel':
			return channels.get(node.code) ?? NaN;
		case 'negate':
			return combined([work(node.of, channels, rows)], rows, (value) => -value);
		case 'binary':
			return combined(
				[work(node.left, channels, rows), work(node.right, channels, rows)],
				rows,
				BINARY[node.operator]
			);
		case 'call':
			return combined(
				node.args.map((arg) => work(arg, channels, rows)),
				rows,
				Math[node.name]
			);
	}
}

/** The expression's value at every row; what has no finite value (a division by zero, an unknown sample) is NaN. */
export function evaluateExpression(
	node: Node,
	channels: ReadonlyMap<string, Float64Array>,
	rows: number
): Float64Array {
	const value = work(node, channels, rows);
	const array = typeof value === 'number' ? new Float64Array(rows).fill(value) : Float64Array.from(value);
	for (let i = 0; i < rows; i++) if (!Number.isFinite(array[i]!)) array[i] = NaN;
	return array;
}

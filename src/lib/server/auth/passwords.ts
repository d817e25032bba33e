import { hash, verify } from '@node-rs/argon2';
import { randomUUID } from 'node:crypto';
import { Problem, wrongField } from '../problem';

/** argon2id, 19 MiB, two passes, one lane: OWASP Password Storage Cheat Sheet, second listed setting. */
const ARGON2ID = { memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;
const HASHES_AT_ONCE = 2;
const WAITING_AT_MOST = 40;
const MIN_LENGTH = 10;
const MAX_LENGTH = 200;

let running = 0;
const waiting: (() => void)[] = [];

/** Hashing fills the threads that files are read with: a flood of sign-ins waits in this line, or is turned away. */
async function inTurn<T>(work: () => Promise<T>): Promise<T> {
	if (running >= HASHES_AT_ONCE) {
		if (waiting.length >= WAITING_AT_MOST)
			throw new Problem(
				429,
				'Too many sign-ins',
				'Many people are signing in. Try again in a few seconds.',
				{},
				{ retryAfterS: 5 }
			);
		await new Promise<void>((go) => waiting.push(go));
	}
	running++;
	try {
		return await work();
	} finally {
		running--;
		waiting.shift()?.();
	}
}

export const hashPassword = (password: string) => inTurn(() => hash(password, ARGON2ID));

// Someone who has no account costs the same time as someone who has.
let nobodysHash: Promise<string> | undefined;

export async function verifyPassword(password: string, stored: string | null): Promise<boolean> {
	if (password.length > MAX_LENGTH) return false;
	nobodysHash ??= hash(randomUUID(), ARGON2ID);
	const against = stored ?? (await nobodysHash);
	const right = await inTurn(() => verify(against, password, ARGON2ID));
	return right && stored !== null;
}

/** Length is what counts; only what anybody would try first is refused besides. @throws Problem 400 at the field */
export function requireGoodPassword(
	password: string,
	field: string,
	person: { email: string; name: string }
): void {
	if (password.length < MIN_LENGTH)
		throw wrongField(
			field,
			`use at least ${MIN_LENGTH} characters; this has ${password.length}. A short sentence of your own is easy to keep and hard to guess.`
		);
	if (password.length > MAX_LENGTH) throw wrongField(field, `use at most ${MAX_LENGTH} characters.`);
	const plain = password.trim().toLowerCase();
	const known = [person.email, person.name, person.email.split('@')[0]!].map((text) => text.toLowerCase());
	if (known.includes(plain))
		throw wrongField(field, 'use something else than your name or your mail address.');
	if (new Set(plain).size < 4) throw wrongField(field, 'use more than three different characters.');
}

import { createHash, randomBytes, timingSafeEqual } from 'node:crypto';

/** 256 bits, URL-safe. */
export const newSecret = () => randomBytes(32).toString('base64url');

export const sha256 = (text: string) => createHash('sha256').update(text).digest();

export function sameHash(secret: string, hash: Buffer): boolean {
	const own = sha256(secret);
	return own.length === hash.length && timingSafeEqual(own, hash);
}

import { z } from 'zod';

/** Fields that many descriptions share, with the sentences people read. */
export const code = z
	.string()
	.regex(/^[A-Z0-9][A-Z0-9.-]{0,31}$/, 'use capital letters, digits, dots and hyphens, at most 32')
	// A code that looks like an id could never be told from one.
	.refine((text) => !/^[0-9A-F]{8}(-[0-9A-F]{4}){3}-[0-9A-F]{12}$/.test(text), 'must not look like an id');
export const ref = z.string().trim().min(1, 'name one').max(64, 'is too long to be an id or a code');
export const label = (max = 200) =>
	z.string().trim().min(1, 'must not be empty').max(max, `at most ${max} characters`);
export const positive = z
	.number({ error: 'give a number' })
	.positive('must be above zero')
	.max(1e9, 'is too large');
export const notNegative = z
	.number({ error: 'give a number' })
	.min(0, 'must not be negative')
	.max(1e9, 'is too large');
export const instant = z.iso
	.datetime({ offset: true, error: 'give a time like 2026-03-01T08:00:00+01:00' })
	.transform((text) => new Date(text));
/** A clock time as it is answered; text already where an answer is remembered and sent again. */
export const instantOut = z.union([z.date().transform((date) => date.toISOString()), z.iso.datetime()]);
/** Units as scripts read them, in plain letters: rev/min is `rpm` there. */
export const unitOut = z.string().transform((unit) => (unit === 'rev/min' ? 'rpm' : unit));
export const reason = z.string().trim().max(1000, 'at most 1000 characters');

/** Points of a line over speed: finite, speeds rising. */
export const lineOverSpeed = z
	.array(z.tuple([notNegative, z.number()]))
	.min(1, 'give at least one point')
	.max(500, 'at most 500 points')
	.refine(
		(points) => points.every((p, i) => i === 0 || p[0] > points[i - 1]![0]),
		'speeds must rise from point to point'
	);

import { z } from 'zod';
import { torqueLine, torqueText } from '$lib/domain/builds/torque-line';
import { INDUCTIONS } from '$lib/domain/model';
import type { EngineFields } from '$lib/server/engines';

const number = z.number({ error: 'Give a number.' });
const above = number.positive('Must be above zero.').max(1e9, 'Too large.');
/** Not `int()`: what a form reads as an integer loses its decimals before anyone is told. */
const wholeNumber = number.refine(Number.isInteger, 'Give a whole number.');
/** Starts empty instead of at 0, and must not stay so. */
const needed = (rule: z.ZodNumber) =>
	rule
		.nullable()
		.default(null)
		.refine((value) => value !== null, 'Give a number.');

const facts = {
	name: z.string().trim().min(1, 'Give it a name.').max(200, 'At most 200 characters.'),
	displacementL: needed(above.max(5000, 'In litres; this is too large.')),
	cylinders: needed(wholeNumber.min(1, 'At least 1.').max(64, 'At most 64.')),
	strokesPerCycle: z.enum(['2', '4']).default('4'),
	ignition: z.enum(['spark', 'compression']).default('spark'),
	induction: z.enum(['', ...INDUCTIONS]).default(''),
	inertiaKgM2: number.min(0, 'Must not be negative.').max(1e9, 'Too large.').nullable().default(null),
	boreMm: above.nullable().default(null),
	strokeMm: above.nullable().default(null),
	compressionRatio: number.gt(1, 'Must be above 1.').max(50, 'Too large.').nullable().default(null),
	maxSpeedRpm: above.nullable().default(null),
	expectedTorque: z
		.string()
		.max(20_000, 'At most 20 000 characters.')
		.default('')
		.superRefine((text, check) => {
			for (const message of torqueLine(text).problems) check.addIssue({ code: 'custom', message });
		})
};

const INDUCTION_NEEDED = {
	path: ['induction'],
	error: 'A compression-ignition engine needs it: its correction depends on it.'
};

export const NewEngineForm = z
	.object({
		client: z.string().min(1, 'Choose whose engine this is.'),
		code: z
			.string()
			.trim()
			.regex(/^[A-Z0-9][A-Z0-9.-]{0,31}$/, 'Use capital letters, digits, dots and hyphens, at most 32.'),
		...facts
	})
	.refine((engine) => engine.ignition === 'spark' || engine.induction, INDUCTION_NEEDED);

export const EngineChangeForm = z
	.object({
		...facts,
		reason: z.string().trim().max(1000, 'At most 1000 characters.').default(''),
		/** Of the engine as it was when the form was opened. */
		version: z.number().int()
	})
	.refine((engine) => engine.ignition === 'spark' || engine.induction, INDUCTION_NEEDED);

type Typed = Omit<z.output<typeof EngineChangeForm>, 'reason' | 'version'>;

/** What was typed, as the use cases take it. */
export const engineOf = ({ strokesPerCycle, induction, expectedTorque, ...rest }: Typed) => ({
	...rest,
	strokesPerCycle: Number(strokesPerCycle),
	induction: induction || null,
	expectedTorque: expectedTorque.trim() ? torqueLine(expectedTorque).points : null
});

/** An engine as a form shows it. */
export const typedOf = (engine: EngineFields) => ({
	name: engine.name,
	displacementL: engine.displacementL,
	cylinders: engine.cylinders,
	strokesPerCycle: engine.strokesPerCycle === 2 ? ('2' as const) : ('4' as const),
	ignition: engine.ignition,
	induction: engine.induction ?? ('' as const),
	inertiaKgM2: engine.inertiaKgM2,
	boreMm: engine.boreMm,
	strokeMm: engine.strokeMm,
	compressionRatio: engine.compressionRatio,
	maxSpeedRpm: engine.maxSpeedRpm,
	expectedTorque: torqueText(engine.expectedTorque)
});

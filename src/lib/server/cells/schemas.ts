import { z } from 'zod';
import { fields } from '../api';

const Absorber = z.object({
	kind: z.enum(['eddy_current', 'water_brake', 'ac', 'dc', 'hydraulic']),
	maxPowerKw: fields.positive,
	maxTorqueNm: fields.positive,
	maxSpeedRpm: fields.positive
});

const clock = z.string().regex(/^([01]\d|2[0-3]):[0-5]\d$|^24:00$/, 'give a clock time like 07:30');
/** ISO weekdays, 1 = Monday. */
const OpeningHours = z
	.array(
		z
			.object({ day: z.number().int().min(1).max(7), from: clock, to: clock })
			.refine((hours) => hours.from < hours.to, 'must open before it closes')
	)
	.max(50);

const Rig = z.number().int('give whole minutes').min(0, 'must not be negative').max(10_080, 'at most a week');

export const NewCell = z.object({
	code: fields.code,
	name: fields.label(),
	absorber: Absorber,
	envelope: fields.lineOverSpeed.nullish(),
	torqueAt: z.enum(['flange', 'stator']).default('flange'),
	rotorInertiaKgM2: fields.notNegative.nullish(),
	shaftInertiaKgM2: fields.notNegative.nullish(),
	fuels: z.array(fields.ref).max(100).nullish(),
	rigUpMinutes: Rig.default(0),
	rigDownMinutes: Rig.default(0),
	openingHours: OpeningHours.nullish()
});

export const CellView = z.object({
	id: z.string(),
	code: z.string(),
	name: z.string(),
	absorber: Absorber,
	envelope: z.array(z.tuple([z.number(), z.number()])).nullable(),
	torqueAt: z.enum(['flange', 'stator']),
	rotorInertiaKgM2: z.number().nullable(),
	shaftInertiaKgM2: z.number().nullable(),
	/** Absent on creation = any fuel. */
	fuels: z.array(z.string()).nullable(),
	rigUpMinutes: z.number(),
	rigDownMinutes: z.number(),
	openingHours: OpeningHours.nullable(),
	colour: z.number(),
	version: z.number()
});
export type Cell = z.input<typeof CellView>;

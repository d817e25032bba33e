import { z } from 'zod';
import { fields } from '../api';

export const ABSORBER_KINDS = ['eddy_current', 'water_brake', 'ac', 'dc', 'hydraulic'] as const;
export const TORQUE_PLACES = ['flange', 'stator'] as const;

const Absorber = z.object({
	kind: z.enum(ABSORBER_KINDS),
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
const Fuels = z.array(fields.ref).max(100);
/** Place in the set of cell colours. */
const Colour = z.number().int('give a whole number').min(0, 'must not be negative').max(1000);

/** How torque gets from the engine to a figure, as it stands between two dates. */
const Chain = {
	torqueAt: z.enum(TORQUE_PLACES).default('flange'),
	rotorInertiaKgM2: fields.notNegative.nullish(),
	shaftInertiaKgM2: fields.notNegative.nullish(),
	armM: fields.positive.max(10, 'is in m: at most 10').nullish(),
	gravityMps2: z
		.number({ error: 'give a number' })
		.min(9.7, 'is in m/s²: 9.7 to 9.9')
		.max(9.9, 'is in m/s²: 9.7 to 9.9')
		.nullish(),
	gear: z
		.object({
			ratio: fields.positive.min(0.01, 'at least 0.01').max(100, 'at most 100'),
			efficiency: z
				.number({ error: 'give a number' })
				.gt(0, 'is a share, above 0')
				.max(1, 'is a share, at most 1')
		})
		.nullish()
};

export const NewCell = z.object({
	code: fields.code,
	name: fields.label(),
	absorber: Absorber,
	envelope: fields.lineOverSpeed.nullish(),
	...Chain,
	fuels: Fuels.nullish(),
	rigUpMinutes: Rig.default(0),
	rigDownMinutes: Rig.default(0),
	openingHours: OpeningHours.nullish(),
	colour: Colour.nullish()
});

export const CellChange = z
	.object({
		name: fields.label(),
		absorber: Absorber,
		envelope: fields.lineOverSpeed.nullable(),
		fuels: Fuels.nullable(),
		rigUpMinutes: Rig,
		rigDownMinutes: Rig,
		openingHours: OpeningHours.nullable(),
		colour: Colour
	})
	.partial()
	.refine(
		(change) => Object.keys(change).length > 0,
		'name what to change; how torque is weighed has versions of its own, POST /cells/{id}/torque-chain'
	);

export const NewTorqueChain = z.object({
	...Chain,
	validFrom: fields.instant.optional(),
	reason: fields.reason.min(1, 'say why'),
	/** Compute again what it changes of the past; without it the figures stay as they are until someone asks. */
	recompute: z.boolean().default(false)
});

const Span = { from: fields.instantOut.nullable(), to: fields.instantOut.nullable() };

export const TorqueChainView = z.object({
	version: z.number(),
	torqueAt: z.enum(TORQUE_PLACES),
	rotorInertiaKgM2: z.number().nullable(),
	shaftInertiaKgM2: z.number().nullable(),
	armM: z.number().nullable(),
	gravityMps2: z.number().nullable(),
	gear: z.object({ ratio: z.number(), efficiency: z.number() }).nullable(),
	/** Null: from the beginning, as the first version is. */
	validFrom: fields.instantOut.nullable(),
	/** When runs are computed with it; null: another version with the same date overtook it. */
	inForce: z.object(Span).nullable(),
	/** Why and by whom is the lab's own affair: null for clients. */
	reason: z.string().nullable(),
	writtenBy: z.string().nullable(),
	writtenAt: fields.instantOut
});
export type TorqueChain = z.input<typeof TorqueChainView>;

export const TouchedQuery = z.object({ validFrom: fields.instant });
/** Runs whose figures come from another version than the one that is, or would be, in force at their start. */
export const TouchedView = z.object({
	runs: z.number(),
	traces: z.number(),
	/** The newest of them. */
	items: z.array(
		z.object({
			number: z.string(),
			client: z.string(),
			startedAt: fields.instantOut,
			/** The version its figures come from. */
			version: z.number()
		})
	)
});
export type Touched = z.input<typeof TouchedView>;

export const AddedChainView = TorqueChainView.extend({
	touched: TouchedView,
	/** Traces queued to be computed again. */
	recomputing: z.number()
});

export const CellView = z.object({
	id: z.string(),
	code: z.string(),
	name: z.string(),
	absorber: Absorber,
	envelope: z.array(z.tuple([z.number(), z.number()])).nullable(),
	/** Of the torque chain in force now. */
	torqueAt: z.enum(TORQUE_PLACES),
	rotorInertiaKgM2: z.number().nullable(),
	shaftInertiaKgM2: z.number().nullable(),
	armM: z.number().nullable(),
	gravityMps2: z.number().nullable(),
	gear: z.object({ ratio: z.number(), efficiency: z.number() }).nullable(),
	torqueChainVersion: z.number(),
	/** Absent on creation = any fuel. */
	fuels: z.array(z.string()).nullable(),
	rigUpMinutes: z.number(),
	rigDownMinutes: z.number(),
	openingHours: OpeningHours.nullable(),
	colour: z.number(),
	version: z.number()
});
export type Cell = z.input<typeof CellView>;

import { z } from 'zod';
import { CORRECTIONS, FLAG_SEVERITIES, RUN_KINDS } from '$lib/domain/model';
import { fields } from '../api';

/** Wide physical bounds: they catch a wrong unit (1013 hPa for 101.3 kPa), not a hard winter. */
const Ambient = z.object({
	barometerKpa: z.number().min(50, 'is in kPa: 50 to 115').max(115, 'is in kPa: 50 to 115').optional(),
	temperatureC: z.number().min(-60, 'is in °C: −60 to 70').max(70, 'is in °C: −60 to 70').optional(),
	humidityPct: z.number().min(0, 'is in % RH: 0 to 100').max(100, 'is in % RH: 0 to 100').optional()
});

const share = z.number().gt(0, 'must be above 0').max(1, 'is a share, at most 1');
const Settings = z.object({
	speedBinRpm: z.number().min(5, 'at least 5 rev/min').max(2000, 'at most 2000 rev/min').optional(),
	minSamplesPerBin: z.number().int().min(1).max(10_000).optional(),
	fullLoadShare: share.optional(),
	speedTolerance: share.optional(),
	torqueTolerance: share.optional(),
	settleS: z.number().min(0).max(3600).optional(),
	averageS: z.number().min(1).max(36_000).optional()
});

export const NewRun = z.object({
	client: fields.ref.optional(),
	build: fields.ref,
	cell: fields.ref,
	fuelBatch: fields.ref,
	kind: z.enum(RUN_KINDS),
	startedAt: fields.instant,
	booking: fields.ref.nullish(),
	limitSet: fields.ref.nullish(),
	correction: z.enum(CORRECTIONS).default('none'),
	net: z.boolean().nullish(),
	ambient: Ambient.default({}),
	settings: Settings.default({})
});

const Span = z.tuple([z.number(), z.number()]);
const MetricView = z.object({
	value: z.number(),
	unit: fields.unitOut,
	u: z.number().nullable(),
	at: z.record(z.string(), z.number()).nullable(),
	method: z.string(),
	outsideRange: z.string().nullable()
});
const TraceView = z.object({
	id: z.string(),
	state: z.enum(['received', 'processing', 'needs_map', 'ready', 'refused']),
	filename: z.string(),
	primary: z.boolean(),
	sizeBytes: z.number(),
	sha256: z.string(),
	rows: z.number().nullable(),
	sampleRateHz: z.number().nullable(),
	channels: z.array(z.object({ code: z.string(), header: z.string(), unit: fields.unitOut })).nullable(),
	findings: z.array(
		z.object({
			code: z.string(),
			severity: z.enum(['info', 'warning', 'error']),
			message: z.string(),
			spans: z.array(Span),
			/** Canonical code, or own header, of the channel it speaks of. */
			channel: z.string().nullable()
		})
	),
	proposal: z.unknown().nullable(),
	error: z.string().nullable(),
	createdAt: fields.instantOut
});
const FlagView = z.object({
	id: z.string(),
	rule: z.string(),
	severity: z.enum(FLAG_SEVERITIES),
	spans: z.array(Span),
	worst: z
		.object({ value: z.number(), limit: z.number(), at: z.number().nullable(), ratio: z.number().nullable() })
		.nullable(),
	totalS: z.number().nullable(),
	message: z.string(),
	raisedBy: z.string().nullable()
});

/** What the current figures were made with, as versions; null: not recorded when they were made. */
const InputsView = z.object({
	methodVersion: z.string(),
	computedAt: fields.instantOut,
	engineVersion: z.number().nullable(),
	cellVersion: z.number().nullable(),
	/** Of the cell's torque chain, in force at the run's start. */
	torqueChainVersion: z.number().nullable(),
	fuelBatchVersion: z.number().nullable(),
	limitSetVersion: z.number().nullable()
});
export type RunInputs = z.input<typeof InputsView>;

const Head = {
	id: z.string(),
	number: z.string(),
	client: z.string(),
	build: z.string(),
	buildTitle: z.string(),
	engine: z.string(),
	cell: z.string(),
	cellColour: z.number(),
	fuelBatch: z.string(),
	kind: z.enum(RUN_KINDS),
	state: z.enum(['open', 'closed', 'accepted', 'voided']),
	startedAt: fields.instantOut,
	loggedBy: z.string()
};

export const RunView = z.object({
	...Head,
	booking: z.string().nullable(),
	limitSet: z.string().nullable(),
	correction: z.enum(CORRECTIONS),
	net: z.boolean().nullable(),
	loggedById: z.string(),
	ambient: z.unknown(),
	settings: z.unknown(),
	endedAt: fields.instantOut.nullable(),
	reviewedBy: z.string().nullable(),
	reviewedAt: fields.instantOut.nullable(),
	reviewReason: z.string().nullable(),
	traces: z.array(TraceView),
	metrics: z.record(z.string(), MetricView),
	points: z.array(z.record(z.string(), z.number().nullable())),
	flags: z.array(FlagView),
	/** Null while the primary trace has no figures. */
	inputs: InputsView.nullable(),
	version: z.number()
});
export type RunDetail = z.input<typeof RunView>;

/** A row of the run list: enough for the figures people scan for and the curve mark. */
export const RunListItem = z.object({
	...Head,
	flags: z.number(),
	metrics: z.record(z.string(), z.number()),
	curve: z
		.object({
			speed: z.array(z.number()),
			torque: z.array(z.number().nullable()),
			power: z.array(z.number().nullable())
		})
		.nullable()
});
export type RunRow = z.input<typeof RunListItem>;

export const RunQuery = z.object({
	client: fields.ref.optional(),
	build: fields.ref.optional(),
	cell: fields.ref.optional(),
	fuelBatch: fields.ref.optional(),
	state: z.enum(['open', 'closed', 'accepted', 'voided']).optional(),
	flagged: z.stringbool().optional()
});

export const Reason = z.object({ reason: fields.reason.min(1, 'say why') });
export const OptionalReason = z.object({ reason: fields.reason.optional() });
export const NewFlag = z.object({
	reason: fields.reason.min(1, 'say what is wrong'),
	severity: z.enum(FLAG_SEVERITIES).default('review'),
	from: z.number().min(0).optional(),
	to: z.number().min(0).optional()
});
export const NewLogLine = z.object({
	text: z.string().trim().min(1, 'write something').max(4000, 'at most 4000 characters'),
	at: fields.instant.optional(),
	supersedes: z.uuid().optional(),
	reason: fields.reason.optional()
});
export const LogLineView = z.object({
	id: z.string(),
	at: fields.instantOut,
	text: z.string(),
	author: z.string(),
	supersedes: z.string().nullable(),
	reason: z.string().nullable()
});
export const HistoryEntry = z.object({
	at: fields.instantOut,
	actor: z.string().nullable(),
	action: z.string(),
	detail: z.string().nullable()
});

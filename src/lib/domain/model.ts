/**
 * The words that the whole product shares: what an engine, a run, a figure, a finding and a rule are.
 * Units below the edge are always those of `channels/catalogue.ts` (rev/min, N·m, kW, kg/h, kPa absolute, °C …).
 */

export const RUN_KINDS = [
	'power_sweep',
	'steady_points',
	'point_table',
	'motoring',
	'endurance',
	'free_log'
] as const;
export type RunKind = (typeof RUN_KINDS)[number];

export const CORRECTIONS = ['none', 'sae_j1349', 'iso_1585', 'din_70020', 'iso_3046'] as const;
export type Correction = (typeof CORRECTIONS)[number];

export const INDUCTIONS = ['natural', 'mechanical', 'turbo', 'turbo_cooled'] as const;
export type Induction = (typeof INDUCTIONS)[number];

export type Ignition = 'spark' | 'compression';

/** What the figures need to know of an engine. */
export interface EngineFacts {
	displacementL: number;
	cylinders: number;
	strokesPerCycle: 2 | 4;
	ignition: Ignition;
	induction: Induction | null;
	/** Rotating inertia of the engine itself, kg·m²; null when unknown (then no inertia correction is made). */
	inertiaKgM2: number | null;
	maxSpeedRpm: number | null;
	expectedTorque: readonly (readonly [rpm: number, torqueNm: number])[] | null;
}

/** What the figures need to know of the cell. */
export interface CellFacts {
	torqueAt: 'flange' | 'stator';
	rotorInertiaKgM2: number | null;
	shaftInertiaKgM2: number | null;
}

/** A measured or computed property with, where known, its standard uncertainty and how it was found. */
export interface Property {
	value: number;
	u?: number | undefined;
	method?: string | undefined;
}

export const FUEL_PROPERTIES = [
	'lhvMjKg',
	'densityKgM3',
	'afrStoich',
	'hydrogenCarbonRatio',
	'oxygenCarbonRatio',
	'oxygenMassPct',
	'ron',
	'expansionPerK'
] as const;
export type FuelPropertyName = (typeof FUEL_PROPERTIES)[number];
/** Properties of a fuel batch; absent = unknown. Measured beats computed. */
export type FuelFacts = Partial<Record<FuelPropertyName, Property>>;

/** The run's own ambient entry; a channel in the trace beats it. */
export interface Ambient {
	barometerKpa?: number | undefined;
	temperatureC?: number | undefined;
	humidityPct?: number | undefined;
}

/** From and to on the trace clock, s. */
export type Span = [fromS: number, toS: number];

export interface Finding {
	/** Stable, lower-case, e.g. `gap`, `bte_implausible`. */
	code: string;
	severity: 'info' | 'warning' | 'error';
	/** One sentence a test engineer can act on, with the numbers in it. */
	message: string;
	spans: Span[];
	/** Canonical code (or own header) of the channel it speaks of. */
	channel?: string | undefined;
}

export interface MetricValue {
	value: number;
	unit: string;
	/** Standard uncertainty in the metric's unit; null when nothing is known that could feed it. */
	u: number | null;
	/** Where on the run it occurs. */
	at: { speed?: number; torque?: number; time?: number } | null;
	/** Formula and its version, e.g. `local-fit.1`. */
	method: string;
	/** Outside a method's stated range: shown, marked, kept out of limits, trends and best-of. */
	outsideRange?: string | undefined;
}
export type Metrics = Record<string, MetricValue>;

export const RELATIONS = ['at_most', 'at_least', 'between'] as const;
export type Relation = (typeof RELATIONS)[number];
export const FLAG_SEVERITIES = ['note', 'review', 'breach'] as const;
export type FlagSeverity = (typeof FLAG_SEVERITIES)[number];

type RuleSubject = { channel: string } | { metric: string } | { fuel: string } | { expression: string };
export type RuleLimit = number | [lo: number, hi: number] | { over: string; table: [x: number, y: number][] };

export interface Rule {
	title: string;
	subject: RuleSubject;
	relation: Relation;
	limit: RuleLimit;
	/** A span shorter than this does not count, s. */
	holdS: number;
	severity: FlagSeverity;
	/** Spans closer than this are one, s. */
	mergeGapS?: number | undefined;
}

/** What an engine may drive besides the absorber; declared with a run's figures. */
export const AUXILIARIES = [
	'fan',
	'water_pump',
	'oil_pump',
	'fuel_pump',
	'alternator',
	'steering_pump',
	'air_conditioning',
	'air_filter',
	'exhaust_system'
] as const;
export type Auxiliary = (typeof AUXILIARIES)[number];

export interface Flag {
	rule: string;
	severity: FlagSeverity;
	spans: Span[];
	worst: { value: number; limit: number; unit: string; at: number | null; ratio: number | null };
	/** How long in all, s (0 for metrics and fuel properties). */
	totalS: number;
	message: string;
}

/** A row of steady points, or of the reduced curve read as rows. Keys are channel or metric codes; `n` counts samples. */
export type Point = Record<string, number | null>;

/** The reduced curve: equal-length arrays by code, `speed` first. */
export type Curve = Record<string, (number | null)[]>;

export interface ChannelInfo {
	/** Canonical code, or the header itself for a column kept under its own name. */
	code: string;
	header: string;
	/** The unit the values are kept in. */
	unit: string;
	/** The unit as found in the file. */
	sourceUnit: string | null;
	/** 0–1 how sure the map is. */
	confidence: number;
}

/** One column of a channel map, as a person or the proposal gives it. */
export interface ColumnMap {
	index: number;
	/** Canonical code; `null` keeps the column under its own header. */
	channel: string | null;
	unit: string | null;
	reference?: 'gauge' | 'absolute' | undefined;
	delayS?: number | undefined;
}

export interface RunSettings {
	/** Width of a speed bin, rev/min; default 100. */
	speedBinRpm?: number | undefined;
	/** Least samples in a bin; default 3. */
	minSamplesPerBin?: number | undefined;
	/** Throttle at or above this share of its maximum is full load; default 0.95. */
	fullLoadShare?: number | undefined;
	/** Steady points: relative spread of speed and of torque, settling and least averaging time. */
	speedTolerance?: number | undefined;
	torqueTolerance?: number | undefined;
	settleS?: number | undefined;
	averageS?: number | undefined;
}

/** Everything outside the file that its figures depend on. */
export interface RunContext {
	kind: RunKind;
	engine: EngineFacts;
	cell: CellFacts;
	fuel: FuelFacts;
	ambient: Ambient;
	correction: Correction;
	settings: RunSettings;
	rules: readonly Rule[];
	/** A person's map for this file; absent = propose one. */
	map?: readonly ColumnMap[] | undefined;
}

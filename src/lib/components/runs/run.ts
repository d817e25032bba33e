import type {
	Ambient,
	Auxiliary,
	ChannelInfo,
	Correction,
	Finding,
	Flag,
	Metrics,
	Point,
	RunKind
} from '$lib/domain/model';

type Instant = Date | string;

/** A trace as the run's page has it. */
export interface RunTraceFile {
	id: string;
	state: 'received' | 'processing' | 'needs_map' | 'ready' | 'refused';
	filename: string;
	primary: boolean;
	/** How long after the run's start its clock reads zero, s. */
	timeOffsetS: number;
	sizeBytes: number;
	rows: number | null;
	sampleRateHz: number | null;
	channels: Pick<ChannelInfo, 'code' | 'header' | 'unit'>[] | null;
	findings: (Omit<Finding, 'channel'> & { channel: string | null })[];
	proposal: unknown;
	error: string | null;
}

/** By a rule, or by hand: then there is no worst value. */
export interface RunFlag extends Pick<Flag, 'rule' | 'severity' | 'spans' | 'message'> {
	id: string;
	/** Figures kept before units were name none. */
	worst: (Omit<Flag['worst'], 'unit'> & { unit?: string | undefined }) | null;
	totalS: number | null;
	raisedBy: string | null;
	/** The one that its spans are of; null by hand. */
	trace: { id: string; filename: string } | null;
}

/** What the parts of a run's page read of its record. */
export interface RunRecord {
	id: string;
	number: string;
	client: string;
	build: string;
	buildId: string;
	buildTitle: string;
	engine: string;
	cell: string;
	fuelBatch: string;
	kind: RunKind;
	state: 'open' | 'closed' | 'accepted' | 'voided';
	startedAt: Instant;
	endedAt: Instant | null;
	loggedBy: string;
	booking: string | null;
	limitSet: string | null;
	correction: Correction;
	net: boolean | null;
	auxiliaries: Auxiliary[];
	inletDepressionKpa: number | null;
	exhaustBackPressureKpa: number | null;
	stillNeeded: string[];
	version: number;
	ambient: Ambient;
	reviewedBy: string | null;
	reviewedAt: Instant | null;
	reviewReason: string | null;
	traces: RunTraceFile[];
	metrics: Metrics;
	points: Point[];
	flags: RunFlag[];
}

export interface LogLine {
	id: string;
	at: Instant;
	text: string;
	author: string;
	supersedes: string | null;
	reason: string | null;
}

export interface HistoryLine {
	at: Instant;
	actor: string | null;
	action: string;
	detail: string | null;
}

/** What a form action of the page answered: the form as it was sent, with the sentence of each field. */
export interface Answered {
	id: string;
	data: Record<string, unknown>;
	errors: Record<string, string[] | undefined> & { _errors?: string[] };
}

export type CheckAnswer = 'done' | 'not_applicable' | 'not_done';
interface Check {
	answer: CheckAnswer;
	reason: string | null;
	by: string;
	at: Instant;
}
export interface ChecklistRecord {
	version: number;
	items: { item: string; text: string; look: string; holds: Check | null; before: Check[] }[];
}

export interface AirReading {
	id: string;
	at: Instant;
	barometerKpa: number | null;
	temperatureC: number | null;
	humidityPct: number | null;
	author: string;
	supersedes: string | null;
	reason: string | null;
}

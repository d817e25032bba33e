import type {
	Ambient,
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
	worst: Flag['worst'] | null;
	totalS: number | null;
	raisedBy: string | null;
}

/** What the parts of a run's page read of its record. */
export interface RunRecord {
	id: string;
	number: string;
	client: string;
	build: string;
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
	ambient: Ambient;
	reviewedBy: string | null;
	reviewedAt: Instant | null;
	reviewReason: string | null;
	traces: RunTraceFile[];
	metrics: Metrics;
	points: Point[];
	flags: RunFlag[];
	/** Versions that its figures were made with; null while there are none. */
	inputs: { torqueChainVersion: number | null } | null;
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

import type { Correction, FlagSeverity, RunKind } from '$lib/domain/model';
import type { Moment } from '../calendar';
import type { Surroundings } from '../engine-model';
import type { SetPoint, SweepPlan } from '../profiles';
import type { Disturbance } from '../rig';
import type { Dialect, FileColumn } from '../trace-file';

type Test =
	| { is: 'sweep'; plan: SweepPlan }
	| { is: 'capped'; plan: SweepPlan; overshoots: { atS: number; lastsS: number; by: number }[] }
	| { is: 'steady'; points: SetPoint[]; holdS: number }
	| {
			is: 'electrical';
			speedRpm: number;
			stretches: { seconds: number; load: number; electricalKw: number }[];
	  };

export type Logger = 'operator' | 'operator2' | 'engineer' | 'engineer2';
export type Reviewer = 'engineer' | 'engineer2' | 'manager';

export interface DemoLogLine {
	minute: number;
	text: string;
	/** Text of the line that this one puts right, and why. */
	corrects?: { text: string; reason: string };
}

export interface HandFlag {
	by: Logger;
	severity: FlagSeverity;
	reason: string;
	span?: [fromS: number, toS: number];
}

export type Outcome =
	| { state: 'accepted' | 'voided'; by: Reviewer; reason?: string }
	| { state: 'closed' }
	/** Still running when the lab is begun. */
	| { state: 'open' };

/** A run's record, with or without a trace. */
export interface DemoRecord {
	client: string;
	build: string;
	cell: string;
	batch: string;
	kind: RunKind;
	limitSet: string;
	correction: Correction;
	air: Surroundings;
	started: Moment;
	/** The slot it was run in; not every run has one. */
	booking?: string;
	loggedBy: Logger;
	log: DemoLogLine[];
	flags?: HandFlag[];
	outcome: Outcome;
}

export interface DemoRun extends DemoRecord {
	/** Also the seed of its noise. */
	filename: string;
	/** What the import must make of the file. */
	trace: 'ready' | 'needs_map' | 'refused';
	/** How many rules of its limit set it must cross. */
	crosses: number;
	test: Test;
	rateHz: number;
	columns: readonly FileColumn[];
	dialect: Dialect;
	disturbances?: readonly Disturbance[];
}

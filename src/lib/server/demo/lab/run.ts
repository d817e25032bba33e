import type { Correction, RunKind } from '$lib/domain/model';
import type { Surroundings } from '../engine-model';
import type { SetPoint, SweepPlan } from '../profiles';
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

export interface DemoRun {
	/** Also the seed of its noise. */
	filename: string;
	client: string;
	build: string;
	cell: string;
	batch: string;
	kind: RunKind;
	limitSet: string;
	correction: Correction;
	air: Surroundings;
	/** Working days before the lab's first day, and the clock there. */
	workday: number;
	clock: string;
	/** The slot it was run in; not every run has one. */
	booking?: string;
	loggedBy: 'operator' | 'engineer';
	log: { minute: number; text: string }[];
	outcome:
		{ state: 'accepted' | 'voided'; by: 'engineer' | 'manager'; reason?: string } | { state: 'closed' };
	/** What the import must make of the file. */
	trace: 'ready' | 'needs_map' | 'refused';
	test: Test;
	rateHz: number;
	columns: readonly FileColumn[];
	dialect: Dialect;
}

import { HISTORY } from './history';
import { LIVE_RECORDS, LIVE_RUNS } from './live-runs';
import { RECENT_RUNS } from './recent-runs';
import type { DemoRecord, DemoRun } from './run';

/** Runs whose traces go the real way. */
export const DEMO_RUNS: readonly DemoRun[] = [...HISTORY.runs, ...RECENT_RUNS, ...LIVE_RUNS];

/** Runs of which only the record is kept. */
export const DEMO_RECORDS: readonly DemoRecord[] = [...HISTORY.records, ...LIVE_RECORDS];

export { changeRun } from './change';
export { listRuns } from './list';
export { openRun } from './open';
export { proposeLimitSet } from './propose';
export {
	acceptRun,
	addLogLine,
	closeRun,
	flagRun,
	getRun,
	listLogLines,
	runHistory,
	voidRun
} from './record';
export {
	HistoryEntry,
	LogLineView,
	NewFlag,
	NewLogLine,
	NewRun,
	OptionalReason,
	Reason,
	RunChange,
	RunListItem,
	RunQuery,
	RunView,
	type RunDetail
} from './schemas';

export { mapTrace, TraceMap } from './map';
export { processTrace } from './process';
export { receiveTrace } from './receive';
export { recomputeAll } from './recompute';
export {
	downloadOriginal,
	readCurve,
	readWindow,
	windowBytes,
	windowJson,
	WindowQuery,
	WindowView
} from './view';

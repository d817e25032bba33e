export { EarlierQuery, EarlierView, readEarlier } from './earlier';
export { mapTrace, TraceMap } from './map';
export { placeTrace, TracePlace } from './place';
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

export {
	openColumnar,
	type OpenColumnar,
	type ReadRange,
	type TraceWindow,
	type WindowChannel
} from './columnar';
export { encodeColumnar } from './encode-columnar';
export type { ProposedColumn } from './propose-map';
export type { Trace, TraceColumn } from './trace';
export { decodeWindow, encodeWindow } from './window-bytes';

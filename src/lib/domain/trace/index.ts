export { openColumnar, type TraceWindow } from './columnar';
export { encodeColumnar } from './encode-columnar';
export type { ProposedColumn } from './propose-map';
export { decodeWindow, encodeWindow } from './window-bytes';

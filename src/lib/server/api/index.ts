export { openApiDocument, operationsOf } from './openapi';
export { operation } from './operation';
export * as fields from './fields';
export { page, pageOf, PageQuery, readCursor } from './paging';
export { problemResponse } from './problem-document';
export { containing, sortedBy, sortField, type SortKey } from './sorting';

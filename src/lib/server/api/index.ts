export { openApiDocument, operationsOf } from './openapi';
export { operation } from './operation';
export { page, pageOf, PageQuery, readCursor } from './paging';
export { problemResponse } from './problem-document';

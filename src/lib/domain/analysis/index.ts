export { analyseFile, METHOD_VERSION, type AnalysedFile } from './analyse';
export { describeFile } from './describe';

export { analyseFile, METHOD_VERSION, type AnalysedFile } from './analyse';
export { describeFile, type DescribedFile } from './describe';

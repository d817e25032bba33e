export { BenchNeeds, makeBench, NewBench } from './bench';
export { readRunStart, type RunStart } from './read';

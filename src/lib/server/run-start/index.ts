export { benchNeeds, makeBench, NewBench } from './bench';
export { readRunStart } from './read';

export { absorberRemarks, type Remark } from './absorber';
export {
	drawnStretch,
	isRunning,
	lateMinutes,
	overrunMinutes,
	progressOf,
	recordNeeds,
	waitsMinutes,
	type Need,
	type Recorded
} from './day-lane';
export { droppedSpan, wallSpan } from './drop';
export { firstFit } from './first-fit';
export { instantOrDayFromIso } from './instants';
export {
	covers,
	mergeIntervals,
	minutesOf,
	plusMinutes,
	subtractIntervals,
	withRigTime,
	type Interval
} from './intervals';
export { openIntervals, type OpeningHour } from './opening-hours';
export { isDay, offsetText, SCHEDULE_VIEWS, shownDays } from './shown-days';
export { instantInWords, spanInWords } from './words';

export { absorberRemarks, type Remark } from './absorber';
export { firstFit } from './first-fit';
export { instantOrDayFromIso } from './instants';
export { covers, mergeIntervals, minutesOf, plusMinutes, withRigTime, type Interval } from './intervals';
export { openIntervals, type OpeningHour } from './opening-hours';
export { instantInWords, spanInWords } from './words';

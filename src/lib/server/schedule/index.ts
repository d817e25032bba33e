export { findSlots } from './find-slots';
export { readSchedule } from './read';
export { FirstFitView, FirstFitWish, ScheduleQuery, ScheduleView, type Schedule } from './schemas';

export { readToday } from './read';
export { TodayView, type Today } from './schemas';

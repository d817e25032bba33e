export { readToday } from './read';
export { TodayView, type Today, type Work } from './schemas';

export { answerCheck, getChecklist, openChecks } from './checklist';
export { addReading, listReadings } from './readings';
export { Air, ChecklistView, NewCheck, NewReading, ReadingView } from './schemas';

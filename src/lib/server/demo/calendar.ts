import { DateTime } from 'luxon';

/**
 * The lab's working days around the day on which the demo lab was begun: 0 is that day, or the Monday after it.
 * @param workday so many working days later (earlier when negative) @param clock at the lab, e.g. `10:20`
 */
export function labTime(begun: Date, zone: string, workday: number, clock: string): Date {
	let day = DateTime.fromJSDate(begun, { zone }).startOf('day');
	while (day.weekday > 5) day = day.plus({ days: 1 });
	const step = Math.sign(workday);
	for (let left = Math.abs(workday); left > 0;) {
		day = day.plus({ days: step });
		if (day.weekday <= 5) left--;
	}
	const [hour, minute] = clock.split(':').map(Number);
	return day.set({ hour: hour!, minute: minute! }).toJSDate();
}

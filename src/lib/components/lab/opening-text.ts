/** One stretch of a week on the lab's clock: ISO weekday 1–7, `07:30`, up to `24:00`. */
interface OpeningHour {
	day: number;
	from: string;
	to: string;
}

const DAYS = ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun'];

/** A week's hours, days of equal hours together: `Mon–Thu 06:00–22:00`. Null: no hours are recorded, it is always open. */
export function openingText(hours: readonly OpeningHour[] | null): { days: string; hours: string }[] {
	if (hours === null) return [{ days: 'Every day', hours: 'at any hour' }];
	const week = DAYS.map((_, at) =>
		hours
			.filter(({ day }) => day === at + 1)
			.map(({ from, to }) => `${from}–${to}`)
			.sort()
			.join(', ')
	);
	const spans: { first: number; last: number; hours: string }[] = [];
	week.forEach((text, at) => {
		const open = spans.at(-1);
		if (open && open.hours === text && open.last === at - 1) open.last = at;
		else if (text) spans.push({ first: at, last: at, hours: text });
	});
	return spans.map(({ first, last, hours: text }) => ({
		days: first === last ? DAYS[first]! : `${DAYS[first]}–${DAYS[last]}`,
		hours: text
	}));
}

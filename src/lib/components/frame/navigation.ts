import type { IconName } from './icons';

export interface Place {
	href: string;
	label: string;
	icon: IconName;
}

/** The places of the rail, in the order of a day's work. */
export const PLACES: readonly Place[] = [
	{ href: '/today', label: 'Today', icon: 'today' },
	{ href: '/runs', label: 'Runs', icon: 'runs' },
	{ href: '/builds', label: 'Builds', icon: 'builds' },
	{ href: '/schedule', label: 'Schedule', icon: 'schedule' },
	{ href: '/bookings', label: 'Bookings', icon: 'bookings' },
	{ href: '/trends', label: 'Trends', icon: 'trends' },
	{ href: '/lab', label: 'Lab', icon: 'lab' }
];

/** Whether `path` lies at or below `href`; `/runsheet` does not lie below `/runs`. */
export function liesBelow(path: string, href: string): boolean {
	return path === href || path.startsWith(`${href}/`);
}

/** Our own line icons on a 20 × 20 grid, one stroke weight; each is the `d` of a single path. */
export const ICONS = {
	runs: 'M3 3v14h14M5.5 13c2-5.5 4.5-7.5 7-7.5 1.8 0 3 1 4 3M5.5 10.5c3-1.5 7-1.8 11 1.5',
	builds: 'M4 7.5 10 4l6 3.5v6L10 17l-6-3.5zM4 7.5l6 3.5 6-3.5M10 11v6',
	bookings: 'M3 4.5v11M17 4.5v11M3 7h6v2.5H3zM8 12h7v2.5H8z',
	trends: 'M3 3v14h14M7 8v5M7 10.5h.01M11 6.5v4M11 8.5h.01M15 4v5M15 6.5h.01',
	lab: 'M2.5 7h5v6h-5zM12.5 6h5v8h-5zM7.5 10h5M2 16.5h16',
	account: 'M10 10a3.25 3.25 0 1 0 0-6.5 3.25 3.25 0 0 0 0 6.5zM3.5 17c.6-3.2 3-5 6.5-5s5.9 1.8 6.5 5',
	plus: 'M10 4v12M4 10h12',
	close: 'M5 5l10 10M15 5 5 15',
	check: 'M4 10.5 8 14.5 16 5.5',
	left: 'M12.5 4.5 7 10l5.5 5.5',
	right: 'M7.5 4.5 13 10l-5.5 5.5',
	up: 'M4.5 12.5 10 7l5.5 5.5',
	down: 'M4.5 7.5 10 13l5.5-5.5',
	both: 'M6.5 8 10 4.5 13.5 8M6.5 12l3.5 3.5 3.5-3.5',
	upload: 'M10 13V3.5M6 7.5l4-4 4 4M3.5 12.5v4h13v-4',
	download: 'M10 3.5V13M6 9l4 4 4-4M3.5 12.5v4h13v-4',
	file: 'M5 2.5h6.5L15 6v11.5H5zM11.5 2.5V6H15',
	zoomIn: 'M8.5 14a5.5 5.5 0 1 0 0-11 5.5 5.5 0 0 0 0 11zM12.5 12.5 17 17M8.5 6v5M6 8.5h5',
	zoomOut: 'M8.5 14a5.5 5.5 0 1 0 0-11 5.5 5.5 0 0 0 0 11zM12.5 12.5 17 17M6 8.5h5',
	whole: 'M2.5 5v10M17.5 5v10M5 10h10M7.5 7.5 5 10l2.5 2.5M12.5 7.5 15 10l-2.5 2.5',
	retry: 'M16 10a6 6 0 1 1-1.8-4.3M16 3v3.5h-3.5',
	signOut: 'M8 3.5H3.5v13H8M7.5 10H17M13.5 6.5 17 10l-3.5 3.5',
	caution: 'M10 3 18 16.5H2zM10 8v4M10 14.2h.01',
	fold: 'M3 3.5h14v13H3zM8 3.5v13M13.5 7.5 11 10l2.5 2.5',
	unfold: 'M3 3.5h14v13H3zM8 3.5v13M11 7.5l2.5 2.5-2.5 2.5'
} as const;
export type IconName = keyof typeof ICONS;

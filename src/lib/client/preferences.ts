/**
 * Choices of how the application looks, kept in cookies (not in storage) so that the server renders them
 * in the first response and nothing flickers.
 */
export const THEMES = ['system', 'light', 'dark'] as const;
export type Theme = (typeof THEMES)[number];
export type Rail = 'wide' | 'narrow';

const YEAR_S = 31_536_000;

export function chooseTheme(theme: Theme) {
	document.documentElement.dataset.theme = theme;
	keep('theme', theme);
}

export function chooseRail(rail: Rail) {
	keep('rail', rail);
}

function keep(name: 'theme' | 'rail', value: string) {
	const secure = location.protocol === 'https:' ? '; secure' : '';
	document.cookie = `${name}=${value}; path=/; max-age=${YEAR_S}; samesite=lax${secure}`;
}

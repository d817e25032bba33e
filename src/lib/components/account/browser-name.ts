/** Names of browsers and systems in a user agent's text, the more particular before what it also claims to be. */
const BROWSERS: readonly (readonly [RegExp, string])[] = [
	[/\bEdg(?:e|A|iOS)?\//, 'Edge'],
	[/\bOPR\//, 'Opera'],
	[/\b(?:Firefox|FxiOS)\//, 'Firefox'],
	[/\bHeadlessChrome\//, 'Chromium'],
	[/\b(?:Chrome|CriOS|Chromium)\//, 'Chrome'],
	[/\bVersion\/.*\bSafari\//, 'Safari'],
	[/^curl\//, 'curl']
];
const SYSTEMS: readonly (readonly [RegExp, string])[] = [
	[/\bAndroid\b/, 'Android'],
	[/\b(?:iPhone|iPad)\b/, 'iOS'],
	[/\bWindows\b/, 'Windows'],
	[/\bMac OS X\b/, 'macOS'],
	[/\bCrOS\b/, 'ChromeOS'],
	[/\bLinux\b/, 'Linux']
];

/** `Firefox on Linux`: enough to tell one's own sessions apart. */
export function browserName(userAgent: string | null): string {
	if (!userAgent) return 'Unknown browser';
	const first = (list: typeof BROWSERS) => list.find(([pattern]) => pattern.test(userAgent))?.[1];
	const [browser, system] = [first(BROWSERS) ?? 'Unknown browser', first(SYSTEMS)];
	return system ? `${browser} on ${system}` : browser;
}

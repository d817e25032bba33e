import { chromium, type Browser } from 'playwright-core';
import { afterAll, beforeAll } from 'vitest';

/** Quiet and reproducible: nothing leaves the machine, nothing needs a display or a sandbox of its own. */
const FLAGS = [
	'--no-sandbox',
	'--disable-gpu',
	'--disable-quic',
	'--no-first-run',
	'--disable-background-networking',
	'--disable-component-update',
	'--disable-sync'
];

function openBrowser(): Promise<Browser> {
	const executablePath = process.env.TRUNNION_TEST_CHROMIUM ?? '/usr/bin/chromium';
	return chromium.launch({ executablePath, args: FLAGS });
}

/** One browser for this test file; each test opens a context of its own. */
export function useBrowser(): { readonly current: Browser } {
	let made: Browser | undefined;
	beforeAll(async () => {
		made = await openBrowser();
	});
	afterAll(() => made?.close());
	return {
		get current() {
			if (!made) throw new Error('The browser is there from the first hook or test on, not before.');
			return made;
		}
	};
}

import type { Browser, BrowserContextOptions, Page } from 'playwright-core';
import { PASSWORD } from './people';

/** What browsers said that they should not have: failed scripts, refused styles, missing files. */
export class Complaints {
	readonly said: string[] = [];
	/** An address that answers with an error on purpose. */
	readonly expected = new Set<string>();

	listenTo(page: Page): void {
		page.on('pageerror', (error) => this.said.push(`${page.url()}: ${error.stack ?? error.message}`));
		page.on('console', (message) => {
			if (message.type() !== 'error' || this.expected.has(message.location().url)) return;
			this.said.push(`${page.url()}: ${message.text()} (${message.location().url})`);
		});
	}
}

/** A browser of its own for one person; its clock is not the laboratory's, as with people who travel. */
export async function openVisitor(
	browser: Browser,
	origin: string,
	complaints: Complaints,
	options: BrowserContextOptions = {}
): Promise<Page> {
	const context = await browser.newContext({
		baseURL: origin,
		viewport: { width: 1280, height: 900 },
		locale: 'en-GB',
		timezoneId: 'America/Los_Angeles',
		reducedMotion: 'reduce',
		...options
	});
	context.setDefaultTimeout(30_000);
	// A refusal by the content security policy is told by an event too, also where a browser keeps its console quiet.
	await context.addInitScript(() => {
		document.addEventListener('securitypolicyviolation', (event) =>
			console.error(`refused by ${event.violatedDirective}: ${event.blockedURI} ${event.sample}`)
		);
	});
	const page = await context.newPage();
	complaints.listenTo(page);
	return page;
}

export async function signIn(page: Page, email: string): Promise<void> {
	await page.goto('/sign-in', { waitUntil: 'networkidle' });
	await page.getByLabel('Mail address').fill(email);
	await page.getByLabel('Password').fill(PASSWORD);
	await page.getByRole('button', { name: 'Sign in' }).click();
	await page.waitForURL((url) => url.pathname !== '/sign-in');
}

/** Colours and places ease into a new scheme or width: what is measured before that is neither the old look nor the new. */
export async function settled(page: Page): Promise<void> {
	await page.evaluate(async () => {
		for (let frame = 0; frame < 2; frame++) await new Promise((drawn) => requestAnimationFrame(drawn));
		const ended = Promise.allSettled(document.getAnimations().map((animation) => animation.finished));
		// One that never ends, such as a sign of loading, is not waited for.
		await Promise.race([ended, new Promise((late) => setTimeout(late, 1000))]);
	});
}

/** What a keyboard would act on now: the name of its field, else its words; nothing where it is on no part of the page. */
export const focused = (page: Page): Promise<string> =>
	page.evaluate(() => {
		const at = document.activeElement === document.body ? null : document.activeElement;
		return (at?.getAttribute('name') ?? at?.textContent ?? '').trim();
	});

/** Goes on by the Tab key until the focus is there. */
export async function tabTo(page: Page, what: string | RegExp): Promise<void> {
	for (let steps = 0; steps < 90; steps++) {
		await page.keyboard.press('Tab');
		const at = await focused(page);
		if (typeof what === 'string' ? at === what : what.test(at)) return;
	}
	throw new Error(`The keyboard does not reach ${what}.`);
}

import { AxeBuilder } from '@axe-core/playwright';
import type { Page } from 'playwright-core';
import { expect } from 'vitest';
import { settled } from './visitor';

const RULES = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'];

/** All rules at both widths; in the dark only what a scheme can change, since each whole look costs seconds. */
const LOOKS = [
	{ width: 1280, colorScheme: 'light', isWhole: true },
	{ width: 1280, colorScheme: 'dark', isWhole: false },
	{ width: 390, colorScheme: 'dark', isWhole: false },
	{ width: 390, colorScheme: 'light', isWhole: true }
] as const;

/** What breaks WCAG 2.2 AA, narrow and wide, light and dark, and what scrolls sideways: each once, with its first place. */
async function faults(page: Page): Promise<string[]> {
	const found = new Set<string>();
	for (const { width, colorScheme, isWhole } of LOOKS) {
		await page.setViewportSize({ width, height: 900 });
		await page.emulateMedia({ colorScheme });
		await settled(page);
		// No frames of others are in our pages: the quicker way of collecting loses nothing.
		const axe = new AxeBuilder({ page }).setLegacyMode(true);
		if (isWhole) axe.withTags(RULES);
		else axe.withRules(['color-contrast']);
		const { violations } = await axe.analyze();
		for (const { id, nodes } of violations)
			found.add(`${width} ${colorScheme} ${id}: ${nodes[0]?.html} ${nodes[0]?.failureSummary}`);
		const wide = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
		if (wide > 0) found.add(`${width} scrolls ${wide} px sideways`);
	}
	return [...found];
}

/** Leaves the page as wide and as light as tests find it. */
export async function expectAccessible(page: Page): Promise<void> {
	const found = await faults(page);
	await page.setViewportSize({ width: 1280, height: 900 });
	await page.emulateMedia({ colorScheme: 'light' });
	expect(found, page.url()).toEqual([]);
}

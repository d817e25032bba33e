import { readFileSync } from 'node:fs';
import path from 'node:path';
import { pathToFileURL } from 'node:url';
import { gzipSync } from 'node:zlib';
import { beforeAll, describe, expect, it } from 'vitest';
import { root } from '../../src/local/place.js';
import { useBrowser } from '../setup/browser';
import { useStack } from '../setup/stack';
import { furnish, signedIn } from './runs-lab';

/**
 * What a page costs before it can be used: its script as compressed for the wire, for every page there is, and the moment of
 * its largest paint. Charts come after, by themselves, where a page has any.
 */
const MOST_SCRIPT_BYTES = 100_000;
const MOST_PAINT_MS = 1000;
/** A test machine does other things as well: the best visit says what the page itself takes. */
const [LEAST_VISITS, MOST_VISITS] = [3, 9];
const QUIET_MS = 700;

const MAIN_PAGES = [
	'/today',
	'/runs',
	'/runs/new',
	'/builds',
	'/bookings',
	'/schedule',
	'/trends',
	'/lab/cells'
];

const output = path.join(root, '.svelte-kit/output');
interface Built {
	manifest: {
		_: {
			client: { start: string; app: string; imports: string[] };
			nodes: (() => Promise<{ imports: string[] }>)[];
			routes: {
				id: string;
				page: { layouts: (number | undefined)[]; errors: (number | undefined)[]; leaf: number } | null;
			}[];
		};
	};
}

const stack = useStack();
const browser = useBrowser();

describe('every page', () => {
	it('comes with less than 100 kB of script', async () => {
		const built = (await import(
			/* @vite-ignore */ pathToFileURL(path.join(output, 'server/manifest-full.js')).href
		)) as Built;
		const { client, nodes, routes } = built.manifest._;
		const sizes = new Map<string, number>();
		const sizeOf = (file: string) => {
			const known = sizes.get(file) ?? gzipSync(readFileSync(path.join(output, 'client', file))).length;
			sizes.set(file, known);
			return known;
		};
		const weights: Record<string, number> = {};
		for (const { id, page } of routes) {
			if (!page) continue;
			const files = new Set([client.start, client.app, ...client.imports]);
			for (const node of [...page.layouts, ...page.errors, page.leaf])
				if (node !== undefined) for (const file of (await nodes[node]!()).imports) files.add(file);
			weights[id] = [...files]
				.filter((file) => file.endsWith('.js'))
				.reduce((sum, file) => sum + sizeOf(file), 0);
		}
		console.log(
			`script per page, bytes compressed: ${Object.entries(weights)
				.sort((a, b) => b[1] - a[1])
				.map(([id, bytes]) => `${id} ${bytes}`)
				.join(', ')}`
		);
		expect(Object.keys(weights).length).toBeGreaterThan(15);
		expect(Math.min(...Object.values(weights))).toBeGreaterThan(20_000);
		expect(Object.entries(weights).filter(([, bytes]) => bytes >= MOST_SCRIPT_BYTES)).toEqual([]);
	});
});

describe('the main pages', () => {
	beforeAll(() => furnish(stack.current));

	it('have painted their largest part within a second', async () => {
		const page = await signedIn(browser.current, stack.current.origin, 'manager');
		await page.addInitScript(() => {
			const store = window as unknown as { largestMs: number };
			store.largestMs = 0;
			new PerformanceObserver((list) => {
				for (const entry of list.getEntries()) store.largestMs = entry.startTime;
			}).observe({ type: 'largest-contentful-paint', buffered: true });
		});
		/** Waits until nothing larger has been painted for a while: a page that holds a stream open is never idle. */
		const visit = async (at: string) => {
			await page.goto(stack.current.origin + at);
			const painted = await page.waitForFunction((quietMs) => {
				const { largestMs } = window as unknown as { largestMs: number };
				return largestMs > 0 && performance.now() - largestMs > quietMs ? largestMs : false;
			}, QUIET_MS);
			return painted.jsonValue() as Promise<number>;
		};
		const paints: Record<string, number> = {};
		for (const at of MAIN_PAGES) {
			let best = Infinity;
			for (let n = 0; n < LEAST_VISITS || (n < MOST_VISITS && best >= MOST_PAINT_MS); n++)
				best = Math.min(best, await visit(at));
			paints[at] = Math.round(best);
		}
		console.log(
			`largest contentful paint, ms: ${Object.entries(paints)
				.map(([at, ms]) => `${at} ${ms}`)
				.join(', ')}`
		);
		expect(Object.entries(paints).filter(([, ms]) => !(ms < MOST_PAINT_MS))).toEqual([]);
		await page.context().close();
	}, 300_000);
});

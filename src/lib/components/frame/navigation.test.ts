import { expect, it } from 'vitest';
import { PLACES, liesBelow } from './navigation';

it.each([
	['/runs', '/runs', true],
	['/runs/HB-R-0017', '/runs', true],
	['/runsheet', '/runs', false],
	['/', '/runs', false]
])('%s below %s: %s', (path, href, expected) => expect(liesBelow(path, href)).toBe(expected));

it('has no two places that claim the same page', () => {
	const hrefs = PLACES.map((place) => place.href);
	for (const href of hrefs) expect(hrefs.filter((other) => liesBelow(href, other))).toEqual([href]);
});

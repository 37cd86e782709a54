import { expect, it } from 'vitest';
import { pageWithin } from './page-within';

it.each([
	[1, 0, 1],
	[2, 60, 2],
	[3, 60, 2],
	[3, 61, 3],
	[99_999, 0, 1],
	[0, 60, 1],
	[-1, 60, 1],
	[1.5, 60, 1],
	[NaN, 60, 1]
])('page %d of %d things is page %d', (asked, total, page) => {
	expect(pageWithin(asked, total, 30)).toBe(page);
});

import { describe, expect, it } from 'vitest';
import { pageLinks } from './list-response';

/** The form of RFC 8288, section 3: `<target>; rel="relation"`, separated by commas. */
const links = (header: string) =>
	Object.fromEntries(
		[...header.matchAll(/<([^>]*)>; rel="(\w+)"(?:, |$)/g)].map(([, target, rel]) => [rel, target])
	);
const url = new URL(
	'https://stones.example/api/v1/groups/quarry/tasks?state=all&q=a%3E%22b&page=2'
);
const at = (page: number) => `/api/v1/groups/quarry/tasks?state=all&q=a%3E%22b&page=${page}`;

describe('links to other pages of a list', () => {
	it.each([
		['the first of three', 1, 150, { first: at(1), next: at(2), last: at(3) }],
		['in the middle', 2, 101, { first: at(1), prev: at(1), next: at(3), last: at(3) }],
		['the last', 3, 101, { first: at(1), prev: at(2), last: at(3) }],
		['the only one', 1, 50, { first: at(1), last: at(1) }],
		['of nothing', 1, 0, { first: at(1), last: at(1) }],
		['past the end', 9, 60, { first: at(1), prev: at(2), last: at(2) }]
	])('%s', (_, page, total, expected) => {
		expect(links(pageLinks(url, { page, pageSize: 50, total }))).toEqual(expected);
	});
});

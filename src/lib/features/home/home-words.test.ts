import { expect, it } from 'vitest';
import { homeSentence } from './home-words';

const groups = [{ slug: 'a', name: 'A', role: 'member', discrepancies: 0 }] as const;
const none = { tasks: 0, overdue: 0, toDecide: 0, changed: 0, discrepancies: 0 };

it.each([
	['Nothing waits for you.', {}],
	['1 task of yours.', { tasks: 1 }],
	['3 tasks of yours, 1 of them overdue.', { tasks: 3, overdue: 1 }],
	['1 submission waits for you.', { toDecide: 1 }],
	[
		'2 tasks of yours. 2 submissions wait for you. 1 discrepancy stands in your groups.',
		{ tasks: 2, toDecide: 2, discrepancies: 1 }
	]
])('%s', (sentence, totals) => {
	expect(homeSentence({ groups, totals: { ...none, ...totals } })).toBe(sentence);
});

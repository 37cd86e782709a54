import { describe, expect, it } from 'vitest';
import { makeTaskMark } from '../../../../tests/factories/task-views';
import { dayWords, markWords, sizeWords } from './task-words';

describe('what a row says of its task', () => {
	it.each([
		['Assigned to Mo Member', {}],
		['In progress, Mo Member', { state: 'in-progress' }],
		['Due 14 Dec, Mo Member', { dueOn: '2026-12-14' }],
		['Overdue since 14 Dec, Mo Member', { dueOn: '2026-12-14', overdue: true }],
		['Due 2 Jan 2027, unassigned', { dueOn: '2027-01-02', state: 'open', assignee: null }],
		['Unassigned', { state: 'open', assignee: null }],
		['Submitted by Mo Member', { state: 'submitted', dueOn: '2026-12-14' }],
		['Returned to Mo Member', { state: 'returned' }]
	] as const)('%s', (words, over) => {
		expect(markWords(makeTaskMark(over), 2026).join(' ').trim()).toBe(words);
	});
});

describe('sizes and days', () => {
	it('count in powers of ten', () => {
		expect(sizeWords(812)).toBe('812\u2009bytes');
		expect(sizeWords(10_000_000)).toBe('10\u2009MB');
	});

	it('name the year when it is another', () => {
		expect(dayWords('2026-01-05', 2026)).toBe('5 Jan');
		expect(dayWords('2027-01-05', 2026)).toBe('5 Jan 2027');
	});
});

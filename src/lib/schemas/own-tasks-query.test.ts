import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { TASK_STATES } from '../ledger/tasks';
import { parseOwnTasksQuery, printOwnTasksQuery } from './own-tasks-query';

describe('the query of my tasks', () => {
	it('comes back from the address it was printed into', () => {
		const queries = fc.record({
			state: fc.constantFrom('active' as const, 'all' as const, ...TASK_STATES),
			group: fc.stringMatching(/^[a-z0-9-]{0,60}$/),
			overdue: fc.boolean(),
			page: fc.integer({ min: 1, max: 100_000 })
		});
		fc.assert(
			fc.property(queries, (query) => {
				expect(parseOwnTasksQuery(printOwnTasksQuery(query))).toEqual(query);
			})
		);
	});

	it.each(['', '?state=lost&page=-3&overdue=yes', '?page=1e9', `?group=${'g'.repeat(61)}`])(
		'reads %s as the whole list',
		(search) => {
			const query = parseOwnTasksQuery(new URLSearchParams(search));
			expect(printOwnTasksQuery(query).toString()).toBe('');
		}
	);
});

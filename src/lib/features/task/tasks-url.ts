import type { SortLink } from '$lib/components/sort-link';
import { printTaskQuery, TASK_LIMITS, type TaskQuery } from '../../schemas/task-input';

/** The tasks' address with part of its state changed; any change but of the page goes to page 1. */
export function tasksHref(base: string, query: TaskQuery, change: Partial<TaskQuery>): string {
	const search = printTaskQuery({ ...query, page: 1, ...change }).toString();
	return search ? `${base}?${search}` : base;
}

/** Numbers of the tasks that were opened just now, as `opened=10,11` says. */
export function openedIn(parameters: URLSearchParams): ReadonlySet<number> {
	const numbers = (parameters.get('opened') ?? '').split(',').slice(0, TASK_LIMITS.claims);
	return new Set(numbers.filter((text) => /^[1-9]\d{0,8}$/.test(text)).map(Number));
}

/** True when any filter is on, so that no rows means "no match" rather than "nothing yet". */
export function isTaskFiltered(query: TaskQuery): boolean {
	return Boolean(
		query.search || query.kind || query.assignee || query.overdue || query.state !== 'active'
	);
}

const COLUMN_SORTS = {
	number: { sort: 'number', direction: 'ascending', again: 'due' },
	due: { sort: 'due', direction: 'ascending', again: 'newest' },
	changed: { sort: 'changed', direction: 'descending', again: 'due' }
} as const;

/** Where a column's heading leads; null for a column that can't be sorted by. */
export function taskSortLink(base: string, query: TaskQuery, column: string): SortLink | null {
	const entry = Object.entries(COLUMN_SORTS).find(([name]) => name === column)?.[1];
	if (!entry) return null;
	const on = query.sort === entry.sort;
	const words = { due: 'sort by due date', newest: 'sort newest first' };
	return {
		href: tasksHref(base, query, { sort: on ? entry.again : entry.sort }),
		direction: on ? entry.direction : null,
		action: on ? words[entry.again] : `sort ${entry.direction}`
	};
}

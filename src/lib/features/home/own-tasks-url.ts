import { printOwnTasksQuery, type OwnTasksQuery } from '../../schemas/own-tasks-query';

const BASE = '/home/tasks';

/** The table's address with a part of its state changed; a filter starts again at page one. */
export function ownTasksHref(query: OwnTasksQuery, change: Partial<OwnTasksQuery>): string {
	const search = printOwnTasksQuery({ ...query, page: 1, ...change }).toString();
	return search ? `${BASE}?${search}` : BASE;
}

export function isFiltered({ state, group, overdue }: OwnTasksQuery): boolean {
	return state !== 'active' || group !== '' || overdue;
}

import { z } from 'zod';
import { TASK_STATE_FILTERS } from '../ledger/tasks';

export const OWN_TASKS_PAGE_SIZE = 50;

/** State of the table of a person's own tasks, all of it in the URL. */
const ownTasksQuery = z.object({
	state: z.enum(TASK_STATE_FILTERS).catch('active'),
	/** A group's slug; empty: all groups. */
	group: z.string().max(60).catch(''),
	overdue: z.boolean().catch(false),
	page: z.coerce.number().int().min(1).max(100_000).catch(1)
});
export type OwnTasksQuery = z.infer<typeof ownTasksQuery>;

export function parseOwnTasksQuery(parameters: URLSearchParams): OwnTasksQuery {
	return ownTasksQuery.parse({
		state: parameters.get('state') ?? 'active',
		group: parameters.get('group') ?? '',
		overdue: parameters.get('overdue') === '1',
		page: parameters.get('page') ?? 1
	});
}

/** The query as it stands in the URL, defaults left out. */
export function printOwnTasksQuery(query: OwnTasksQuery): URLSearchParams {
	const out = new URLSearchParams();
	if (query.state !== 'active') out.set('state', query.state);
	if (query.group) out.set('group', query.group);
	if (query.overdue) out.set('overdue', '1');
	if (query.page > 1) out.set('page', String(query.page));
	return out;
}

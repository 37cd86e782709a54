import { printActivityQuery, type ActivityQuery } from '../../schemas/activity-query';
import type { ActivityKind } from '../../schemas/talk-views';

export const ACTIVITY_KIND_WORDS: Readonly<Record<ActivityKind, string>> = {
	claims: 'Claims',
	tasks: 'Tasks',
	talk: 'Talk',
	people: 'People',
	settings: 'Settings'
};

/** The activity with some of its filters changed; from the first page on unless a page is named. */
export function activityHref(
	base: string,
	query: ActivityQuery,
	change: Partial<ActivityQuery> = {}
): string {
	const search = printActivityQuery({ ...query, page: 1, ...change }).toString();
	return search ? `${base}?${search}` : base;
}

import { z } from 'zod';
import { ACTIVITY_KINDS, type ActivityKind } from './talk-views';

export const ACTIVITY_PAGE_SIZE = 50;

const day = z.union([z.literal(''), z.iso.date()]).catch('');

/** What of a group's activity is shown, all of it in the URL. A part that can't be read is no filter. */
const activityQuery = z.object({
	kind: z.enum(['all', ...ACTIVITY_KINDS]).catch('all'),
	/** A person's id; empty: anybody's. */
	person: z.string().max(64).catch(''),
	/** A claim's number; null: any. */
	claim: z.coerce.number().int().min(1).max(999_999_999).nullable().catch(null),
	/** First and last day, in UTC. */
	from: day,
	to: day,
	page: z.coerce.number().int().min(1).max(100_000).catch(1)
});
export type ActivityQuery = z.infer<typeof activityQuery>;

export function parseActivityQuery(parameters: URLSearchParams): ActivityQuery {
	return activityQuery.parse({
		kind: parameters.get('kind') ?? 'all',
		person: parameters.get('person') ?? '',
		claim: parameters.get('claim')?.replace(/^#/, '') || null,
		from: parameters.get('from') ?? '',
		to: parameters.get('to') ?? '',
		page: parameters.get('page') ?? 1
	});
}

/** The query as it stands in the URL, defaults left out. */
export function printActivityQuery(query: ActivityQuery): URLSearchParams {
	const out = new URLSearchParams();
	if (query.kind !== 'all') out.set('kind', query.kind);
	if (query.person) out.set('person', query.person);
	if (query.claim !== null) out.set('claim', String(query.claim));
	if (query.from) out.set('from', query.from);
	if (query.to) out.set('to', query.to);
	if (query.page > 1) out.set('page', String(query.page));
	return out;
}

/** True when any filter is on, so that no entries means "no match" rather than "nothing yet". */
export function isActivityFiltered(query: ActivityQuery): boolean {
	return printActivityQuery({ ...query, page: 1 }).size > 0;
}

/** The kind that a claim's history is narrowed to; null: all of it. */
export function parseActivityKind(text: string | null): ActivityKind | null {
	return ACTIVITY_KINDS.find((kind) => kind === text) ?? null;
}

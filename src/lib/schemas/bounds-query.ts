import { z } from 'zod';

export const BOUNDS_PAGE_SIZE = 50;

/** State of the public table of bounds, all of it in the URL. */
const boundsQuery = z.object({
	search: z.string().trim().max(200).catch(''),
	parties: z.enum(['any', '2', '3', 'more']).catch('any'),
	scenario: z.string().max(200).catch(''),
	page: z.coerce.number().int().min(1).max(100_000).catch(1)
});
export type BoundsQuery = z.infer<typeof boundsQuery>;

export function parseBoundsQuery(parameters: URLSearchParams): BoundsQuery {
	return boundsQuery.parse({
		search: parameters.get('q') ?? '',
		parties: parameters.get('parties') ?? 'any',
		scenario: parameters.get('scenario') ?? '',
		page: parameters.get('page') ?? 1
	});
}

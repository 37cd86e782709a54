import type { RequestEvent } from '@sveltejs/kit';
import { listGroupsOf } from '../services/groups/list-groups-of';
import { contextOf } from './guards';

/** Where someone goes who has just signed in and came from nowhere in particular. */
export async function landingPath(event: RequestEvent): Promise<string> {
	const [group] = await listGroupsOf(contextOf(event));
	return group ? `/g/${group.slug}` : '/account';
}

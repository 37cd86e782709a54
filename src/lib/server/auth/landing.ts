import type { RequestEvent } from '@sveltejs/kit';
import { listGroupsOf } from '../services/groups/list-groups-of';
import { contextOf } from './guards';

/** Where someone goes who has just signed in and came from nowhere in particular. */
export async function landingPath(event: RequestEvent): Promise<string> {
	const groups = await listGroupsOf(contextOf(event));
	return groups.length > 0 ? '/home' : '/account';
}

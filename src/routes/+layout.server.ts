import { contextOf } from '$lib/server/auth/guards';
import { listGroupsOf } from '$lib/server/services/groups/list-groups-of';
import type { LayoutServerLoad } from './$types';

/** Who is here and their groups, for the header; nothing for a visitor. */
export const load: LayoutServerLoad = async (event) => {
	const ctx = contextOf(event);
	const groups = await listGroupsOf(ctx);
	return {
		person: ctx.actor && { name: ctx.actor.name },
		groups: groups.map(({ slug, name }) => ({ slug, name }))
	};
};

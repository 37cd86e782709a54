import { contextOf } from '$lib/server/auth/guards';
import { listGroupsOf } from '$lib/server/services/groups/list-groups-of';
import { unreadCount } from '$lib/server/services/notifications/list-news';
import type { LayoutServerLoad } from './$types';

/** Who is here and their groups, for the header; nothing for a visitor. */
export const load: LayoutServerLoad = async (event) => {
	const ctx = contextOf(event);
	const { actor } = ctx;
	// Loaded again with every page, so that the number does not grow old on the way.
	void event.url.pathname;
	event.depends('merestone:news');
	const [groups, unread] = await Promise.all([
		listGroupsOf(ctx),
		actor ? unreadCount({ ...ctx, actor }) : 0
	]);
	return {
		person: actor && { name: actor.name, isAdmin: actor.isAdmin },
		unread,
		groups: groups.map(({ slug, name }) => ({ slug, name }))
	};
};

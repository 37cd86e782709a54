import { localPath } from '$lib/schemas/account';
import { parseOwnTasksQuery } from '$lib/schemas/own-tasks-query';
import { requireUser } from '$lib/server/auth/guards';
import { answering } from '$lib/server/http/page-errors';
import { createFeed } from '$lib/server/services/calendar/create-feed';
import { listFeeds } from '$lib/server/services/calendar/list-feeds';
import { revokeFeed } from '$lib/server/services/calendar/revoke-feed';
import { listOwnTasks } from '$lib/server/services/home/list-own-tasks';
import { redirect } from '@sveltejs/kit';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = requireUser(event);
	const query = parseOwnTasksQuery(event.url.searchParams);
	return {
		query,
		tasks: await answering(() => listOwnTasks(ctx, query)),
		feeds: await listFeeds(ctx, { groupSlug: null })
	};
};

const HERE = '/home/tasks';
/** Calendars are offered on several pages; each form says on which it stood. */
const cameFrom = (data: FormData) => localPath(String(data.get('back') ?? '')) ?? HERE;

export const actions: Actions = {
	makeCalendar: async (event) => {
		const ctx = requireUser(event);
		const data = await event.request.formData();
		const group = String(data.get('group') ?? '');
		await answering(() => createFeed(ctx, group ? { groupSlug: group } : {}));
		redirect(303, cameFrom(data));
	},
	revokeCalendar: async (event) => {
		const ctx = requireUser(event);
		const data = await event.request.formData();
		await answering(() => revokeFeed(ctx, String(data.get('id') ?? '')));
		redirect(303, cameFrom(data));
	}
};

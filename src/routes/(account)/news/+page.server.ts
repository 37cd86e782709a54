import { requireUser } from '$lib/server/auth/guards';
import { failWith } from '$lib/server/http/action-error';
import { listNews } from '$lib/server/services/notifications/list-news';
import { markRead, openNotification } from '$lib/server/services/notifications/mark-read';
import { redirect } from '@sveltejs/kit';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = requireUser(event);
	return { news: await listNews(ctx, Number(event.url.searchParams.get('page') ?? 1)) };
};

export const actions: Actions = {
	/** Looking at the list marks nothing; opening one of its lines does. */
	open: async (event) => {
		const ctx = requireUser(event);
		const data = await event.request.formData();
		let href: string;
		try {
			({ href } = await openNotification(ctx, String(data.get('id') ?? '')));
		} catch (thrown) {
			return failWith(thrown);
		}
		redirect(303, href);
	},
	/** What a page's script says when a mail led to it. */
	read: async (event) => {
		const ctx = requireUser(event);
		const data = await event.request.formData();
		return { read: await markRead(ctx, [String(data.get('id') ?? '')]) };
	},
	all: async (event) => {
		const marked = await markRead(requireUser(event), 'all');
		return { marked };
	}
};

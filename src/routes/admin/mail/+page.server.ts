import { requireAdmin } from '$lib/server/auth/guards';
import { config } from '$lib/server/config';
import { failWith } from '$lib/server/http/action-error';
import { discardMail } from '$lib/server/services/outbox/discard-mail';
import { listOutbox } from '$lib/server/services/outbox/list-outbox';
import { retryMails } from '$lib/server/services/outbox/retry-mails';
import type { RequestEvent } from '@sveltejs/kit';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = requireAdmin(event);
	const { searchParams } = event.url;
	const state = searchParams.get('state') ?? 'dead';
	const page = Number(searchParams.get('page') ?? 1);
	const { smtpUrl, demo } = config();
	return { outbox: await listOutbox(ctx, { state, page }), sends: smtpUrl !== null || demo };
};

async function idOf(event: RequestEvent): Promise<string> {
	return String((await event.request.formData()).get('id') ?? '');
}

export const actions: Actions = {
	retry: async (event) => {
		const ctx = requireAdmin(event);
		try {
			await retryMails(ctx, await idOf(event));
		} catch (thrown) {
			return failWith(thrown);
		}
		return { done: 'The mail is tried again at once.' };
	},
	retryDead: async (event) => {
		const count = await retryMails(requireAdmin(event), 'all-dead');
		return { done: `${count} ${count === 1 ? 'mail is' : 'mails are'} tried again at once.` };
	},
	discard: async (event) => {
		const ctx = requireAdmin(event);
		try {
			await discardMail(ctx, await idOf(event));
		} catch (thrown) {
			return failWith(thrown);
		}
		return { done: 'The mail is discarded.' };
	}
};

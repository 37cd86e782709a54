import { publicContext } from '$lib/server/auth/guards';
import { answering } from '$lib/server/http/page-errors';
import { showUnsubscribe, unsubscribe } from '$lib/server/services/notifications/unsubscribe';
import type { Actions, PageServerLoad } from './$types';

/** Looking changes nothing: mail programmes open links by themselves. */
export const load: PageServerLoad = async (event) => {
	const ctx = publicContext(event);
	return { turnsOff: await answering(() => showUnsubscribe(ctx, event.params.token)) };
};

export const actions: Actions = {
	/** Also sent by mail programmes themselves (RFC 8058): no session, no origin, any number of times. */
	default: async (event) => {
		await answering(() => unsubscribe(publicContext(event), event.params.token));
		return { done: true };
	}
};

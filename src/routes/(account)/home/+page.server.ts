import { requireUser } from '$lib/server/auth/guards';
import { answering } from '$lib/server/http/page-errors';
import { showHome } from '$lib/server/services/home/show-home';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = requireUser(event);
	return { home: await answering(() => showHome(ctx)) };
};

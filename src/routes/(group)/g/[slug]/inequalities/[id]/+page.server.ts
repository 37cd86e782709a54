import { requireRole } from '$lib/server/auth/guards';
import { answering } from '$lib/server/http/page-errors';
import { showInequality } from '$lib/server/services/inequalities/show-inequality';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = await requireRole(event, 'observer');
	const normalisation = event.url.searchParams.get('as') ?? undefined;
	return {
		inequality: await answering(() => showInequality(ctx, event.params.id, normalisation)),
		role: ctx.role
	};
};

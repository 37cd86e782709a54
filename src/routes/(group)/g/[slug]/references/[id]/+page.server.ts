import { requireRole } from '$lib/server/auth/guards';
import { answering } from '$lib/server/http/page-errors';
import { showReference } from '$lib/server/services/references/show-reference';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = await requireRole(event, 'observer');
	return { paper: await answering(() => showReference(ctx, event.params.id)), role: ctx.role };
};

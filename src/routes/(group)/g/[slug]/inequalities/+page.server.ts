import { requireRole } from '$lib/server/auth/guards';
import { answering } from '$lib/server/http/page-errors';
import { listInequalities } from '$lib/server/services/inequalities/list-inequalities';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = await requireRole(event, 'observer');
	return { inequalities: await answering(() => listInequalities(ctx)) };
};

import { requireRole } from '$lib/server/auth/guards';
import { answering } from '$lib/server/http/page-errors';
import { listReferences } from '$lib/server/services/references/list-references';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = await requireRole(event, 'observer');
	return { references: await answering(() => listReferences(ctx)) };
};

import { parseLedgerQuery } from '$lib/schemas/ledger-query';
import { requireRole } from '$lib/server/auth/guards';
import { answering } from '$lib/server/http/page-errors';
import { listClaims } from '$lib/server/services/claims/list-claims';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = await requireRole(event, 'observer');
	const query = parseLedgerQuery(event.url.searchParams);
	return { query, ledger: await answering(() => listClaims(ctx, query)), role: ctx.role };
};

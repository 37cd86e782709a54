import { parseLedgerQuery } from '$lib/schemas/ledger-query';
import { claimInput } from '$lib/schemas/claim-input';
import { requireRole } from '$lib/server/auth/guards';
import { endpoint, jsonResponse, jsonWithEtag, readJson } from '$lib/server/http/api';
import { listResponse } from '$lib/server/http/list-response';
import { countRequest } from '$lib/server/http/request-limits';
import { enterClaim } from '$lib/server/services/claims/enter-claim';
import { ledgerRows } from '$lib/server/services/claims/ledger-rows';
import { listClaims } from '$lib/server/services/claims/list-claims';
import type { RequestHandler } from './$types';

const MOST_NUMBERS = 100;

/** The group's ledger with the query of the page, or some rows of it: `?numbers=3,5`. */
export const GET: RequestHandler = endpoint(async (event) => {
	const ctx = await requireRole(event, 'observer');
	const asked = event.url.searchParams.get('numbers');
	if (asked !== null) {
		const numbers = asked
			.split(',')
			.filter((text) => /^[1-9]\d{0,8}$/.test(text))
			.slice(0, MOST_NUMBERS)
			.map(Number);
		return jsonWithEtag(event, { items: await ledgerRows(ctx, numbers) });
	}
	return listResponse(event, await listClaims(ctx, parseLedgerQuery(event.url.searchParams)));
});

/** Enters a claim; the body holds the fields of the form. */
export const POST: RequestHandler = endpoint(async (event) => {
	const ctx = await requireRole(event, 'member');
	await countRequest(event, 'change');
	const entered = await enterClaim(ctx, await readJson(event, claimInput.partial()));
	const location = `/api/v1/groups/${ctx.group.slug}/claims/${entered.number}`;
	return jsonResponse(entered, { status: 201, headers: { Location: location } });
});

import { z } from 'zod';
import { requireRole } from '$lib/server/auth/guards';
import { endpoint, jsonResponse, readJson } from '$lib/server/http/api';
import { readClaim } from '$lib/server/services/readings/read-claim';
import { claimInput } from '$lib/schemas/claim-input';
import type { RequestHandler } from './$types';

const input = claimInput.partial().extend({ group: z.string().max(100) });

/** What is understood of a half-filled claim form; writes nothing. */
export const POST: RequestHandler = endpoint(async (event) => {
	const { group, ...fields } = await readJson(event, input);
	const ctx = await requireRole(event, 'observer', group);
	return jsonResponse(await readClaim(ctx, fields));
});

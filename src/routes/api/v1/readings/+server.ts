import { z } from 'zod';
import { requireRole } from '$lib/server/auth/guards';
import { endpoint, jsonResponse, readJson } from '$lib/server/http/api';
import { countRequest } from '$lib/server/http/request-limits';
import { readClaim } from '$lib/server/services/readings/read-claim';
import type { RequestHandler } from './$types';

/** The service itself says what is wrong with which field, and reads the others. */
const input = z.looseObject({ group: z.string().max(100) });

/** What is understood of a half-filled claim form; writes nothing. */
export const POST: RequestHandler = endpoint(async (event) => {
	const { group, ...fields } = await readJson(event, input);
	const ctx = await requireRole(event, 'observer', group);
	await countRequest(event, 'reading');
	return jsonResponse(await readClaim(ctx, fields));
});

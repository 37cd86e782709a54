import { contextOf } from '$lib/server/auth/guards';
import { endpoint, jsonWithEtag } from '$lib/server/http/api';
import { downloadResult } from '$lib/server/services/recomputations/download-result';
import type { RequestHandler } from './$types';

/** The result with its problem and certificate, as the command line's verify-certificate reads it. */
export const GET: RequestHandler = endpoint(async (event) => {
	const result = await downloadResult(contextOf(event), event.params.id);
	const name = `merestone-${result.quantity}-${event.params.id}.json`;
	return jsonWithEtag(event, result, {
		headers: { 'Content-Disposition': `attachment; filename="${name}"` }
	});
});

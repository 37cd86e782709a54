import { contextOf } from '$lib/server/auth/guards';
import { endpoint, jsonResponse } from '$lib/server/http/api';
import { recheckCertificate } from '$lib/server/services/recomputations/recheck-certificate';
import type { RequestHandler } from './$types';

/** Runs the independent check of the certificate again; changes nothing. */
export const POST: RequestHandler = endpoint(async (event) =>
	jsonResponse(await recheckCertificate(contextOf(event), event.params.id))
);

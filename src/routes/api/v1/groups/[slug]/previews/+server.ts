import { z } from 'zod';
import { requireRole } from '$lib/server/auth/guards';
import { endpoint, jsonResponse, readJson } from '$lib/server/http/api';
import { countRequest } from '$lib/server/http/request-limits';
import { previewText } from '$lib/server/services/comments/preview-text';
import type { RequestHandler } from './$types';

const input = z.object({ text: z.string() });

/** A text with Markdown, formulas and mentions as it would be shown; writes nothing. */
export const POST: RequestHandler = endpoint(async (event) => {
	const ctx = await requireRole(event, 'member');
	const { text } = await readJson(event, input);
	await countRequest(event, 'reading');
	return jsonResponse(await previewText(ctx, text));
});

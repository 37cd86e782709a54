import { requireRole } from '$lib/server/auth/guards';
import { attachmentHeaders } from '$lib/server/http/attachment';
import { answering } from '$lib/server/http/page-errors';
import { downloadAttached } from '$lib/server/services/submissions/list-attached';
import type { RequestHandler } from './$types';

/** A certificate as somebody attached it to a claim, for another check elsewhere. */
export const GET: RequestHandler = async (event) => {
	const ctx = await requireRole(event, 'observer');
	const { name, text } = await answering(() => downloadAttached(ctx, event.params.id));
	const bytes = new TextEncoder().encode(text);
	return new Response(bytes, {
		headers: attachmentHeaders(name, 'application/json', bytes.byteLength)
	});
};

import { requireRole } from '$lib/server/auth/guards';
import { attachmentHeaders } from '$lib/server/http/attachment';
import { answering } from '$lib/server/http/page-errors';
import { downloadFile } from '$lib/server/services/evidence-files/download-file';
import type { RequestHandler } from './$types';

/** A file handed in with a submission, to be saved, never shown as a page of this site. */
export const GET: RequestHandler = async (event) => {
	const ctx = await requireRole(event, 'observer');
	const { name, mediaType, bytes } = await answering(() => downloadFile(ctx, event.params.id));
	return new Response(bytes, { headers: attachmentHeaders(name, mediaType, bytes.byteLength) });
};

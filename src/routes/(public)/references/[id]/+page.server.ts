import { publicContext } from '$lib/server/auth/guards';
import { letCache } from '$lib/server/http/cache';
import { answering } from '$lib/server/http/page-errors';
import { showPublicReference } from '$lib/server/services/references/show-public-reference';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = publicContext(event);
	const paper = await answering(() => showPublicReference(ctx, event.params.id));
	letCache(event);
	return { paper };
};

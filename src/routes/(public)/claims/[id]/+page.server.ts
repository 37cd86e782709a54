import { publicContext } from '$lib/server/auth/guards';
import { letCache } from '$lib/server/http/cache';
import { answering } from '$lib/server/http/page-errors';
import { showPublicClaim } from '$lib/server/services/claims/show-public-claim';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const claim = await answering(() => showPublicClaim(publicContext(event), event.params.id));
	letCache(event);
	return { claim };
};

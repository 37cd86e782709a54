import { publicContext } from '$lib/server/auth/guards';
import { letCache } from '$lib/server/http/cache';
import type { PageServerLoad } from './$types';

/** The same for everyone. */
export const load: PageServerLoad = (event) => {
	publicContext(event);
	letCache(event);
};

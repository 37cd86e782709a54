import { publicContext } from '$lib/server/auth/guards';
import { letCache } from '$lib/server/http/cache';
import { leadOn } from '$lib/server/http/moved';
import { answering } from '$lib/server/http/page-errors';
import { movedForPublic } from '$lib/server/services/inequalities/moved-inequality';
import { showPublicInequality } from '$lib/server/services/inequalities/show-public-inequality';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const { id } = event.params;
	leadOn(event, id, await movedForPublic(publicContext(event), id));
	const normalisation = event.url.searchParams.get('as') ?? undefined;
	const inequality = await answering(() =>
		showPublicInequality(publicContext(event), event.params.id, normalisation)
	);
	letCache(event);
	return { inequality };
};

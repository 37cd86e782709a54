import { requireRole } from '$lib/server/auth/guards';
import { isFormSentBySignedOut } from '$lib/server/http/signed-out-form';
import { waitingFor } from '$lib/server/services/home/waiting-for';
import type { LayoutServerLoad } from './$types';

export const load: LayoutServerLoad = async (event) => {
	if (isFormSentBySignedOut(event))
		return { group: { slug: event.params.slug, name: event.params.slug, waiting: 0 } };
	// Loaded again with every page, so that the number does not grow old on the way.
	void event.url.pathname;
	const ctx = await requireRole(event, 'observer');
	const { slug, name } = ctx.group;
	return { group: { slug, name, waiting: await waitingFor(ctx) }, role: ctx.role };
};

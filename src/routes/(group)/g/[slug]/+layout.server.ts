import { requireRole } from '$lib/server/auth/guards';
import { isFormSentBySignedOut } from '$lib/server/http/signed-out-form';
import type { LayoutServerLoad } from './$types';

export const load: LayoutServerLoad = async (event) => {
	if (isFormSentBySignedOut(event))
		return { group: { slug: event.params.slug, name: event.params.slug } };
	const { group, role } = await requireRole(event, 'observer');
	return { group: { slug: group.slug, name: group.name }, role };
};

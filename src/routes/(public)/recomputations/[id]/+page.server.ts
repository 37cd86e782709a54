import { contextOf } from '$lib/server/auth/guards';
import { answering } from '$lib/server/http/page-errors';
import { showCertificate } from '$lib/server/services/certificates/show-certificate';
import type { PageServerLoad } from './$types';

/** Whoever may see the recomputation, by a public claim or by their group's: the service decides. */
export const load: PageServerLoad = async (event) => ({
	certificate: await answering(() => showCertificate(contextOf(event), event.params.id))
});

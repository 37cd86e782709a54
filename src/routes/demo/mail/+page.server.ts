import { error } from '@sveltejs/kit';
import { publicContext } from '$lib/server/auth/guards';
import { config } from '$lib/server/config';
import { caughtMails } from '$lib/server/mail/caught-mails';
import type { PageServerLoad } from './$types';

/** Demo only: what the local mail sink caught. Elsewhere there is nothing here. */
export const load: PageServerLoad = (event) => {
	publicContext(event);
	const mails = config().demo ? caughtMails() : null;
	if (!mails) error(404, 'There is nothing here.');
	return { mails };
};

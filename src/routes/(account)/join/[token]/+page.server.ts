import { contextOf, requireUser } from '$lib/server/auth/guards';
import { answering } from '$lib/server/http/page-errors';
import { acceptInvitation } from '$lib/server/services/invitations/accept-invitation';
import { findInvitation, findJoinedGroup } from '$lib/server/services/invitations/find-invitation';
import { error, redirect } from '@sveltejs/kit';
import type { Actions, PageServerLoad } from './$types';

/** Looking at a link does not use it up: mail programmes open links by themselves. */
export const load: PageServerLoad = async (event) => {
	const { actor } = event.locals;
	const invitation = await findInvitation(contextOf(event), event.params.token);
	if (!invitation) {
		// A used link still leads those who are in the group to it.
		const joined = actor && (await findJoinedGroup(requireUser(event), event.params.token));
		if (joined) redirect(303, `/g/${joined.slug}`);
		error(404, 'This link was used, revoked, or is older than 14 days.');
	}
	return {
		groupName: invitation.group.name,
		role: invitation.role,
		email: invitation.email,
		signedInAs: actor && actor.email,
		next: encodeURIComponent(event.url.pathname)
	};
};

export const actions: Actions = {
	default: async (event) => {
		const ctx = requireUser(event);
		const { slug } = await answering(() => acceptInvitation(ctx, event.params.token));
		redirect(303, `/g/${slug}`);
	}
};

import { readAddressList } from '$lib/schemas/address-list';
import { requireRole } from '$lib/server/auth/guards';
import { groupAction } from '$lib/server/http/group-action';
import { countRequest } from '$lib/server/http/request-limits';
import { changeRole } from '$lib/server/services/groups/change-role';
import { leaveGroup } from '$lib/server/services/groups/leave-group';
import { removeMember } from '$lib/server/services/groups/remove-member';
import { showMembers } from '$lib/server/services/groups/show-members';
import { transferOwnership } from '$lib/server/services/groups/transfer-ownership';
import { createInvitation } from '$lib/server/services/invitations/create-invitation';
import { inviteByEmail } from '$lib/server/services/invitations/invite-by-email';
import { resendInvitation } from '$lib/server/services/invitations/resend-invitation';
import { revokeInvitation } from '$lib/server/services/invitations/revoke-invitation';
import { redirect } from '@sveltejs/kit';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = await requireRole(event, 'observer');
	return { group: { slug: ctx.group.slug, name: ctx.group.name }, ...(await showMembers(ctx)) };
};

const done = async (work: Promise<unknown>, sentence: string) => (await work, { done: sentence });

export const actions: Actions = {
	mail: groupAction('maintainer', async (ctx, field, event) => {
		const emails = field('emails');
		await countRequest(event, 'invitation', readAddressList(emails).addresses.length);
		return { mailed: await inviteByEmail(ctx, { emails, role: field('role') }) };
	}),
	invite: groupAction('maintainer', async (ctx, field) => {
		const { link, expiresAt } = await createInvitation(ctx, { role: field('role') });
		return { link, until: expiresAt.toISOString() };
	}),
	resend: groupAction('maintainer', async (ctx, field, event) => {
		await countRequest(event, 'invitation');
		const { email } = await resendInvitation(ctx, field('id'));
		return { done: `The invitation goes to ${email} once more.` };
	}),
	revoke: groupAction('maintainer', (ctx, field) =>
		done(revokeInvitation(ctx, field('id')), 'The invitation is revoked.')
	),
	role: groupAction('owner', (ctx, field) =>
		done(changeRole(ctx, { userId: field('user'), role: field('role') }), 'The role is changed.')
	),
	remove: groupAction('observer', async (ctx, field) => {
		const user = field('user');
		if (user !== ctx.actor.id) return done(removeMember(ctx, user), 'Removed from the group.');
		await leaveGroup(ctx);
		redirect(303, '/account?left');
	}),
	transfer: groupAction('owner', (ctx, field) =>
		done(transferOwnership(ctx, field('user')), 'The group is handed over. You are a maintainer.')
	)
};

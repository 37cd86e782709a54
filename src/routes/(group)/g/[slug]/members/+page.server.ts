import { mayChangeRoles, mayInvite } from '$lib/ledger/group-policy';
import { ROLES } from '$lib/ledger/roles';
import { requireRole } from '$lib/server/auth/guards';
import { failWith } from '$lib/server/http/action-error';
import { changeRole, removeMember } from '$lib/server/services/groups/change-role';
import { listMembers } from '$lib/server/services/groups/list-members';
import { createInvitation } from '$lib/server/services/invitations/create-invitation';
import { listInvitations } from '$lib/server/services/invitations/list-invitations';
import { revokeInvitation } from '$lib/server/services/invitations/revoke-invitation';
import { redirect, type RequestEvent } from '@sveltejs/kit';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = await requireRole(event, 'observer');
	return {
		group: { slug: ctx.group.slug, name: ctx.group.name },
		members: await listMembers(ctx),
		invitations: await listInvitations(ctx),
		self: ctx.actor.id,
		roles: ROLES,
		mayChangeRoles: mayChangeRoles(ctx.role),
		invitable: ROLES.filter((role) => mayInvite(ctx.role, role))
	};
};

async function field(event: RequestEvent, ...names: string[]): Promise<string[]> {
	const data = await event.request.formData();
	return names.map((name) => String(data.get(name) ?? ''));
}

export const actions: Actions = {
	invite: async (event) => {
		const ctx = await requireRole(event, 'maintainer');
		try {
			const [role = ''] = await field(event, 'role');
			const { link, expiresAt } = await createInvitation(ctx, { role });
			return { link, until: expiresAt.toISOString() };
		} catch (thrown) {
			return failWith(thrown);
		}
	},
	revoke: async (event) => {
		const ctx = await requireRole(event, 'maintainer');
		try {
			const [id = ''] = await field(event, 'id');
			await revokeInvitation(ctx, id);
		} catch (thrown) {
			return failWith(thrown);
		}
		return { done: 'The link is revoked.' };
	},
	role: async (event) => {
		const ctx = await requireRole(event, 'owner');
		try {
			const [userId = '', role = ''] = await field(event, 'user', 'role');
			await changeRole(ctx, { userId, role });
		} catch (thrown) {
			return failWith(thrown);
		}
		return { done: 'The role is changed.' };
	},
	remove: async (event) => {
		const ctx = await requireRole(event, 'observer');
		const [user = ''] = await field(event, 'user');
		try {
			await removeMember(ctx, user);
		} catch (thrown) {
			return failWith(thrown);
		}
		if (user === ctx.actor.id) redirect(303, '/account?left');
		return { done: 'Removed from the group.' };
	}
};

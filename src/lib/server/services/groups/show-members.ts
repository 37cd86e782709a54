import { mayInvite } from '../../../ledger/group-policy';
import { ROLES, type Role } from '../../../ledger/roles';
import type { InvitationView, MemberView } from '../../../schemas/views';
import type { GroupContext } from '../../context';
import { listInvitations } from '../invitations/list-invitations';
import { listMembers } from './list-members';

export interface MembersView {
	readonly members: readonly MemberView[];
	/** Those that stand; none for a viewer who may not make any. */
	readonly invitations: readonly InvitationView[];
	/** The viewer's id and role, and the roles they may give in an invitation. */
	readonly self: string;
	readonly role: Role;
	readonly invitable: readonly Role[];
}

/** Who is in the group and who is about to be, as the viewer may see it. */
export async function showMembers(ctx: GroupContext): Promise<MembersView> {
	return {
		members: await listMembers(ctx),
		invitations: await listInvitations(ctx),
		self: ctx.actor.id,
		role: ctx.role,
		invitable: ROLES.filter((role) => mayInvite(ctx.role, role))
	};
}

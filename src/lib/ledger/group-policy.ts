import { hasRole, type Role } from './roles';

/** Who may make or revoke joining links; nobody hands out more than they have. */
export function mayInvite(role: Role | null, invited: Role): boolean {
	return hasRole(role, 'maintainer') && hasRole(role, invited);
}

export function mayRevokeInvitation(role: Role): boolean {
	return hasRole(role, 'maintainer');
}

/** Roles are the owners' to give; so is removing someone else. */
export function mayChangeRoles(role: Role): boolean {
	return hasRole(role, 'owner');
}

/** A group keeps at least one owner. */
export function leavesNoOwner(owners: number, from: Role, to: Role | null): boolean {
	return from === 'owner' && to !== 'owner' && owners <= 1;
}

/**
 * Whether an invitation outlives a change of its maker's role (null: they left): else somebody
 * taken out could come back by a link they kept.
 */
export function invitationStands(makersRole: Role | null, invited: Role): boolean {
	return mayInvite(makersRole, invited);
}

/** Whether somebody of this role can keep tasks that are theirs to work on. */
export function mayKeepTasks(role: Role | null): boolean {
	return hasRole(role, 'member');
}

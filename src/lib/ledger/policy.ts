import { mayChangeRoles, mayInvite, mayRevokeInvitation } from './group-policy';
import { hasRole, type Role } from './roles';

/** Everything a person can do within a group. */
export const ACTIONS = [
	'view-group',
	'enter-claim',
	'edit-claim',
	'withdraw-claim',
	'supersede-claim',
	'propose-public',
	'publish-claim',
	'unpublish-claim',
	'recompute',
	'cancel-recomputation',
	'add-reference',
	'edit-reference',
	'invite',
	'revoke-invitation',
	'change-role',
	'remove-member',
	'change-settings',
	'delete-group'
] as const;
export type Action = (typeof ACTIONS)[number];

export interface PolicyFacts {
	/** The claim (or reference, recomputation, invitation, membership) is the person's own. */
	readonly own?: boolean;
	/** The role an invitation gives. */
	readonly invited?: Role;
}

interface Rule {
	/** From this role on, whoever made it. */
	readonly any: Role;
	/** From this role on, when it is the person's own. */
	readonly own?: Role;
}

/** People's own rules stand in group-policy.ts. */
type PeopleAction = 'invite' | 'revoke-invitation' | 'change-role' | 'remove-member';

const RULES: Readonly<Record<Exclude<Action, PeopleAction>, Rule>> = {
	'view-group': { any: 'observer' },
	'enter-claim': { any: 'member' },
	'edit-claim': { any: 'maintainer', own: 'member' },
	'withdraw-claim': { any: 'maintainer', own: 'member' },
	'supersede-claim': { any: 'maintainer', own: 'member' },
	'propose-public': { any: 'maintainer', own: 'member' },
	'publish-claim': { any: 'maintainer' },
	'unpublish-claim': { any: 'maintainer' },
	recompute: { any: 'member' },
	'cancel-recomputation': { any: 'maintainer', own: 'member' },
	'add-reference': { any: 'member' },
	'edit-reference': { any: 'maintainer', own: 'member' },
	'change-settings': { any: 'maintainer' },
	'delete-group': { any: 'owner' }
};

/** Whether a person of this role (null: not in the group) may do this. */
export function may(
	role: Role | null | undefined,
	action: Action,
	facts: PolicyFacts = {}
): boolean {
	if (!role) return false;
	switch (action) {
		case 'invite':
			return mayInvite(role, facts.invited ?? 'observer');
		case 'revoke-invitation':
			return mayRevokeInvitation(role);
		case 'change-role':
			return mayChangeRoles(role);
		case 'remove-member':
			return mayChangeRoles(role) || facts.own === true;
		default: {
			const { any, own } = RULES[action];
			return hasRole(role, any) || (own !== undefined && facts.own === true && hasRole(role, own));
		}
	}
}

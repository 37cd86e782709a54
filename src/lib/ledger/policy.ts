import { ROLES, hasRole, type Role } from './roles';

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
	/** The role an invitation gives, or that a member is to have. */
	readonly givenRole?: Role;
	/** The role the member in question has now. */
	readonly presentRole?: Role;
}

interface Rule {
	/** From this role on, whoever made it. */
	readonly any: Role;
	/** From this role on, when it is the person's own. */
	readonly own?: Role;
}

const RULES: Readonly<Record<Action, Rule>> = {
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
	invite: { any: 'maintainer' },
	'revoke-invitation': { any: 'maintainer' },
	'change-role': { any: 'maintainer' },
	'remove-member': { any: 'maintainer', own: 'observer' },
	'change-settings': { any: 'maintainer' },
	'delete-group': { any: 'owner' }
};

/**
 * Whether a person of this role (null: not in the group) may do this. Nobody gives, changes or
 * removes a role as high as their own or higher; only an owner makes or removes owners.
 */
export function may(
	role: Role | null | undefined,
	action: Action,
	facts: PolicyFacts = {}
): boolean {
	const rule = RULES[action];
	if (rule.own && facts.own && hasRole(role, rule.own)) return true;
	if (!hasRole(role, rule.any)) return false;
	return role === 'owner' || [facts.givenRole, facts.presentRole].every((r) => isBelow(r, role));
}

function isBelow(role: Role | undefined, limit: Role | null | undefined): boolean {
	return role === undefined || (limit != null && ROLES.indexOf(role) < ROLES.indexOf(limit));
}

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
	'change-address',
	'transfer-ownership',
	'open-task',
	'edit-task',
	'cancel-task',
	'take-task',
	'work-on-task',
	'release-task',
	'decide-task',
	'confirm-transcription',
	'attach-notice',
	'attach-certificate',
	'handle-author-message',
	'comment',
	'edit-comment',
	'remove-comment'
] as const;
export type Action = (typeof ACTIONS)[number];

export interface PolicyFacts {
	/**
	 * The claim (or reference, recomputation, invitation, membership, comment, submission) is the
	 * person's own; a task is its assignee's.
	 */
	readonly own?: boolean;
	/** The role an invitation gives. */
	readonly invited?: Role;
}

interface Rule {
	/** From this role on, whoever made it; null: nobody but the one whose it is. */
	readonly any: Role | null;
	/** From this role on, when it is the person's own; null: not even then. */
	readonly own?: Role | null;
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
	'change-address': { any: 'owner' },
	'transfer-ownership': { any: 'owner' },
	'open-task': { any: 'maintainer' },
	'edit-task': { any: 'maintainer' },
	'cancel-task': { any: 'maintainer' },
	'take-task': { any: 'member' },
	'work-on-task': { any: null, own: 'member' },
	'release-task': { any: 'maintainer', own: 'member' },
	// Nobody accepts their own submission, and a second person compares a claim with its paper.
	'decide-task': { any: 'maintainer', own: null },
	'confirm-transcription': { any: 'member', own: null },
	'attach-notice': { any: 'maintainer', own: 'member' },
	// The check decides on it, nobody else.
	'attach-certificate': { any: 'member' },
	'handle-author-message': { any: 'maintainer' },
	comment: { any: 'member' },
	'edit-comment': { any: null, own: 'member' },
	'remove-comment': { any: 'maintainer', own: 'member' }
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
			const needed = facts.own === true && own !== undefined ? own : any;
			return needed !== null && hasRole(role, needed);
		}
	}
}

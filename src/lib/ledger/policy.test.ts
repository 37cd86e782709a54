import { describe, expect, it } from 'vitest';
import { ACTIONS, may, type Action, type PolicyFacts } from './policy';
import { ROLES, type Role } from './roles';

const NOBODY = '';
const OBSERVER_UP = 'observer member maintainer owner';
const MEMBER_UP = 'member maintainer owner';
const MAINTAINER_UP = 'maintainer owner';
const OWNER = 'owner';

/** Who may do what: on their own things, and on other people's. */
const TABLE: Readonly<Record<Action, readonly [own: string, others: string]>> = {
	'view-group': [OBSERVER_UP, OBSERVER_UP],
	'enter-claim': [MEMBER_UP, MEMBER_UP],
	'edit-claim': [MEMBER_UP, MAINTAINER_UP],
	'withdraw-claim': [MEMBER_UP, MAINTAINER_UP],
	'supersede-claim': [MEMBER_UP, MAINTAINER_UP],
	'propose-public': [MEMBER_UP, MAINTAINER_UP],
	'publish-claim': [MAINTAINER_UP, MAINTAINER_UP],
	'unpublish-claim': [MAINTAINER_UP, MAINTAINER_UP],
	recompute: [MEMBER_UP, MEMBER_UP],
	'cancel-recomputation': [MEMBER_UP, MAINTAINER_UP],
	'add-reference': [MEMBER_UP, MEMBER_UP],
	'edit-reference': [MEMBER_UP, MAINTAINER_UP],
	invite: [MAINTAINER_UP, MAINTAINER_UP],
	'revoke-invitation': [MAINTAINER_UP, MAINTAINER_UP],
	'change-role': [OWNER, OWNER],
	'remove-member': [OBSERVER_UP, OWNER],
	'change-settings': [MAINTAINER_UP, MAINTAINER_UP],
	'change-address': [OWNER, OWNER],
	'transfer-ownership': [OWNER, OWNER],
	'open-task': [MAINTAINER_UP, MAINTAINER_UP],
	'edit-task': [MAINTAINER_UP, MAINTAINER_UP],
	'cancel-task': [MAINTAINER_UP, MAINTAINER_UP],
	'take-task': [MEMBER_UP, MEMBER_UP],
	'work-on-task': [MEMBER_UP, NOBODY],
	'release-task': [MEMBER_UP, MAINTAINER_UP],
	'decide-task': [NOBODY, MAINTAINER_UP],
	'confirm-transcription': [NOBODY, MEMBER_UP],
	'attach-notice': [MEMBER_UP, MAINTAINER_UP],
	'attach-certificate': [MEMBER_UP, MEMBER_UP],
	'handle-author-message': [MAINTAINER_UP, MAINTAINER_UP],
	comment: [MEMBER_UP, MEMBER_UP],
	'edit-comment': [MEMBER_UP, NOBODY],
	'remove-comment': [MEMBER_UP, MAINTAINER_UP]
};

const allowed = (action: Action, facts: PolicyFacts) =>
	ROLES.filter((role) => may(role, action, facts)).join(' ');

describe('may', () => {
	it.each(ACTIONS)('%s', (action) => {
		const [own, others] = TABLE[action];
		expect(allowed(action, { own: true })).toBe(own);
		expect(allowed(action, { own: false })).toBe(others);
		expect(allowed(action, {})).toBe(others);
		expect(may(null, action, { own: true })).toBe(false);
		expect(may(undefined, action)).toBe(false);
	});

	it.each<[Role, string]>([
		['observer', MAINTAINER_UP],
		['member', MAINTAINER_UP],
		['maintainer', MAINTAINER_UP],
		['owner', OWNER]
	])('lets nobody invite a %s but those who are one', (invited, roles) => {
		expect(allowed('invite', { invited })).toBe(roles);
		expect(roles).not.toBe(NOBODY);
	});

	it('nests: whatever a role may do, the next may too', () => {
		for (const action of ACTIONS) {
			for (const own of [true, false]) {
				const answers = ROLES.map((role) => may(role, action, { own }));
				expect(answers).toEqual([...answers].sort((a, b) => Number(a) - Number(b)));
			}
		}
	});
});

import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { invitationStands, leavesNoOwner, mayInvite, mayKeepTasks } from './group-policy';
import { may } from './policy';
import { ROLES, type Role } from './roles';

const anyRole = fc.constantFrom<Role | null>(...ROLES, null);

describe('leavesNoOwner', () => {
	it.each<[number, Role, Role | null, boolean]>([
		[1, 'owner', null, true],
		[1, 'owner', 'maintainer', true],
		[1, 'owner', 'owner', false],
		[2, 'owner', null, false],
		[2, 'owner', 'observer', false],
		[1, 'maintainer', null, false],
		[1, 'observer', 'owner', false]
	])('%s owners, %s -> %s: %s', (owners, from, to, expected) => {
		expect(leavesNoOwner(owners, from, to)).toBe(expected);
	});

	it('keeps an owner through any changes of a group that has one', () => {
		const change = fc.tuple(fc.nat(9), anyRole);
		fc.assert(
			fc.property(fc.array(change), (changes) => {
				const group = new Map<number, Role>([
					[0, 'owner'],
					[1, 'maintainer'],
					[2, 'member']
				]);
				const owners = () => [...group.values()].filter((role) => role === 'owner').length;
				for (const [who, to] of changes) {
					const from = group.get(who);
					if (!from || leavesNoOwner(owners(), from, to)) continue;
					if (to) group.set(who, to);
					else group.delete(who);
				}
				expect(owners()).toBeGreaterThan(0);
			})
		);
	});
});

describe('invitations', () => {
	/** What each role may invite others as. */
	const TABLE: Readonly<Record<Role, string>> = {
		observer: '',
		member: '',
		maintainer: 'observer member maintainer',
		owner: 'observer member maintainer owner'
	};

	it.each(ROLES)('of a %s', (role) => {
		expect(ROLES.filter((invited) => mayInvite(role, invited)).join(' ')).toBe(TABLE[role]);
		for (const invited of ROLES) {
			expect(may(role, 'invite', { invited })).toBe(mayInvite(role, invited));
		}
	});

	it('never outlive the right to make them', () => {
		for (const invited of ROLES) {
			expect(invitationStands(null, invited)).toBe(false);
			expect(invitationStands('member', invited)).toBe(false);
		}
		expect(invitationStands('maintainer', 'owner')).toBe(false);
		expect(invitationStands('maintainer', 'maintainer')).toBe(true);
	});
});

it('leaves tasks to members only', () => {
	expect(ROLES.filter(mayKeepTasks)).toEqual(ROLES.filter((role) => may(role, 'take-task')));
	expect(mayKeepTasks(null)).toBe(false);
});

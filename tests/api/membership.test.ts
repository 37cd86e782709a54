import { and, eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import type { Role } from '../../src/lib/ledger/roles';
import { audit, calendarFeeds, memberships, tasks } from '../../src/lib/server/db/schema';
import { newId } from '../../src/lib/server/ids';
import { changeRole } from '../../src/lib/server/services/groups/change-role';
import { groupContext } from '../../src/lib/server/services/groups/group-context';
import { leaveGroup } from '../../src/lib/server/services/groups/leave-group';
import { removeMember } from '../../src/lib/server/services/groups/remove-member';
import { transferOwnership } from '../../src/lib/server/services/groups/transfer-ownership';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { openTasks } from '../../src/lib/server/services/tasks/open-tasks';
import { claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
beforeEach(async () => {
	world = await openServiceWorld();
});
afterEach(() => world.close());

async function roles(): Promise<string[]> {
	const rows = await world.db.read
		.select({ role: memberships.role })
		.from(memberships)
		.where(eq(memberships.groupId, world.as.owner.group.id));
	return rows.map(({ role }) => role).sort();
}

const give = (userId: string, role: Role) => changeRole(world.as.owner, { userId, role });
const trail = (action: string) =>
	world.db.read.select().from(audit).where(eq(audit.action, action));

/** What the next request of that person would run in; null: they are not in the group. */
const nextRequest = (role: Role) => groupContext(world.as[role], { slug: 'first' });

describe('leaving a group', () => {
	it.each(['observer', 'member', 'maintainer'] as const)('is free to a %s', async (role) => {
		await leaveGroup(world.as[role]);
		expect(await nextRequest(role)).toBeNull();
		expect(await trail('member.left')).toMatchObject([
			{ actorId: world.as[role].actor.id, before: { role }, after: { role: null } }
		]);
		await expect(leaveGroup(world.as[role])).rejects.toMatchObject({ code: 'not-found' });
	});

	it('is refused to the last owner, who is told what to do', async () => {
		const refused = { code: 'conflict', message: expect.stringContaining('hand it over first') };
		await expect(leaveGroup(world.as.owner)).rejects.toMatchObject(refused);
		await give(world.as.member.actor.id, 'owner');
		await leaveGroup(world.as.owner);
		expect(await roles()).toEqual(['maintainer', 'observer', 'owner']);
	});

	it('keeps one of two owners who leave at once', async () => {
		await give(world.as.maintainer.actor.id, 'owner');
		const other = { ...world.as.maintainer, role: 'owner' as const };
		const left = await Promise.allSettled([leaveGroup(world.as.owner), leaveGroup(other)]);
		expect(left.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
		expect(await roles()).toEqual(['member', 'observer', 'owner']);
	});

	it('keeps an owner when two remove one another at once', async () => {
		await give(world.as.maintainer.actor.id, 'owner');
		const other = { ...world.as.maintainer, role: 'owner' as const };
		const done = await Promise.allSettled([
			removeMember(world.as.owner, other.actor.id),
			removeMember(other, world.as.owner.actor.id)
		]);
		expect(done.map(({ status }) => status)).toEqual(['fulfilled', 'rejected']);
		expect(await roles()).toEqual(['member', 'observer', 'owner']);
	});
});

describe('what ends with a membership', () => {
	const feed = async (userId: string, groupId: string | null) => {
		const id = newId();
		const row = { id, tokenHash: id, userId, groupId, createdAt: new Date() };
		await world.db.write((tx) => tx.insert(calendarFeeds).values(row));
		return id;
	};
	const revoked = async (id: string) => {
		const [row] = await world.db.read.select().from(calendarFeeds).where(eq(calendarFeeds.id, id));
		return row?.revokedAt != null;
	};

	it('revokes the calendars of this group, and no other', async () => {
		const { actor, group } = world.as.member;
		const ofGroup = await feed(actor.id, group.id);
		const own = await feed(actor.id, null);
		const elsewhere = await feed(actor.id, world.outsider.group.id);
		const somebodyElses = await feed(world.as.observer.actor.id, group.id);
		await removeMember(world.as.owner, actor.id);
		expect(await Promise.all([ofGroup, own, elsewhere, somebodyElses].map(revoked))).toEqual([
			true,
			false,
			false,
			false
		]);
	});

	it.each([
		['who leaves', () => leaveGroup(world.as.member)],
		['who is removed', () => removeMember(world.as.owner, world.as.member.actor.id)],
		['who only observes from now on', () => give(world.as.member.actor.id, 'observer')]
	])('opens the tasks of a member %s to all', async (_, end) => {
		const { number } = await enterClaim(world.as.member, claimFields());
		await openTasks(world.as.maintainer, {
			kind: 'recompute',
			claims: [number],
			assigneeId: world.as.member.actor.id,
			dueOn: '',
			instructions: ''
		});
		const task = async () => {
			const [row] = await world.db.read
				.select({ state: tasks.state, assigneeId: tasks.assigneeId })
				.from(tasks)
				.where(and(eq(tasks.groupId, world.as.owner.group.id), eq(tasks.number, 1)));
			return row;
		};
		expect(await task()).toMatchObject({ state: 'assigned' });
		await end();
		expect(await task()).toEqual({ state: 'open', assigneeId: null });
	});
});

describe('removing someone', () => {
	it.each(['observer', 'member', 'maintainer'] as const)('is not for a %s', async (role) => {
		const target = role === 'member' ? world.as.observer : world.as.member;
		await expect(removeMember(world.as[role], target.actor.id)).rejects.toMatchObject({
			code: 'forbidden'
		});
		await expect(removeMember(world.as[role], world.as.owner.actor.id)).rejects.toMatchObject({
			code: 'forbidden'
		});
		expect(await roles()).toHaveLength(4);
	});

	it('reaches nobody of another group', async () => {
		await expect(removeMember(world.outsider, world.as.member.actor.id)).rejects.toMatchObject({
			code: 'not-found'
		});
		await expect(
			changeRole(world.outsider, { userId: world.as.member.actor.id, role: 'observer' })
		).rejects.toMatchObject({ code: 'not-found' });
		await expect(transferOwnership(world.outsider, world.as.member.actor.id)).rejects.toMatchObject(
			{ code: 'not-found' }
		);
	});

	it('is no way of leaving', async () => {
		await expect(removeMember(world.as.owner, world.as.owner.actor.id)).rejects.toMatchObject({
			code: 'conflict'
		});
	});
});

describe('a change of role', () => {
	it('counts from the next request on', async () => {
		await give(world.as.maintainer.actor.id, 'observer');
		expect(await nextRequest('maintainer')).toMatchObject({ role: 'observer' });
	});

	it('by somebody who has just stopped being an owner is refused', async () => {
		await give(world.as.maintainer.actor.id, 'owner');
		const stale = { ...world.as.maintainer, role: 'owner' as const };
		await give(world.as.maintainer.actor.id, 'member');
		const promote = changeRole(stale, { userId: stale.actor.id, role: 'owner' });
		await expect(promote).rejects.toMatchObject({ code: 'forbidden' });
	});
});

describe('handing a group over', () => {
	it('makes the other an owner and oneself a maintainer', async () => {
		await transferOwnership(world.as.owner, world.as.observer.actor.id);
		expect(await nextRequest('observer')).toMatchObject({ role: 'owner' });
		expect(await nextRequest('owner')).toMatchObject({ role: 'maintainer' });
		const id = world.as.observer.actor.id;
		expect(await trail('group.ownership-transferred')).toMatchObject([
			{ entityId: id, before: { to: { userId: id, role: 'observer' } } }
		]);
	});

	it('is for owners, to somebody else of the group', async () => {
		const member = world.as.member.actor.id;
		const to = (by: Role, userId: string) => transferOwnership(world.as[by], userId);
		await expect(to('maintainer', member)).rejects.toMatchObject({ code: 'forbidden' });
		await expect(to('owner', '')).rejects.toMatchObject({ code: 'invalid' });
		await expect(to('owner', world.as.owner.actor.id)).rejects.toMatchObject({ code: 'conflict' });
		const stranger = world.outsider.actor.id;
		await expect(to('owner', stranger)).rejects.toMatchObject({ code: 'not-found' });
		expect(await roles()).toEqual(['maintainer', 'member', 'observer', 'owner']);
	});

	it('happens once when it is asked for twice at once', async () => {
		const done = await Promise.allSettled([
			transferOwnership(world.as.owner, world.as.member.actor.id),
			transferOwnership(world.as.owner, world.as.observer.actor.id)
		]);
		expect(done.map(({ status }) => status)).toEqual(['fulfilled', 'rejected']);
		expect(await roles()).toEqual(['maintainer', 'maintainer', 'observer', 'owner']);
	});
});

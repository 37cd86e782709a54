import { eq, isNotNull } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { audit, claims, groups, recomputations } from '../../src/lib/server/db/schema';
import type { GroupContext } from '../../src/lib/server/context';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { recomputeClaim } from '../../src/lib/server/services/claims/recompute-claim';
import { changeSettings } from '../../src/lib/server/services/groups/change-settings';
import { groupContext } from '../../src/lib/server/services/groups/group-context';
import { showSettings } from '../../src/lib/server/services/groups/show-settings';
import { startGroup } from '../../src/lib/server/services/groups/start-group';
import { readClaim } from '../../src/lib/server/services/readings/read-claim';
import { claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
beforeEach(async () => {
	world = await openServiceWorld();
});
afterEach(() => world.close());

/** The settings page as it was opened, with some of its fields changed. */
async function form(ctx: GroupContext, over: Partial<Parameters<typeof changeSettings>[1]> = {}) {
	const { name, description, budgetSeconds, version } = await showSettings(ctx);
	return { name, description, budgetSeconds: String(budgetSeconds ?? ''), version, ...over };
}
const change = async (ctx: GroupContext, over: Partial<Parameters<typeof changeSettings>[1]>) =>
	changeSettings(ctx, await form(ctx, over));

describe('settings', () => {
	it('are changed by maintainers, with what was and what is in the audit', async () => {
		await change(world.as.maintainer, { name: 'Tuesday readers', budgetSeconds: ' 120 ' });
		expect(await showSettings(world.as.owner)).toMatchObject({
			name: 'Tuesday readers',
			description: '',
			budgetSeconds: 120,
			siteBudgetSeconds: 60
		});
		const [row] = await world.db.read
			.select()
			.from(audit)
			.where(eq(audit.action, 'group.settings-changed'));
		expect(row).toMatchObject({
			before: { name: 'First group', budgetSeconds: null },
			after: { name: 'Tuesday readers', budgetSeconds: 120 }
		});
		// Nothing changed, nothing recorded.
		await change(world.as.maintainer, {});
		expect(await world.db.read.$count(audit)).toBe(1);
	});

	it.each(['observer', 'member'] as const)('are closed to a %s', async (role) => {
		const refused = { code: 'forbidden' };
		await expect(showSettings(world.as[role])).rejects.toMatchObject(refused);
		const filled = await form(world.as.owner, { name: 'Mine now' });
		await expect(changeSettings(world.as[role], filled)).rejects.toMatchObject(refused);
	});

	it.each([
		['no name', { name: ' ' }, 'name', 'Give the group a name'],
		['a name of two lines', { name: 'A\nB' }, 'name', 'Only one line'],
		['a long description', { description: 'x'.repeat(301) }, 'description', 'At most 300'],
		['too little time', { budgetSeconds: '4' }, 'budgetSeconds', 'from 5 to 600'],
		['too much time', { budgetSeconds: '601' }, 'budgetSeconds', 'from 5 to 600'],
		['a time that is none', { budgetSeconds: '1e2' }, 'budgetSeconds', 'from 5 to 600'],
		['an address that is no word', { slug: 'a/b/c' }, 'slug', 'Only letters'],
		['a reserved address', { slug: 'admin' }, 'slug', 'reserved']
	])('refuse %s', async (_, over, field, message) => {
		await expect(change(world.as.owner, over)).rejects.toMatchObject({
			code: 'invalid',
			issues: [{ field, message: expect.stringContaining(message) }]
		});
	});

	it('are not overwritten by somebody who has not seen the last change', async () => {
		const stale = await form(world.as.maintainer, { description: 'Papers on Tuesdays' });
		await change(world.as.owner, { description: 'Papers on Wednesdays' });
		await expect(changeSettings(world.as.maintainer, stale)).rejects.toMatchObject({
			code: 'conflict',
			message: expect.stringContaining('Papers on Wednesdays')
		});
		expect((await showSettings(world.as.owner)).description).toBe('Papers on Wednesdays');
		const { version } = await showSettings(world.as.maintainer);
		await changeSettings(world.as.maintainer, { ...stale, version });
		expect((await showSettings(world.as.owner)).description).toBe('Papers on Tuesdays');
	});
});

describe('the address', () => {
	const move = (slug: string, ctx = world.as.owner) => change(ctx, { slug });
	const at = async (slug: string, ctx: GroupContext = world.as.observer) =>
		(await groupContext(ctx, { slug }))?.group.slug;

	it('is changed by owners only, and the old one leads members to it', async () => {
		await expect(move('tuesday', world.as.maintainer)).rejects.toMatchObject({
			code: 'forbidden'
		});
		expect(await move('Tuesday')).toEqual({ slug: 'tuesday' });
		expect(await at('first')).toBe('tuesday');
		expect(await at('tuesday')).toBe('tuesday');
		expect(await at('first', world.outsider)).toBeUndefined();
		expect((await showSettings(world.as.owner)).formerSlugs).toEqual(['first']);
	});

	it('of another group, now or formerly, is taken', async () => {
		const taken = { code: 'conflict', issues: [{ field: 'slug' }] };
		await expect(move('second')).rejects.toMatchObject(taken);
		await change(world.outsider, { slug: 'third' });
		await expect(move('second')).rejects.toMatchObject(taken);
		await expect(startGroup(world.as.owner, { name: 'X', slug: 'second' })).rejects.toMatchObject(
			taken
		);
		expect(await at('first')).toBe('first');
	});

	it('can be taken back, and changes with other fields or not at all', async () => {
		await move('tuesday');
		await move('first');
		expect(await at('tuesday')).toBe('first');
		expect((await showSettings(world.as.owner)).formerSlugs).toEqual(['tuesday']);
		await expect(change(world.as.owner, { name: 'Y', slug: 'second' })).rejects.toThrow('taken');
		expect((await showSettings(world.as.owner)).name).toBe('First group');
	});

	it('keeps ten former ones and no more', async () => {
		for (let i = 0; i < 10; i++) await move(`address-${i}`);
		await expect(move('address-10')).rejects.toThrow('take one of them back');
		expect(await move('first')).toEqual({ slug: 'first' });
	});
});

describe('the computing time', () => {
	const problemOf = async (number: number) => {
		const [row] = await world.db.read
			.select({ problem: recomputations.problem, state: recomputations.state })
			.from(claims)
			.innerJoin(recomputations, eq(recomputations.id, claims.recomputationId))
			.where(eq(claims.number, number));
		if (!row) throw new Error('no recomputation');
		return row;
	};

	it('is the site’s until the group has its own, which stations never get', async () => {
		const before = await enterClaim(world.as.member, claimFields());
		expect((await problemOf(before.number)).problem.seconds).toBe(60);
		await change(world.as.maintainer, { budgetSeconds: '90' });
		const after = await enterClaim(world.as.member, claimFields({ locator: 'eq. (8)' }));
		expect((await problemOf(after.number)).problem.seconds).toBe(90);
		expect((await readClaim(world.as.member, claimFields())).recomputedBy).toContain('90 s');
		const stations = await world.db.read
			.select({ station: recomputations.station, problem: recomputations.problem })
			.from(recomputations)
			.where(isNotNull(recomputations.station));
		expect(stations.length).toBeGreaterThan(4);
		for (const { station, problem } of stations) {
			expect(problem.seconds, String(station)).toBeLessThanOrEqual(60);
		}
		// Another group goes on with the site's.
		const [other] = await world.db.read
			.select()
			.from(groups)
			.where(eq(groups.id, world.outsider.group.id));
		expect(other?.budgetSeconds).toBeNull();
		const theirs = await readClaim(world.outsider, claimFields());
		expect(theirs.recomputedBy).toContain('60 s');
	});

	it('raised since, is what recomputing takes', async () => {
		const { number } = await enterClaim(world.as.member, claimFields());
		await world.recompute();
		expect((await problemOf(number)).state).toBe('done');
		await change(world.as.maintainer, { budgetSeconds: '300' });
		await recomputeClaim(world.as.member, number);
		expect((await problemOf(number)).problem.seconds).toBe(300);

		await world.db.write((tx) => tx.update(recomputations).set({ state: 'failed' }));
		await change(world.as.maintainer, { budgetSeconds: '400' });
		await recomputeClaim(world.as.member, number);
		expect((await problemOf(number)).problem.seconds).toBe(400);
	});
});

import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { dayOf } from '../../src/lib/ledger/tasks';
import { parseOwnTasksQuery } from '../../src/lib/schemas/own-tasks-query';
import type { GroupContext } from '../../src/lib/server/context';
import { memberships, tasks } from '../../src/lib/server/db/schema';
import { editClaim } from '../../src/lib/server/services/claims/edit-claim';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { withdrawClaim } from '../../src/lib/server/services/claims/withdraw-claim';
import { listOwnTasks } from '../../src/lib/server/services/home/list-own-tasks';
import { showHome } from '../../src/lib/server/services/home/show-home';
import { waitingFor } from '../../src/lib/server/services/home/waiting-for';
import { acceptSubmission } from '../../src/lib/server/services/tasks/accept-submission';
import { openTasks } from '../../src/lib/server/services/tasks/open-tasks';
import { returnSubmission } from '../../src/lib/server/services/tasks/return-submission';
import { startTask } from '../../src/lib/server/services/tasks/start-task';
import { submitTask } from '../../src/lib/server/services/tasks/submit-task';
import { bibtexOf, claimFields } from '../support/service';
import { foundValue, openTaskWorld, type TaskWorld } from '../support/task-world';

let world: TaskWorld;
beforeEach(async () => {
	world = await openTaskWorld();
});
afterEach(() => world.end());

const DAY = 86_400_000;
const inDays = (days: number) => dayOf(new Date(Date.now() + days * DAY));
const later = (ctx: GroupContext, days: number): GroupContext => ({
	...ctx,
	now: () => new Date(Date.now() + days * DAY)
});
const numbers = (rows: readonly { readonly number: number }[]) => rows.map(({ number }) => number);
const taskFor = async (ctx: GroupContext | null, dueOn = '') =>
	world.openTask(await world.openClaim(), { assigneeId: ctx?.actor.id ?? '', dueOn });
/** CHSH's quantum maximum with two digits exchanged: a discrepancy. Known by hand: 2 sqrt 2. */
const wrong = (n: number) => claimFields({ printed: '2.8248', bibtex: bibtexOf(n) });

describe('home', () => {
	it('is empty, and says so by its numbers, where nothing has happened', async () => {
		expect(await showHome(world.as.member)).toEqual({
			tasks: [],
			toDecide: [],
			changed: [],
			discrepancies: [],
			totals: { tasks: 0, overdue: 0, toDecide: 0, changed: 0, discrepancies: 0 },
			groups: [{ slug: 'first', name: 'First group', role: 'member', discrepancies: 0 }],
			unread: 0
		});
	});

	it('holds my tasks, soonest due first, overdue ones marked, the rest counted', async () => {
		const { member } = world.as;
		const undated = await taskFor(member);
		const late = await taskFor(member, inDays(9));
		const soon = await taskFor(member, inDays(2));
		await taskFor(world.wren, inDays(1));
		await taskFor(null, inDays(1));
		const home = await showHome(later(member, 5));
		expect(numbers(home.tasks)).toEqual([soon, late, undated]);
		expect(home.tasks.map(({ overdue }) => overdue)).toEqual([true, false, false]);
		expect(home.totals).toMatchObject({ tasks: 3, overdue: 1 });
		expect(home.unread).toBe(3);

		const more = await Promise.all([1, 2, 3, 4, 5, 6, 7].map(() => taskFor(member)));
		const full = await showHome(member);
		expect(full.tasks).toHaveLength(8);
		expect(full.totals.tasks).toBe(3 + more.length);
	});

	it('holds the submissions I may decide on, and never my own', async () => {
		const { member, maintainer, owner, observer } = world.as;
		const byMember = await taskFor(member);
		const byMaintainer = await taskFor(maintainer);
		await submitTask(member, byMember, foundValue('0.7071'), []);
		await submitTask(maintainer, byMaintainer, foundValue('0.7071'), []);
		const toDecide = async (ctx: GroupContext) => numbers((await showHome(ctx)).toDecide);
		expect(await toDecide(owner)).toEqual([byMember, byMaintainer]);
		expect(await toDecide(maintainer)).toEqual([byMember]);
		expect(await toDecide(member)).toEqual([]);
		expect(await toDecide(observer)).toEqual([]);
		expect(await toDecide(world.outsider)).toEqual([]);
	});

	it('shows how verdicts on my claims turned, for thirty days', async () => {
		const { member } = world.as;
		const { number } = await enterClaim(member, wrong(1));
		const open = await world.openClaim();
		expect((await showHome(member)).changed).toEqual([]);
		await world.recompute();
		const [turned, ...others] = (await showHome(member)).changed;
		expect(others).toEqual([]);
		expect(turned).toMatchObject({
			before: null,
			groupSlug: 'first',
			row: { number, printed: '2.8248', verdict: { status: 'discrepancy' } }
		});
		expect(turned?.row.verdict.enclosure?.lower).toMatch(/^2\.8284/);

		await editClaim(member, number, 1, claimFields({ printed: '2.8284' }));
		const after = await showHome(member);
		expect(after.changed).toMatchObject([
			{ before: 'discrepancy', row: { number, verdict: { status: 'agreement' } } }
		]);
		expect(after.totals.changed).toBe(1);
		expect((await showHome(world.as.maintainer)).changed).toEqual([]);
		expect((await showHome(later(member, 29))).changed).toHaveLength(1);
		expect((await showHome(later(member, 31))).changed).toEqual([]);

		// An accepted reproduction turns the claim that no solver serves.
		const task = await world.openTask(open, { assigneeId: world.wren.actor.id });
		await submitTask(world.wren, task, foundValue('0.7071'), []);
		await acceptSubmission(world.as.maintainer, task);
		expect((await showHome(member)).changed.map(({ row }) => row.number)).toEqual([open, number]);
	});

	it('holds the discrepancies that stand in my groups, and those of no other', async () => {
		const { member, observer } = world.as;
		const first = await enterClaim(member, wrong(1));
		const second = await enterClaim(member, wrong(2));
		await enterClaim(world.outsider, wrong(3));
		await world.recompute();
		const home = await showHome(observer);
		expect(numbers(home.discrepancies.map(({ row }) => row)).sort()).toEqual([
			first.number,
			second.number
		]);
		expect(home.groups).toMatchObject([{ slug: 'first', discrepancies: 2 }]);
		await withdrawClaim(member, first.number);
		expect((await showHome(observer)).totals.discrepancies).toBe(1);
		expect((await showHome(world.outsider)).discrepancies).toMatchObject([
			{ groupSlug: 'second', groupName: 'Second group' }
		]);
	});

	it('shows nothing more of a group that one has left', async () => {
		const { member } = world.as;
		await taskFor(member, inDays(2));
		await enterClaim(member, wrong(1));
		await world.recompute();
		await world.db.write((tx) =>
			tx.delete(memberships).where(eq(memberships.userId, member.actor.id))
		);
		expect(await showHome(member)).toMatchObject({
			tasks: [],
			changed: [],
			discrepancies: [],
			groups: [],
			unread: 0
		});
		const query = parseOwnTasksQuery(new URLSearchParams('state=all'));
		expect((await listOwnTasks(member, query)).rows).toEqual([]);
	});
});

describe('my tasks', () => {
	const list = (ctx: GroupContext, query = '') =>
		listOwnTasks(ctx, parseOwnTasksQuery(new URLSearchParams(query)));

	it('are filtered by state, group and being overdue', async () => {
		const { member, maintainer } = world.as;
		const soon = await taskFor(member, inDays(1));
		const started = await taskFor(member, inDays(20));
		await startTask(member, started);
		const done = await taskFor(member);
		await submitTask(member, done, foundValue('0.7071'), []);
		await acceptSubmission(maintainer, done);
		await taskFor(world.wren, inDays(1));

		expect(numbers((await list(member)).rows)).toEqual([soon, started]);
		expect(numbers((await list(member, 'state=all')).rows)).toEqual([soon, started, done]);
		expect(numbers((await list(member, 'state=accepted')).rows)).toEqual([done]);
		expect(numbers((await list(member, 'state=in-progress&group=first')).rows)).toEqual([started]);
		expect((await list(member, 'group=second')).rows).toEqual([]);
		const overdue = await list(later(member, 3), 'overdue=1');
		expect(numbers(overdue.rows)).toEqual([soon]);
		expect(overdue).toMatchObject({ overdue: 1, total: 1 });
		expect((await list(member)).groups).toEqual([{ slug: 'first', name: 'First group' }]);
	});

	it('come in pages that never overlap', async () => {
		const { member, maintainer } = world.as;
		const claims = await Promise.all(Array.from({ length: 52 }, () => world.openClaim()));
		await openTasks(maintainer, { claims, assigneeId: member.actor.id });
		const first = await list(member);
		const second = await list(member, 'page=2');
		const last = await list(member, 'page=99');
		expect([first.rows.length, second.rows.length, first.total]).toEqual([50, 2, 52]);
		expect(last).toEqual(second);
		expect(new Set(numbers([...first.rows, ...second.rows])).size).toBe(52);
	});
});

describe('the number in the navigation', () => {
	it('counts what I am to do and what I may decide', async () => {
		const { member, maintainer, observer } = world.as;
		const counts = async () => [await waitingFor(member), await waitingFor(maintainer)];
		const mine = await taskFor(member);
		await taskFor(null);
		expect(await counts()).toEqual([1, 0]);
		await startTask(member, mine);
		expect(await counts()).toEqual([1, 0]);
		await submitTask(member, mine, foundValue('0.7071'), []);
		expect(await counts()).toEqual([0, 1]);
		await returnSubmission(maintainer, mine, 'Which program was it?');
		expect(await counts()).toEqual([1, 0]);
		const own = await taskFor(maintainer);
		await submitTask(maintainer, own, foundValue('0.7071'), []);
		expect(await counts()).toEqual([1, 0]);
		expect(await waitingFor(world.as.owner)).toBe(1);
		expect(await waitingFor(observer)).toBe(0);
		expect(await world.db.read.$count(tasks)).toBe(3);
	});
});

import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { parseLedgerQuery } from '../../src/lib/schemas/ledger-query';
import { parseTaskQuery } from '../../src/lib/schemas/task-input';
import type { GroupContext } from '../../src/lib/server/context';
import { memberships } from '../../src/lib/server/db/schema';
import { listClaims } from '../../src/lib/server/services/claims/list-claims';
import { restoreClaim } from '../../src/lib/server/services/claims/restore-claim';
import { withdrawClaim } from '../../src/lib/server/services/claims/withdraw-claim';
import { acceptSubmission } from '../../src/lib/server/services/tasks/accept-submission';
import { editTask } from '../../src/lib/server/services/tasks/edit-task';
import { listMyTasks } from '../../src/lib/server/services/tasks/list-my-tasks';
import { listTasks } from '../../src/lib/server/services/tasks/list-tasks';
import { releaseTask } from '../../src/lib/server/services/tasks/release-task';
import { releaseTasksOf } from '../../src/lib/server/services/tasks/release-tasks-of';
import { returnSubmission } from '../../src/lib/server/services/tasks/return-submission';
import { showTask } from '../../src/lib/server/services/tasks/show-task';
import { startTask } from '../../src/lib/server/services/tasks/start-task';
import { submitTask } from '../../src/lib/server/services/tasks/submit-task';
import { takeTask } from '../../src/lib/server/services/tasks/take-task';
import {
	addMember,
	foundValue,
	inDays,
	issueAt,
	openTaskWorld,
	type TaskWorld
} from '../support/task-world';

let world: TaskWorld;
beforeEach(async () => {
	world = await openTaskWorld();
});
afterEach(() => world.end());

const conflict = { code: 'conflict' };
const forbidden = { code: 'forbidden' };
const notFound = { code: 'not-found' };
const list = (ctx: GroupContext, query = '') =>
	listTasks(ctx, parseTaskQuery(new URLSearchParams(query)));
const row = async (claim: number) =>
	(await listClaims(world.as.observer, parseLedgerQuery(new URLSearchParams()))).rows.find(
		({ number }) => number === claim
	);

describe('a task’s life', () => {
	it('goes from open to accepted with a return on the way, each step told and recorded', async () => {
		const claim = await world.openClaim();
		const number = await world.openTask(claim, { dueOn: inDays(5) });
		await takeTask(world.wren, number);
		await startTask(world.wren, number);
		await submitTask(world.wren, number, foundValue('0.71', { comment: 'quick look' }));
		expect(await showTask(world.as.maintainer, number)).toMatchObject({
			state: 'submitted',
			may: { decide: true, submit: false }
		});
		await expect(returnSubmission(world.as.maintainer, number, '   ')).rejects.toMatchObject(
			issueAt('reason', /Give a reason/)
		);
		await returnSubmission(world.as.maintainer, number, 'More digits, please.');
		expect(await showTask(world.wren, number)).toMatchObject({
			state: 'returned',
			reason: 'More digits, please.',
			submissions: [
				{
					state: 'returned',
					decision: 'More digits, please.',
					decidedBy: { name: 'Mae Maintainer' }
				}
			]
		});
		await submitTask(world.wren, number, foundValue('0.70711'));
		expect(await acceptSubmission(world.as.owner, number)).toEqual({ contradicted: false });
		const task = await showTask(world.wren, number);
		expect(task).toMatchObject({ state: 'accepted', may: { submit: false, cancel: false } });
		expect(task.submissions.map(({ state, reading }) => [state, reading])).toEqual([
			['returned', 'Read as 0.705 to 0.715'],
			['accepted', 'Read as 0.707105 to 0.707115']
		]);
		expect(await world.actions(task.id)).toEqual([
			'task.opened',
			'task.taken',
			'task.started',
			'task.submitted',
			'task.returned',
			'task.submitted',
			'task.accepted'
		]);
		expect(await world.toldTo(world.wren)).toEqual(['task-returned', 'task-accepted']);
		const told = await world.toldTo(world.as.maintainer);
		expect(told.filter((kind) => kind === 'task-submitted')).toHaveLength(2);
	});

	it('refuses a skipped step as a conflict, and work by others', async () => {
		const number = await world.openTask(await world.openClaim());
		await expect(acceptSubmission(world.as.owner, number)).rejects.toMatchObject(conflict);
		await expect(startTask(world.wren, number)).rejects.toMatchObject(conflict);
		await takeTask(world.wren, number);
		await expect(takeTask(world.as.member, number)).rejects.toMatchObject(conflict);
		await expect(startTask(world.as.owner, number)).rejects.toMatchObject(forbidden);
		await expect(submitTask(world.as.member, number, foundValue('0.7'))).rejects.toMatchObject(
			forbidden
		);
		await expect(takeTask(world.as.observer, number)).rejects.toMatchObject(forbidden);
		for (const verb of [takeTask, startTask, releaseTask, acceptSubmission, showTask]) {
			await expect(verb(world.outsider, number)).rejects.toMatchObject(notFound);
			await expect(verb(world.as.owner, NaN)).rejects.toMatchObject(notFound);
		}
	});

	it('lets nobody accept or return what they submitted, not even an owner', async () => {
		const number = await world.openTask(await world.openClaim());
		await submitTask(world.as.owner, number, foundValue('0.70711'));
		expect((await showTask(world.as.owner, number)).ownSubmission).toBe(true);
		await expect(acceptSubmission(world.as.owner, number)).rejects.toMatchObject(forbidden);
		await expect(returnSubmission(world.as.owner, number, 'no')).rejects.toMatchObject(forbidden);
		expect((await listMyTasks(world.as.owner)).toDecide).toEqual([]);
		expect((await listMyTasks(world.as.maintainer)).toDecide).toHaveLength(1);
		await acceptSubmission(world.as.maintainer, number);
	});

	it('is taken by exactly one of twenty who try at once', async () => {
		const number = await world.openTask(await world.openClaim());
		const people = await Promise.all(
			Array.from({ length: 20 }, (_, i) => addMember(world, `Reader ${i}`))
		);
		const tries = await Promise.allSettled(people.map((ctx) => takeTask(ctx, number)));
		const won = tries.filter(({ status }) => status === 'fulfilled');
		expect(won).toHaveLength(1);
		for (const lost of tries) {
			if (lost.status === 'rejected') expect(lost.reason).toMatchObject(conflict);
		}
		const task = await showTask(world.as.observer, number);
		expect(task).toMatchObject({ state: 'assigned', version: 2 });
		expect(await world.actions(task.id)).toEqual(['task.opened', 'task.taken']);
	});

	it('changes hands, and both are told', async () => {
		const number = await world.openTask(await world.openClaim(), {
			assigneeId: world.wren.actor.id
		});
		const edit = (version: number, over: object) =>
			editTask(world.as.maintainer, number, { version, kind: 'recompute', ...over });
		await startTask(world.wren, number);
		await expect(edit(1, {})).rejects.toMatchObject(conflict);
		await edit(2, { assigneeId: world.as.member.actor.id, instructions: 'With care.' });
		expect(await showTask(world.wren, number)).toMatchObject({
			state: 'assigned',
			assignee: { name: 'Mo Member' },
			instructions: 'With care.'
		});
		expect(await world.toldTo(world.wren)).toEqual(['task-assigned', 'task-cancelled']);
		expect(await world.toldTo(world.as.member)).toEqual(['task-assigned']);
		// Nothing changed: no version, no row.
		await edit(3, { assigneeId: world.as.member.actor.id, instructions: 'With care.' });
		expect((await showTask(world.wren, number)).version).toBe(3);
		await edit(3, {});
		expect(await showTask(world.wren, number)).toMatchObject({ state: 'open', assignee: null });
		await expect(editTask(world.wren, number, { version: 4 })).rejects.toMatchObject(forbidden);
	});

	it('keeps its kind while an answer waits, but its date may move', async () => {
		const number = await world.openTask(await world.openClaim());
		await submitTask(world.wren, number, foundValue('0.7'));
		const same = { version: 2, assigneeId: world.wren.actor.id };
		await expect(
			editTask(world.as.maintainer, number, { ...same, kind: 'find-code' })
		).rejects.toMatchObject(conflict);
		await expect(
			editTask(world.as.maintainer, number, { ...same, assigneeId: '' })
		).rejects.toMatchObject(conflict);
		await editTask(world.as.maintainer, number, { ...same, dueOn: inDays(3) });
		expect(await showTask(world.wren, number)).toMatchObject({
			state: 'submitted',
			dueOn: inDays(3)
		});
	});

	it('is open again when its assignee leaves; what they submitted can still be decided', async () => {
		const claim = await world.openClaim();
		const assigneeId = world.wren.actor.id;
		const begun = await world.openTask(claim, { assigneeId });
		const handed = await world.openTask(claim, { assigneeId });
		const sent = await world.openTask(claim, { assigneeId });
		await startTask(world.wren, begun);
		await submitTask(world.wren, handed, foundValue('0.70711'));
		await submitTask(world.wren, sent, foundValue('0.7'));
		await world.db.write(async (tx) => {
			await releaseTasksOf(tx, world.as.owner, assigneeId);
			await tx.delete(memberships).where(eq(memberships.userId, assigneeId));
		});
		expect(await showTask(world.as.owner, begun)).toMatchObject({ state: 'open', assignee: null });
		expect((await showTask(world.as.owner, handed)).state).toBe('submitted');
		await acceptSubmission(world.as.owner, handed);
		await returnSubmission(world.as.owner, sent, 'More digits.');
		expect(await showTask(world.as.owner, sent)).toMatchObject({ state: 'open', assignee: null });
		await takeTask(world.as.member, sent);
	});

	it('ends with its claim, and the reason says so', async () => {
		const claim = await world.openClaim();
		const number = await world.openTask(claim, { assigneeId: world.wren.actor.id });
		await submitTask(world.wren, number, foundValue('0.7'));
		await withdrawClaim(world.as.member, claim);
		expect(await showTask(world.wren, number)).toMatchObject({
			state: 'cancelled',
			reason: 'The claim was withdrawn.',
			submissions: [{ state: 'returned' }]
		});
		expect(await world.toldTo(world.wren)).toEqual(['task-assigned', 'task-cancelled']);
		await restoreClaim(world.as.member, claim);
		expect((await row(claim))?.wantsTask).toBe(true);
	});
});

describe('the list of tasks', () => {
	it('is filtered, sorted and counted', async () => {
		const claim = await world.openClaim();
		const due = async (days: number | null, over = {}) =>
			world.openTask(claim, { dueOn: days === null ? '' : inDays(days), ...over });
		const none = await due(null);
		const later = await due(9, { assigneeId: world.wren.actor.id });
		const soon = await due(1, { kind: 'find-code', instructions: 'Look for 100 % of it.' });
		const done = await due(2);
		await submitTask(world.wren, done, foundValue('0.7'));
		const numbers = async (query: string, ctx = world.wren) =>
			(await list(ctx, query)).rows.map(({ number }) => number);
		expect(await numbers('')).toEqual([soon, done, later, none]);
		expect(await numbers('sort=number')).toEqual([none, later, soon, done]);
		expect(await numbers('assignee=me')).toEqual([done, later]);
		expect(await numbers('assignee=nobody')).toEqual([soon, none]);
		expect(await numbers(`assignee=${world.as.member.actor.id}`)).toEqual([]);
		expect(await numbers('kind=find-code')).toEqual([soon]);
		expect(await numbers('state=submitted')).toEqual([done]);
		expect(await numbers('q=100 %25')).toEqual([soon]);
		expect(await numbers('q=aldous arden')).toEqual([done, later]);
		const page = await list(world.as.maintainer, 'kind=recompute');
		expect(page).toMatchObject({
			total: 3,
			counts: { open: 1, assigned: 1, submitted: 1, accepted: 0 },
			mine: 0,
			toDecide: 1,
			overdue: 0
		});
		expect(page.people.map(({ name }) => name)).not.toContain('Obi Observer');
		// A week later two are overdue, and what was submitted is not.
		const later_ = { ...world.wren, now: () => new Date(Date.now() + 10 * 86_400_000) };
		expect(await numbers('overdue=1', later_)).toEqual([soon, later]);
		expect((await list(later_)).overdue).toBe(2);
		expect((await listMyTasks(world.wren)).mine.map(({ number }) => number)).toEqual([done, later]);
		expect((await list(world.outsider)).total).toBe(0);
	});
});

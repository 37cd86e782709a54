import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import type { ClaimInput } from '../../src/lib/schemas/claim-input';
import { parseLedgerQuery } from '../../src/lib/schemas/ledger-query';
import { parseTaskQuery } from '../../src/lib/schemas/task-input';
import type { GroupContext } from '../../src/lib/server/context';
import { memberships, notifications } from '../../src/lib/server/db/schema';
import { notificationMail } from '../../src/lib/server/mail/templates/notification-mail';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { listClaims } from '../../src/lib/server/services/claims/list-claims';
import { restoreClaim } from '../../src/lib/server/services/claims/restore-claim';
import { withdrawClaim } from '../../src/lib/server/services/claims/withdraw-claim';
import { listNews } from '../../src/lib/server/services/notifications/list-news';
import {
	factsOf,
	selectFacts
} from '../../src/lib/server/services/notifications/notification-facts';
import { isStillTrue } from '../../src/lib/server/services/notifications/still-true';
import { acceptSubmission } from '../../src/lib/server/services/tasks/accept-submission';
import { cancelTask } from '../../src/lib/server/services/tasks/cancel-task';
import { editTask } from '../../src/lib/server/services/tasks/edit-task';
import { listMyTasks } from '../../src/lib/server/services/tasks/list-my-tasks';
import { listTasks } from '../../src/lib/server/services/tasks/list-tasks';
import { openTasks } from '../../src/lib/server/services/tasks/open-tasks';
import { releaseTask } from '../../src/lib/server/services/tasks/release-task';
import { releaseTasksOf } from '../../src/lib/server/services/tasks/release-tasks-of';
import { returnSubmission } from '../../src/lib/server/services/tasks/return-submission';
import { showTask } from '../../src/lib/server/services/tasks/show-task';
import { startTask } from '../../src/lib/server/services/tasks/start-task';
import { submitTask } from '../../src/lib/server/services/tasks/submit-task';
import { takeTask } from '../../src/lib/server/services/tasks/take-task';
import { tasksOfClaim } from '../../src/lib/server/services/tasks/tasks-of-claim';
import { bibtexOf, claimFields } from '../support/service';
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

describe('opening tasks', () => {
	it('on many claims at once, all or none, with numbers of their own', async () => {
		const claims = [await world.openClaim(), await world.openClaim(), await world.openClaim()];
		const { numbers } = await openTasks(world.as.maintainer, {
			claims: [...claims, ...claims],
			kind: 'recompute',
			assigneeId: world.wren.actor.id,
			dueOn: inDays(10),
			instructions: 'With **another** solver, see $v$.'
		});
		expect(numbers).toEqual([1, 2, 3]);
		const task = await showTask(world.wren, 2);
		expect(task).toMatchObject({
			state: 'assigned',
			assignee: { name: 'Wren Aldous' },
			claim: { number: claims[1] },
			overdue: false,
			createdBy: { name: 'Mae Maintainer' },
			submissionKinds: ['value', 'certificate', 'statement'],
			may: { take: false, start: true, submit: true, release: true, decide: false, edit: false }
		});
		expect(task.instructionsHtml).toContain('<strong>another</strong>');
		expect(await world.toldTo(world.wren)).toEqual(['task-assigned']);
		const [news] = (await listNews(world.wren, 1)).items;
		expect(news).toMatchObject({
			text: 'Mae Maintainer assigned 3 tasks to you.',
			detail: expect.stringMatching(/^Task 1 on claim 1, due .*; Task 3 on claim 3, due [^;]*\.$/),
			href: expect.stringMatching(/\/tasks\?assignee=me$/)
		});
		// One mail with all of them.
		const [facts] = await selectFacts(world.wren.db.read).where(
			eq(notifications.userId, world.wren.actor.id)
		);
		const mail = facts && notificationMail(factsOf(facts), 'https://merestone.example');
		expect(mail?.subject).toMatch(/^3 tasks are assigned to you/);
		expect(mail?.list?.items).toHaveLength(3);
		expect(mail?.action.address).toMatch(/\/tasks\?assignee=me&news=/);
		expect(facts && isStillTrue(factsOf(facts))).toBe(true);
		const [first] = claims;
		await withdrawClaim(world.as.member, first ?? 0);
		await expect(openTasks(world.as.maintainer, { claims })).rejects.toMatchObject(
			issueAt('claims', /Claim 1 is withdrawn/)
		);
		await expect(openTasks(world.as.owner, { claims: [2, 99] })).rejects.toMatchObject(
			issueAt('claims', /no claim 99 in this group/)
		);
		expect((await list(world.as.observer, 'state=all')).total).toBe(3);
	});

	it('is refused with the field at fault', async () => {
		const claims = [await world.openClaim()];
		const open = (over: object, ctx = world.as.maintainer) => openTasks(ctx, { claims, ...over });
		await expect(open({}, world.as.member)).rejects.toMatchObject(forbidden);
		await expect(open({ claims: [] })).rejects.toMatchObject(issueAt('claims', /at least one/));
		await expect(open({ dueOn: inDays(-1) })).rejects.toMatchObject(issueAt('dueOn', /is over/));
		await expect(open({ dueOn: inDays(5 * 366 + 2) })).rejects.toMatchObject(
			issueAt('dueOn', /more than 5 years ahead/)
		);
		await expect(open({ dueOn: '2027-02-30' })).rejects.toMatchObject(
			issueAt('dueOn', /year-month-day/)
		);
		for (const stranger of [world.as.observer, world.outsider]) {
			await expect(open({ assigneeId: stranger.actor.id })).rejects.toMatchObject(
				issueAt('assigneeId', /at least a member/)
			);
		}
		// The member entered the claim, so the comparison is somebody else's.
		const own = { kind: 'confirm-transcription', assigneeId: world.as.member.actor.id };
		await expect(open(own)).rejects.toMatchObject({
			...conflict,
			issues: [{ field: 'assigneeId' }]
		});
		expect((await list(world.as.observer, 'state=all')).total).toBe(0);
		expect((await open({ dueOn: inDays(0) })).numbers).toEqual([1]);
	});

	it('names every claim that the person may not compare, and opens none', async () => {
		const claims = [await world.openClaim(), await world.openClaim(), await world.openClaim()];
		const [first = 0, second = 0] = claims;
		const entered = await enterClaim(
			world.wren,
			claimFields({ printed: '2.8284', bibtex: bibtexOf(77) })
		);
		const asked = {
			kind: 'confirm-transcription',
			claims: [first, entered.number, second]
		} as const;
		const refused = await openTasks(world.as.maintainer, {
			...asked,
			claims: [...asked.claims],
			assigneeId: world.as.member.actor.id
		}).catch((error: unknown) => error);
		expect(refused).toMatchObject({
			...conflict,
			message: expect.stringMatching(/^Nothing is opened: 2 of these 3 claims/),
			issues: [
				{ field: 'assigneeId' },
				{ field: `claim-${first}`, message: expect.stringContaining(`Claim ${first} `) },
				{ field: `claim-${second}` }
			]
		});
		expect((await list(world.as.observer, 'state=all')).total).toBe(0);
	});

	it('shows in the ledger, which asks for one where machines can’t settle a claim', async () => {
		const claim = await world.openClaim();
		expect(await row(claim)).toMatchObject({ task: null, wantsTask: true });
		const number = await world.openTask(claim, { dueOn: inDays(2) });
		expect(await row(claim)).toMatchObject({
			task: { number, kind: 'recompute', state: 'open', assignee: null, overdue: false, more: 0 },
			wantsTask: false
		});
		const second = await world.openTask(claim, { kind: 'find-code' });
		await takeTask(world.wren, second);
		expect(await row(claim)).toMatchObject({
			task: { number: second, state: 'assigned', assignee: 'Wren Aldous', more: 1 }
		});
		await cancelTask(world.as.maintainer, number, 'One is enough.');
		await cancelTask(world.as.maintainer, second, 'The code is gone.');
		expect(await row(claim)).toMatchObject({ task: null, wantsTask: true });
		const rows = await tasksOfClaim(world.as.observer, claim);
		expect(rows.map(({ number: n, reason }) => [n, reason])).toEqual([
			[second, 'The code is gone.'],
			[number, 'One is enough.']
		]);
	});

	it('is offered for a discrepancy, and not for a claim that agrees', async () => {
		const enter = (fields: Partial<ClaimInput>) => enterClaim(world.as.member, fields);
		const { number: wrong } = await enter(claimFields({ printed: '2.8248', bibtex: bibtexOf(1) }));
		const { number: right } = await enter(claimFields({ bibtex: bibtexOf(2) }));
		await world.recompute();
		expect((await row(wrong))?.wantsTask).toBe(true);
		expect((await row(right))?.wantsTask).toBe(false);
	});
});

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

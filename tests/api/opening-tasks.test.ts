import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import type { ClaimInput } from '../../src/lib/schemas/claim-input';
import { parseLedgerQuery } from '../../src/lib/schemas/ledger-query';
import { parseTaskQuery } from '../../src/lib/schemas/task-input';
import type { GroupContext } from '../../src/lib/server/context';
import { notifications } from '../../src/lib/server/db/schema';
import { notificationMail } from '../../src/lib/server/mail/templates/notification-mail';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { listClaims } from '../../src/lib/server/services/claims/list-claims';
import { withdrawClaim } from '../../src/lib/server/services/claims/withdraw-claim';
import { listNews } from '../../src/lib/server/services/notifications/list-news';
import {
	factsOf,
	selectFacts
} from '../../src/lib/server/services/notifications/notification-facts';
import { isStillTrue } from '../../src/lib/server/services/notifications/still-true';
import { cancelTask } from '../../src/lib/server/services/tasks/cancel-task';
import { listTasks } from '../../src/lib/server/services/tasks/list-tasks';
import { openTasks } from '../../src/lib/server/services/tasks/open-tasks';
import { showTask } from '../../src/lib/server/services/tasks/show-task';
import { takeTask } from '../../src/lib/server/services/tasks/take-task';
import { tasksOfClaim } from '../../src/lib/server/services/tasks/tasks-of-claim';
import { bibtexOf, claimFields } from '../support/service';
import { inDays, issueAt, openTaskWorld, type TaskWorld } from '../support/task-world';

let world: TaskWorld;
beforeEach(async () => {
	world = await openTaskWorld();
});
afterEach(() => world.end());

const conflict = { code: 'conflict' };
const forbidden = { code: 'forbidden' };
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

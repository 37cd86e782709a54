import { and, eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import {
	DEFAULT_DELIVERY,
	NOTIFICATION_KINDS,
	type NotificationKind
} from '../../src/lib/ledger/notifications';
import {
	audit,
	comments,
	memberships,
	notifications,
	outbox
} from '../../src/lib/server/db/schema';
import { editClaim } from '../../src/lib/server/services/claims/edit-claim';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { deriveClaim } from '../../src/lib/server/services/claims/derive-claim';
import {
	chooseDelivery,
	notificationChoices
} from '../../src/lib/server/services/notifications/choose-delivery';
import { listNews, unreadCount } from '../../src/lib/server/services/notifications/list-news';
import { markRead, openNotification } from '../../src/lib/server/services/notifications/mark-read';
import { queueDigests } from '../../src/lib/server/services/notifications/queue-digests';
import { sendDueReminders } from '../../src/lib/server/services/notifications/send-due-reminders';
import {
	showUnsubscribe,
	unsubscribe,
	unsubscribeToken
} from '../../src/lib/server/services/notifications/unsubscribe';
import { newsRows, sendTo, setTask, startCatcher, tell, type Catcher } from '../support/news';
import { claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
let catcher: Catcher;
beforeEach(async () => {
	world = await openServiceWorld();
	catcher = await startCatcher();
});
afterEach(async () => {
	await catcher.close();
	world.close();
});

const told = (kind: NotificationKind) =>
	world.db.read.select().from(notifications).where(eq(notifications.kind, kind));
const mails = (kind: 'discrepancy' | 'settled' | 'digest' | NotificationKind) =>
	world.db.read.select().from(outbox).where(eq(outbox.kind, kind));
const day = (text: string) => new Date(`${text}:00Z`);

describe('a discrepancy and its end', () => {
	const wrong = () => enterClaim(world.as.member, claimFields({ printed: '2.8248' }));

	it('are told in the product and by mail to the same people, once', async () => {
		const { number } = await wrong();
		await world.recompute();
		expect(await sendTo(world, catcher.url)).toBe(3);
		await editClaim(world.as.member, number, 1, claimFields());
		expect(await told('discrepancy')).toHaveLength(3);
		expect(new Set((await told('settled')).map(({ userId }) => userId))).toEqual(
			new Set((await told('discrepancy')).map(({ userId }) => userId))
		);
		expect(await sendTo(world, catcher.url)).toBe(3);
		const subjects = (await catcher.parsed()).map(({ subject }) => subject);
		expect(subjects.filter((s) => s?.startsWith('Agreement after a discrepancy'))).toHaveLength(3);
	});

	it('are mailed once per change of verdict, not once per run', async () => {
		const { number, id } = await wrong();
		await world.recompute();
		for (let run = 0; run < 3; run++) {
			await world.db.write((tx) => deriveClaim(tx, id, new Date()));
		}
		expect(await mails('discrepancy')).toHaveLength(3);
		await sendTo(world, catcher.url);
		// There and back again: two turns, each told once.
		await editClaim(world.as.member, number, 1, claimFields());
		await editClaim(world.as.member, number, 2, claimFields({ printed: '2.8248' }));
		await world.db.write((tx) => deriveClaim(tx, id, new Date()));
		expect(await mails('discrepancy')).toHaveLength(6);
		expect(await mails('settled')).toHaveLength(3);
		await sendTo(world, catcher.url);
		await editClaim(world.as.member, number, 3, claimFields());
		expect(await mails('settled')).toHaveLength(6);
	});

	it('that nobody was mailed of or read are forgotten', async () => {
		const { number } = await wrong();
		await world.recompute();
		expect(await told('discrepancy')).toHaveLength(3);
		await editClaim(world.as.member, number, 1, claimFields());
		expect(await told('discrepancy')).toEqual([]);
		expect(await told('settled')).toEqual([]);
		expect((await mails('discrepancy')).map(({ state }) => state)).toEqual(
			Array(3).fill('dropped')
		);
	});

	it('that somebody read in the product are told to that person', async () => {
		const { number } = await wrong();
		await world.recompute();
		await markRead(world.as.maintainer, 'all');
		await editClaim(world.as.member, number, 1, claimFields());
		expect((await told('settled')).map(({ userId }) => userId)).toEqual([
			world.as.maintainer.actor.id
		]);
	});
});

describe('reminders', () => {
	it('go out three days before, once per due date', async () => {
		const rows = await newsRows(world);
		const at = (text: string) => sendDueReminders(world.db, day(text));
		expect(await at('2026-12-10T23:59')).toBe(0);
		expect(await at('2026-12-11T00:00')).toBe(1);
		expect(await at('2026-12-11T00:05')).toBe(0);
		expect(await at('2026-12-14T23:59')).toBe(0);
		expect(await told('task-due-soon')).toMatchObject([
			{ userId: world.as.member.actor.id, text: '2026-12-14', taskId: rows.taskId, actorId: null }
		]);
		await setTask(world, rows, { dueOn: '2026-12-15' });
		expect(await at('2026-12-14T12:00')).toBe(1);
	});

	it('go to who opened the task when nobody has it, and to both the day after', async () => {
		const rows = await newsRows(world, { task: { state: 'open', assigneeId: null } });
		await sendDueReminders(world.db, day('2026-12-12T08:00'));
		const maintainer = world.as.maintainer.actor.id;
		expect((await told('task-due-soon')).map(({ userId }) => userId)).toEqual([maintainer]);
		await setTask(world, rows, { state: 'assigned', assigneeId: world.as.member.actor.id });
		expect(await sendDueReminders(world.db, day('2026-12-15T00:00'))).toBe(2);
		expect(await sendDueReminders(world.db, day('2026-12-16T00:00'))).toBe(0);
		expect(new Set((await told('task-overdue')).map(({ userId }) => userId))).toEqual(
			new Set([maintainer, world.as.member.actor.id])
		);
	});

	it.each(['submitted', 'accepted', 'cancelled'] as const)(
		'do not nag about a %s task',
		async (state) => {
			await newsRows(world, { task: { state } });
			expect(await sendDueReminders(world.db, day('2026-12-13T08:00'))).toBe(0);
			expect(await sendDueReminders(world.db, day('2027-01-13T08:00'))).toBe(0);
			expect(await told('task-overdue')).toEqual([]);
		}
	);
});

describe('the daily digest', () => {
	const clock = (text: string) => ({ ...world.as.maintainer, now: () => day(text) });

	it('goes out once a day from six, with what waited, and then with what came later', async () => {
		const { claimId, taskId, commentId } = await newsRows(world, { text: 'see eq. (7)' });
		const comment = { claimId, taskId, commentId };
		await tell(world, 'comment', comment, clock('2026-12-01T20:00'));
		await tell(world, 'claim-proposed', { claimId }, clock('2026-12-01T21:00'));
		expect(await mails('comment')).toEqual([]);
		expect(await queueDigests(world.db, day('2026-12-02T05:59'))).toBe(0);
		expect(await queueDigests(world.db, day('2026-12-02T06:00'))).toBe(1);
		await tell(world, 'comment', comment, clock('2026-12-02T07:00'));
		expect(await queueDigests(world.db, day('2026-12-02T08:00'))).toBe(0);
		expect(await sendTo(world, catcher.url, { at: day('2026-12-02T08:00') })).toBe(1);
		const [mail] = await catcher.parsed();
		// The claim is not proposed: that is no longer true and left out.
		expect(mail?.subject).toBe('1 thing is new in First group');
		const text = (mail?.text ?? '').replace(/\s+/g, ' ');
		expect(text).toContain('Mae Maintainer commented on task 4.');
		expect(text).toContain('see eq. (7)');
		expect(text).toContain('https://merestone.example/news');
		const head = (catcher.raw[0]?.toString().split('\r\n\r\n')[0] ?? '').replace(/\r\n\s+/g, ' ');
		expect(head).toContain('List-Unsubscribe-Post: List-Unsubscribe=One-Click');
		expect(await queueDigests(world.db, day('2026-12-03T06:00'))).toBe(1);
		expect(await sendTo(world, catcher.url, { at: day('2026-12-03T06:00') })).toBe(1);
		expect(await queueDigests(world.db, day('2026-12-04T06:00'))).toBe(0);
	});

	it('leaves out what was read, taken back or turned off, and is not sent when nothing is left', async () => {
		const { claimId, taskId, commentId } = await newsRows(world);
		const comment = { claimId, taskId, commentId };
		await tell(world, 'comment', comment, clock('2026-12-01T20:00'));
		await queueDigests(world.db, day('2026-12-02T06:00'));
		await markRead(world.as.member, 'all');
		expect(await sendTo(world, catcher.url, { at: day('2026-12-02T07:00') })).toBe(0);
		await tell(world, 'comment', comment, clock('2026-12-02T20:00'));
		await queueDigests(world.db, day('2026-12-03T06:00'));
		await world.db.write((tx) => tx.update(comments).set({ removedAt: new Date() }));
		expect(await sendTo(world, catcher.url, { at: day('2026-12-03T07:00') })).toBe(0);
		expect((await mails('digest')).map(({ state }) => state)).toEqual(['dropped', 'dropped']);
	});
});

describe('choices', () => {
	it('start as agreed, change one by one, and are recorded', async () => {
		const before = await notificationChoices(world.as.member);
		expect(before.map(({ kind }) => kind)).toEqual([...NOTIFICATION_KINDS]);
		for (const { kind, delivery } of before) expect(delivery).toBe(DEFAULT_DELIVERY[kind]);
		await chooseDelivery(world.as.member, { mention: 'never', comment: 'daily' });
		const after = await notificationChoices(world.as.member);
		expect(after.filter((choice, i) => choice.delivery !== before[i]?.delivery)).toMatchObject([
			{ kind: 'mention', delivery: 'never' }
		]);
		const [row] = await world.db.read
			.select()
			.from(audit)
			.where(eq(audit.action, 'user.notifications-chosen'));
		expect(row).toMatchObject({ before: { mention: 'at-once' }, after: { mention: 'never' } });
	});

	it('refuse what is no choice', async () => {
		const input = { mention: 'hourly' } as never;
		await expect(chooseDelivery(world.as.member, input)).rejects.toMatchObject({
			code: 'invalid',
			issues: [{ field: 'mention', message: 'Choose at once, daily or never' }]
		});
	});

	it('of never send nothing, and the list still has it', async () => {
		const { claimId, taskId, commentId } = await newsRows(world);
		await chooseDelivery(world.as.member, { mention: 'never' });
		await tell(world, 'mention', { claimId, taskId, commentId });
		expect(await mails('mention')).toEqual([]);
		expect(await unreadCount(world.as.member)).toBe(1);
	});
});

describe('the link that turns a kind off', () => {
	const delivery = async (kind: NotificationKind) =>
		(await notificationChoices(world.as.member)).find((choice) => choice.kind === kind)?.delivery;

	it('does so without a session, any number of times, and nothing else', async () => {
		const token = unsubscribeToken(world.as.member.actor.id, 'mention');
		expect(token).not.toContain('@');
		expect((await showUnsubscribe(world.anonymous, token)).labels).toEqual([
			'Somebody mentions me'
		]);
		expect(await delivery('mention')).toBe('at-once');
		await unsubscribe(world.anonymous, token);
		await unsubscribe(world.anonymous, token);
		expect(await delivery('mention')).toBe('never');
		expect(await delivery('discrepancy')).toBe('at-once');
		const recorded = await world.db.read
			.select({ actorId: audit.actorId })
			.from(audit)
			.where(eq(audit.action, 'user.notifications-chosen'));
		expect(recorded).toEqual([{ actorId: world.as.member.actor.id }]);
	});

	it('of a digest turns off all that comes daily', async () => {
		const token = unsubscribeToken(world.as.member.actor.id, 'digest');
		await unsubscribe(world.anonymous, token);
		expect(await delivery('comment')).toBe('never');
		expect(await delivery('claim-proposed')).toBe('never');
		expect(await delivery('mention')).toBe('at-once');
	});

	it('is refused when a character of it was changed', async () => {
		const token = unsubscribeToken(world.as.member.actor.id, 'mention');
		const owner = world.as.owner.actor.id;
		const bad = [
			token.replace('mention', 'comment'),
			token.replace(world.as.member.actor.id, owner),
			token.slice(0, -1),
			`${token}.x`,
			'',
			'..',
			`nobody.mention.${token.split('.')[2] ?? ''}`
		];
		for (const each of bad) {
			await expect(unsubscribe(world.anonymous, each)).rejects.toMatchObject({ code: 'not-found' });
		}
		expect(await delivery('mention')).toBe('at-once');
	});
});

describe('the list of what is new', () => {
	it('is newest first, marked until opened, and one’s own', async () => {
		const { claimId, taskId, commentId } = await newsRows(world, { text: 'see eq. (7)' });
		await tell(world, 'task-assigned', { claimId, taskId });
		await tell(world, 'mention', { claimId, taskId, commentId });
		const { items, unread, total } = await listNews(world.as.member, 1);
		expect(items.map(({ text }) => text)).toEqual([
			'Mae Maintainer mentions you in a comment on task 4.',
			'Mae Maintainer assigned task 4 on claim 1 to you.'
		]);
		expect({ unread, total }).toEqual({ unread: 2, total: 2 });
		const [first] = items;
		expect(first).toMatchObject({ detail: 'see eq. (7)', groupName: 'First group', unread: true });
		const id = first?.id ?? '';
		await expect(openNotification(world.as.owner, id)).rejects.toMatchObject({ code: 'not-found' });
		expect(await markRead(world.as.owner, [id])).toBe(0);
		expect(await unreadCount(world.as.member)).toBe(2);
		expect(await openNotification(world.as.member, id)).toEqual({
			href: `/g/first/tasks/4#comment-${commentId}`
		});
		expect(await unreadCount(world.as.member)).toBe(1);
		expect(await markRead(world.as.member, 'all')).toBe(1);
		expect((await listNews(world.as.member, 1)).items.some((item) => item.unread)).toBe(false);
	});

	it('tells nothing of a group that was left', async () => {
		const { claimId, taskId } = await newsRows(world);
		await tell(world, 'task-assigned', { claimId, taskId });
		const { actor, group } = world.as.member;
		await world.db.write((tx) =>
			tx
				.delete(memberships)
				.where(and(eq(memberships.userId, actor.id), eq(memberships.groupId, group.id)))
		);
		expect(await listNews(world.as.member, 1)).toMatchObject({ items: [], total: 0, unread: 0 });
	});
});

import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { NOTIFICATION_KINDS, type NotificationKind } from '../../src/lib/ledger/notifications';
import type { TaskState } from '../../src/lib/ledger/tasks';
import {
	authorMessages,
	claims,
	comments,
	invitations,
	memberships,
	notifications,
	outbox
} from '../../src/lib/server/db/schema';
import { derivedToken } from '../../src/lib/server/derived-token';
import { hashToken, newId } from '../../src/lib/server/ids';
import { messageIdOf } from '../../src/lib/server/mail/message-id';
import { chooseDelivery } from '../../src/lib/server/services/notifications/choose-delivery';
import {
	newsRows,
	ORIGIN,
	sendTo,
	setTask,
	startCatcher,
	tell,
	type Catcher
} from '../support/news';
import { openServiceWorld, type ServiceWorld } from '../support/service';

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

const clearOutbox = () => world.db.write((tx) => tx.delete(outbox));

/** The state in which a task's news is still true. */
const TASK_STATES: Partial<Record<NotificationKind, TaskState>> = {
	'task-submitted': 'submitted',
	'task-returned': 'returned',
	'task-accepted': 'accepted',
	'task-cancelled': 'cancelled'
};

/** What each mail has to say besides the claim's own facts. */
const FACTS: Readonly<Record<NotificationKind, readonly string[]>> = {
	discrepancy: ['does not reproduce as entered', '2.8248', '2.82842712'],
	settled: ['agrees now'],
	transcription: ['Mae Maintainer compared claim 1 with its paper', 'the locator is wrong'],
	'task-assigned': ['Mae Maintainer assigned task 4', '14 Dec 2026', 'alert(1)'],
	'task-submitted': ['Mae Maintainer submitted task 4', 'Nobody accepts their own submission'],
	'task-returned': ['returned task 4', 'the locator is wrong'],
	'task-accepted': ['accepted task 4'],
	'task-cancelled': ['cancelled task 4', 'the locator is wrong'],
	'task-due-soon': ['Your task 4', '14 Dec 2026'],
	'task-overdue': ['Your task 4', '14 Dec 2026'],
	mention: ['mentions you', 'alert(1)'],
	comment: ['commented on task 4', 'alert(1)'],
	'claim-proposed': ['proposes claim 1 for publication'],
	'author-message': ['mira.arden@author.example', 'Nobody has verified', 'alert(1)']
};

describe('the mail of every kind', () => {
	it.each(NOTIFICATION_KINDS)('%s says who, what, which claim and where', async (kind) => {
		const rows = await newsRows(world);
		await world.recompute();
		await clearOutbox();
		await chooseDelivery(world.as.member, { [kind]: 'at-once' });
		const { claimId, taskId, commentId, messageId } = rows;
		const task = kind.startsWith('task-') || kind === 'comment' || kind === 'mention';
		const due = kind === 'task-due-soon' || kind === 'task-overdue';
		if (task) await setTask(world, rows, { state: TASK_STATES[kind] ?? 'in-progress' });
		if (kind === 'settled') {
			const [claim] = await world.db.read.select().from(claims);
			if (!claim) throw new Error('no claim');
			const verdict = { ...claim.verdict, status: 'agreement' as const };
			await world.db.write((tx) => tx.update(claims).set({ verdict }));
		}
		if (kind === 'claim-proposed') {
			await world.db.write((tx) => tx.update(claims).set({ visibility: 'proposed' }));
		}
		await tell(world, kind, {
			claimId,
			...(task && { taskId }),
			...((kind === 'comment' || kind === 'mention') && { commentId }),
			...(kind === 'author-message' && { messageId }),
			text: due ? '2026-12-14' : 'the locator is wrong'
		});
		expect(await sendTo(world, catcher.url)).toBe(1);
		const [mail] = await catcher.parsed();
		const [row] = await world.db.read.select().from(outbox);
		expect(mail?.messageId).toBe(row?.messageId);
		const text = (mail?.text ?? '').replace(/\s+/g, ' ');
		const html = String(mail?.html);
		for (const fact of [...FACTS[kind], 'Quantum maximum of CHSH', 'Arden & Voss 2004']) {
			expect(text).toContain(fact);
		}
		expect(text).toContain(`${ORIGIN}/account/notifications`);
		expect(text).toMatch(/You get this because/);
		// Every dynamic value is text in the HTML too, and nothing is fetched.
		expect(html).not.toContain('<script');
		expect(html).not.toMatch(/<img|<link|<style|url\(|http:\/\//);
		expect(html).toContain('&lt;script&gt;alert(1)');
		const link = task ? '/g/first/tasks/4' : '/g/first/claims/1';
		expect(text).toContain(ORIGIN + link);
		// Opening it marks the news as read, and leads to the same place.
		const news = `?news=${row?.notificationId ?? ''}`;
		expect(html).toContain(`href="${ORIGIN}${link}${news}`);
		// Short lines, but for addresses and what can't be broken.
		for (const line of (mail?.text ?? '').split('\n')) {
			expect(line.length <= 72 || !line.trim().includes(' '), line).toBe(true);
		}
		const head = catcher.raw[0]?.toString().split('\r\n\r\n')[0] ?? '';
		expect(head).not.toMatch(/^Bcc:/im);
		expect(mail?.subject).not.toMatch(/[\r\n]/);
		expect(mail?.headers.get('auto-submitted')).toBe('auto-generated');
		expect(mail?.headers.get('date')).toBeInstanceOf(Date);
		// RFC 2369, RFC 8058, RFC 2919; folded lines put together.
		const unfolded = head.replace(/\r\n[ \t]+/g, ' ');
		expect(unfolded).toMatch(
			/^List-Unsubscribe: <https:\/\/merestone\.example\/unsubscribe\/[\w.-]+>$/m
		);
		expect(unfolded).toMatch(/^List-Unsubscribe-Post: List-Unsubscribe=One-Click$/m);
		expect(unfolded).toMatch(/^List-Id: <first\.groups\.merestone\.example>$/im);
		expect(head).not.toContain('reading.example>/');
		const replyTo = mail?.replyTo?.value[0]?.address;
		expect(replyTo).toBe(kind === 'author-message' ? 'mira.arden@author.example' : undefined);
	});

	it('of an author without a usable address has no Reply-To', async () => {
		const rows = await newsRows(world);
		await clearOutbox();
		await world.db.write((tx) =>
			tx.update(authorMessages).set({ email: 'a@b.example\r\nBcc: all@reading.example' })
		);
		await tell(world, 'author-message', { claimId: rows.claimId, messageId: rows.messageId });
		expect(await sendTo(world, catcher.url)).toBe(1);
		const [mail] = await catcher.parsed();
		expect(mail?.replyTo).toBeUndefined();
		expect(mail?.bcc).toBeUndefined();
	});
});

describe('a mail that has nothing to tell any more', () => {
	const gone: readonly (readonly [string, NotificationKind, () => Promise<unknown>])[] = [
		['the task is somebody else’s', 'task-assigned', () => reassign()],
		['the task was decided', 'task-submitted', () => state('accepted')],
		['the task was handed in', 'task-due-soon', () => state('submitted')],
		['the date was moved', 'task-overdue', () => due('2027-01-10')],
		['the comment was removed', 'mention', () => removeComments()],
		[
			'the kind was turned off',
			'comment',
			() => chooseDelivery(world.as.member, { comment: 'never' })
		],
		['the person left', 'task-returned', () => leave()]
	];
	const all = (values: Parameters<typeof setTask>[2]) =>
		setTask(world, { taskId: ids.taskId } as never, values);
	const reassign = () => all({ assigneeId: world.as.owner.actor.id });
	const state = (next: TaskState) => all({ state: next });
	const due = (dueOn: string) => all({ dueOn });
	const removeComments = () =>
		world.db.write((tx) => tx.update(comments).set({ removedAt: new Date(), body: '' }));
	const leave = () =>
		world.db.write((tx) =>
			tx.delete(memberships).where(eq(memberships.userId, world.as.member.actor.id))
		);
	let ids: { readonly taskId: string };

	it.each(gone)('because %s is dropped', async (_, kind, change) => {
		const rows = await newsRows(world);
		ids = rows;
		await clearOutbox();
		await setTask(world, rows, {
			state:
				kind === 'task-submitted' ? 'submitted' : kind === 'task-returned' ? 'returned' : 'assigned'
		});
		await chooseDelivery(world.as.member, { [kind]: 'at-once' });
		const { claimId, taskId, commentId } = rows;
		await tell(world, kind, {
			claimId,
			taskId,
			...((kind === 'mention' || kind === 'comment') && { commentId }),
			text: '2026-12-14'
		});
		await change();
		expect(await sendTo(world, catcher.url)).toBe(0);
		expect(catcher.raw).toEqual([]);
		const [row] = await world.db.read.select().from(outbox);
		expect(row?.state).toBe('dropped');
		// The list in the product keeps what was.
		expect(
			await world.db.read.select().from(notifications).where(eq(notifications.kind, kind))
		).toHaveLength(1);
	});
});

describe('an invitation', () => {
	async function invite(over: Partial<typeof invitations.$inferInsert> = {}): Promise<string> {
		const { group, actor } = world.as.owner;
		const id = newId();
		const outboxId = newId();
		const at = new Date();
		await world.db.write(async (tx) => {
			await tx.insert(invitations).values({
				id,
				groupId: group.id,
				tokenHash: hashToken(derivedToken('invitation', id)),
				role: 'member',
				email: 'new.reader@elsewhere.example',
				createdBy: actor.id,
				createdAt: at,
				expiresAt: new Date(at.getTime() + 14 * 86_400_000),
				...over
			});
			await tx.insert(outbox).values({
				id: outboxId,
				kind: 'invitation',
				dedupeKey: `invitation:${id}`,
				messageId: messageIdOf(outboxId),
				invitationId: id,
				notBefore: at,
				createdAt: at
			});
		});
		return id;
	}

	it('goes to its address with the link, and says how to ignore it', async () => {
		const id = await invite();
		expect(await sendTo(world, catcher.url)).toBe(1);
		const [mail] = await catcher.parsed();
		const text = (mail?.text ?? '').replace(/\s+/g, ' ');
		const to = Array.isArray(mail?.to) ? mail.to[0] : mail?.to;
		expect(to?.value[0]?.address).toBe('new.reader@elsewhere.example');
		expect(mail?.subject).toBe('Olin Owner invites you to First group');
		expect(text).toContain(`${ORIGIN}/join/${derivedToken('invitation', id)}`);
		expect(text).toContain('as a member');
		expect(text).toContain('ignore this mail');
		expect(mail?.headers.has('list')).toBe(false);
		expect(mail?.headers.get('auto-submitted')).toBe('auto-generated');
	});

	it.each([
		['revoked', { revokedAt: new Date() }],
		['expired', { expiresAt: new Date(Date.now() - 1) }]
	] as const)('that is %s is not sent', async (_, over) => {
		await invite(over);
		expect(await sendTo(world, catcher.url)).toBe(0);
		expect(catcher.raw).toEqual([]);
	});
});

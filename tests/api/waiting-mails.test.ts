import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { comments, notifications, outbox } from '../../src/lib/server/db/schema';
import { addComment } from '../../src/lib/server/services/comments/add-comment';
import { editComment } from '../../src/lib/server/services/comments/edit-comment';
import { groupHandles } from '../../src/lib/server/services/comments/group-handles';
import { chooseDelivery } from '../../src/lib/server/services/notifications/choose-delivery';
import { unreadCount } from '../../src/lib/server/services/notifications/list-news';
import { queueDigests } from '../../src/lib/server/services/notifications/queue-digests';
import { newsRows, sendTo, startCatcher, tell, type Catcher } from '../support/news';
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

const states = async () =>
	(await world.db.read.select({ kind: outbox.kind, state: outbox.state }).from(outbox)).map(
		({ kind, state }) => `${kind} ${state}`
	);
const nextDay = () => new Date(Date.parse(new Date().toISOString().slice(0, 10)) + 32 * 3_600_000);

describe('a mail that waits', () => {
	const about = async () => {
		const { claimId, taskId, commentId } = await newsRows(world, { text: 'see eq. (7)' });
		return { claimId, taskId, commentId };
	};

	it('moves into the digest when its kind is turned to daily, and is not sent twice', async () => {
		const rows = await about();
		await tell(world, 'mention', rows);
		await tell(world, 'task-assigned', rows);
		await chooseDelivery(world.as.member, { mention: 'daily' });
		expect(await sendTo(world, catcher.url)).toBe(1);
		expect((await catcher.parsed())[0]?.subject).not.toMatch(/mention/i);
		expect(await queueDigests(world.db, nextDay())).toBe(1);
		expect(await sendTo(world, catcher.url, { at: nextDay() })).toBe(1);
		const digest = (await catcher.parsed())[1];
		expect(digest?.subject).toBe('1 thing is new in First group');
		expect(digest?.text).toContain('see eq. (7)');
		expect(await queueDigests(world.db, new Date(nextDay().getTime() + 86_400_000))).toBe(0);
		expect((await states()).sort()).toEqual([
			'digest sent',
			'mention dropped',
			'task-assigned sent'
		]);
	});

	it('of another person, or sent already, stays what it is', async () => {
		const rows = await about();
		await tell(world, 'mention', rows);
		await sendTo(world, catcher.url);
		await tell(world, 'mention', { ...rows, recipients: [world.as.owner.actor.id] });
		await chooseDelivery(world.as.member, { mention: 'daily' });
		expect((await states()).sort()).toEqual(['mention sent', 'mention waiting']);
		const waiting = await world.db.read
			.select()
			.from(notifications)
			.where(eq(notifications.forDigest, true));
		expect(waiting).toEqual([]);
	});

	it('is not sent when its kind is turned off meanwhile, in a digest neither', async () => {
		const rows = await about();
		await tell(world, 'mention', rows);
		await tell(world, 'comment', rows);
		await chooseDelivery(world.as.member, { mention: 'never', comment: 'never' });
		expect(await queueDigests(world.db, nextDay())).toBe(1);
		expect(await sendTo(world, catcher.url, { at: nextDay() })).toBe(0);
		expect(await unreadCount(world.as.member)).toBe(2);
	});
});

describe('a mention', () => {
	async function mentioned(): Promise<{ readonly id: string; readonly handle: string }> {
		const { claimId } = await newsRows(world);
		const people = await world.db.write((tx) => groupHandles(tx, world.as.member));
		const handle = people.find(({ id }) => id === world.as.owner.actor.id)?.handle ?? '';
		const { id } = await addComment(world.as.member, {
			subject: 'claim',
			subjectId: claimId,
			body: `Please look, @${handle}.`
		});
		return { id, handle };
	}
	const mails = async () =>
		(await catcher.parsed()).filter(({ subject }) => subject?.includes('mention'));

	it('is mailed', async () => {
		await mentioned();
		await sendTo(world, catcher.url);
		expect(await mails()).toHaveLength(1);
	});

	it('that an edit took out is not mailed; put back, it is in the list', async () => {
		const { id, handle } = await mentioned();
		await editComment(world.as.member, id, 'Nobody needs to look.');
		await sendTo(world, catcher.url);
		expect(await mails()).toEqual([]);
		const [row] = await world.db.read.select().from(comments).where(eq(comments.id, id));
		expect(row?.body).toBe('Nobody needs to look.');
		await editComment(world.as.member, id, `After all, @${handle}.`);
		await sendTo(world, catcher.url);
		// The same event is told once: the list has it, and no second mail is made of it.
		expect(await mails()).toEqual([]);
		expect(await unreadCount(world.as.owner)).toBeGreaterThan(0);
	});
});

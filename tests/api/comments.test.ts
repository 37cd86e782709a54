import { and, asc, eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { LONGEST_COMMENT } from '../../src/lib/ledger/comments';
import type { GroupContext } from '../../src/lib/server/context';
import { audit, comments, notifications, outbox } from '../../src/lib/server/db/schema';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { findClaim } from '../../src/lib/server/services/claims/find-claim';
import { addComment } from '../../src/lib/server/services/comments/add-comment';
import { discussionView } from '../../src/lib/server/services/comments/discussion-view';
import { editComment } from '../../src/lib/server/services/comments/edit-comment';
import { previewText } from '../../src/lib/server/services/comments/preview-text';
import { removeComment } from '../../src/lib/server/services/comments/remove-comment';
import { openTasks } from '../../src/lib/server/services/tasks/open-tasks';
import { findTask } from '../../src/lib/server/services/tasks/find-task';
import { claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
let claimId: string;
let number: number;
beforeEach(async () => {
	world = await openServiceWorld();
	({ id: claimId, number } = await enterClaim(world.as.member, claimFields()));
});
afterEach(() => world.close());

const MINUTE = 60_000;
const later = (ctx: GroupContext, minutes: number): GroupContext => ({
	...ctx,
	now: () => new Date(Date.now() + minutes * MINUTE)
});
const say = async (ctx: GroupContext, body: string) =>
	(await addComment(ctx, { subject: 'claim', subjectId: claimId, body })).id;
const seen = (ctx: GroupContext = world.as.observer) => discussionView(ctx, 'claim', claimId);

/** Who was told what of a comment: `mention Mae`. */
async function told(commentId: string): Promise<string[]> {
	const rows = await world.db.read
		.select({ kind: notifications.kind, userId: notifications.userId })
		.from(notifications)
		.where(eq(notifications.commentId, commentId))
		.orderBy(asc(notifications.kind), asc(notifications.id));
	const people = Object.values(world.as).map(({ actor }) => actor);
	return rows.map(({ kind, userId }) => {
		const name = people.find(({ id }) => id === userId)?.name.split(' ')[0];
		return `${kind} ${name}`;
	});
}

describe('a comment', () => {
	it('is set with formulas and marked mentions, and shown to the whole group', async () => {
		await say(world.as.maintainer, 'so **not** $2\\sqrt2$, @mo');
		const { comments: shown, mayComment, handles } = await seen();
		expect(shown).toHaveLength(1);
		expect(shown[0]?.author.name).toBe('Mae Maintainer');
		expect(shown[0]?.html).toContain('<strong>not</strong>');
		expect(shown[0]?.html).toContain('class="katex"');
		expect(shown[0]?.html).toContain('<span class="mention">@mo</span>');
		// Nobody else gets the text to edit.
		expect(shown[0]?.body).toBe('');
		expect(mayComment).toBe(false);
		expect(handles).toContainEqual({ handle: 'mae', name: 'Mae Maintainer' });
	});

	it('takes a member', async () => {
		await expect(say(world.as.observer, 'no')).rejects.toMatchObject({ code: 'forbidden' });
		await expect(say(world.as.member, 'yes')).resolves.toBeTypeOf('string');
	});

	it('needs words, and no more than it can hold; line ends of forms do not count', async () => {
		await expect(say(world.as.member, ' \r\n ')).rejects.toMatchObject({
			code: 'invalid',
			issues: [{ field: 'body', message: 'Write something first' }]
		});
		await expect(say(world.as.member, 'a'.repeat(LONGEST_COMMENT + 1))).rejects.toMatchObject({
			issues: [{ field: 'body' }]
		});
		await say(world.as.member, 'a\r\n'.repeat(LONGEST_COMMENT / 2));
		const [row] = await world.db.read.select().from(comments);
		expect(row?.body).toBe('a\n'.repeat(LONGEST_COMMENT / 2).trimEnd());
	});

	it('is on something of the group only', async () => {
		const add = (ctx: GroupContext, subject: 'claim' | 'task' | 'inequality', id: string) =>
			addComment(ctx, { subject, subjectId: id, body: 'x' });
		const gone = { code: 'not-found' };
		await expect(add(world.outsider, 'claim', claimId)).rejects.toMatchObject(gone);
		await expect(add(world.as.member, 'task', claimId)).rejects.toMatchObject(gone);
		await expect(add(world.as.member, 'inequality', 'none')).rejects.toMatchObject(gone);
		await expect(discussionView(world.outsider, 'claim', claimId)).rejects.toMatchObject(gone);
		const mine = await say(world.as.member, 'x');
		await expect(editComment(world.outsider, mine, 'y')).rejects.toMatchObject(gone);
		await expect(removeComment(world.outsider, mine)).rejects.toMatchObject(gone);
	});

	it('on a shared inequality stays within its group', async () => {
		const { inequalityId } = await findClaim(world.db.read, world.as.member, number);
		const subjectId = inequalityId ?? '';
		await addComment(world.as.member, { subject: 'inequality', subjectId, body: 'ours' });
		// CHSH is a recognised family, which every group sees.
		expect((await discussionView(world.outsider, 'inequality', subjectId)).comments).toEqual([]);
		expect((await discussionView(world.as.owner, 'inequality', subjectId)).comments).toHaveLength(
			1
		);
	});
});

describe('editing a comment', () => {
	it('leaves no trace within fifteen minutes, and the earlier text afterwards', async () => {
		const id = await say(world.as.member, 'first');
		await editComment(later(world.as.member, 14), id, 'second');
		expect((await seen()).comments[0]).toMatchObject({ editedAt: null, versions: [] });
		await editComment(later(world.as.member, 16), id, 'third');
		await editComment(later(world.as.member, 17), id, 'fourth');
		const [comment] = (await seen()).comments;
		expect(comment?.html).toContain('fourth');
		expect(comment?.editedAt).not.toBeNull();
		expect(comment?.versions.map(({ html }) => html)).toEqual(['<p>third</p>', '<p>second</p>']);
	});

	it('is for its author alone, owners included', async () => {
		const id = await say(world.as.member, 'mine');
		for (const ctx of [world.as.owner, world.as.maintainer, world.as.observer]) {
			await expect(editComment(ctx, id, 'yours')).rejects.toMatchObject({ code: 'forbidden' });
		}
	});

	it('tells whom it mentions only now, and nobody twice', async () => {
		const id = await say(world.as.maintainer, 'see @mo');
		expect(await told(id)).toEqual(['mention Mo']);
		await editComment(world.as.maintainer, id, 'see @obi');
		await editComment(world.as.maintainer, id, 'see @obi and @mo');
		expect((await told(id)).sort()).toEqual(['mention Mo', 'mention Obi']);
	});
});

describe('removing a comment', () => {
	it('takes its texts away and says who removed it', async () => {
		const id = await say(world.as.member, 'a secret for @mae');
		await editComment(later(world.as.member, 20), id, 'an open secret');
		await removeComment(world.as.maintainer, id);
		const [comment] = (await seen(world.as.member)).comments;
		expect(comment).toMatchObject({
			removedBy: 'Mae Maintainer',
			versions: [],
			body: '',
			mayEdit: false,
			mayRemove: false
		});
		expect(JSON.stringify(comment)).not.toContain('secret');
		await expect(editComment(world.as.member, id, 'back')).rejects.toMatchObject({
			code: 'conflict'
		});
		await expect(removeComment(world.as.maintainer, id)).resolves.toBeUndefined();
	});

	it('is for its author and maintainers', async () => {
		const id = await say(world.as.maintainer, 'mine');
		await expect(removeComment(world.as.member, id)).rejects.toMatchObject({ code: 'forbidden' });
		await removeComment(world.as.owner, id);
		expect((await seen()).comments[0]?.removedBy).toBe('Olin Owner');
	});
});

describe('who is told of a comment', () => {
	it('is who entered the claim and who commented before, but not who says it', async () => {
		const first = await say(world.as.maintainer, 'one');
		expect(await told(first)).toEqual(['comment Mo']);
		const second = await say(world.as.owner, 'two');
		expect((await told(second)).sort()).toEqual(['comment Mae', 'comment Mo']);
		const own = await say(world.as.member, 'three');
		expect((await told(own)).sort()).toEqual(['comment Mae', 'comment Olin']);
	});

	it('is told once: a mention wins', async () => {
		const id = await say(world.as.maintainer, '@mo @mo-member @mae, `@olin`');
		expect(await told(id)).toEqual(['mention Mo']);
		const mails = await world.db.read
			.select()
			.from(outbox)
			.where(and(eq(outbox.kind, 'mention'), eq(outbox.userId, world.as.member.actor.id)));
		expect(mails).toHaveLength(1);
	});

	it('is, for a task, who opened it and who has it', async () => {
		const { numbers } = await openTasks(world.as.maintainer, {
			claims: [number],
			assigneeId: world.as.owner.actor.id
		});
		const task = await findTask(world.db.read, world.as.member, numbers[0] ?? 0);
		const { id } = await addComment(world.as.member, {
			subject: 'task',
			subjectId: task.id,
			body: 'Which version?'
		});
		expect((await told(id)).sort()).toEqual(['comment Mae', 'comment Olin']);
		const [row] = await world.db.read.select().from(audit).where(eq(audit.entityId, id));
		expect(row).toMatchObject({ action: 'comment.added', claimId });
	});
});

describe('a preview', () => {
	it('is what the comment will look like, and writes nothing', async () => {
		const before = await world.db.read.$count(audit);
		const { html, mentions, warnings } = await previewText(world.as.member, '*so* @mae @nob <b>');
		expect(warnings).toEqual([expect.stringContaining('called @nob,')]);
		expect(html).toBe('<p><em>so</em> <span class="mention">@mae</span> @nob &#x3C;b></p>');
		expect(mentions).toEqual(['Mae Maintainer']);
		expect(await world.db.read.$count(audit)).toBe(before);
	});
});

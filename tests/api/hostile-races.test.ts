import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import type { GroupContext } from '../../src/lib/server/context';
import {
	audit,
	claims,
	memberships,
	notifications,
	submissions,
	tasks,
	users
} from '../../src/lib/server/db/schema';
import { editClaim } from '../../src/lib/server/services/claims/edit-claim';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { publishClaim } from '../../src/lib/server/services/claims/publish-claim';
import { showPublicClaim } from '../../src/lib/server/services/claims/show-public-claim';
import { changeRole } from '../../src/lib/server/services/groups/change-role';
import { acceptInvitation } from '../../src/lib/server/services/invitations/accept-invitation';
import { createInvitation } from '../../src/lib/server/services/invitations/create-invitation';
import { createFeed } from '../../src/lib/server/services/calendar/create-feed';
import { acceptSubmission } from '../../src/lib/server/services/tasks/accept-submission';
import { editTask } from '../../src/lib/server/services/tasks/edit-task';
import { returnSubmission } from '../../src/lib/server/services/tasks/return-submission';
import { submitTask } from '../../src/lib/server/services/tasks/submit-task';
import { takeTask } from '../../src/lib/server/services/tasks/take-task';
import { confirmTranscription } from '../../src/lib/server/services/transcriptions/confirm-transcription';
import { claimFields } from '../support/service';
import { foundValue, openTaskWorld, type TaskWorld } from '../support/task-world';

let world: TaskWorld;
beforeEach(async () => {
	world = await openTaskWorld();
});
afterEach(() => world.end());

const forbidden = { code: 'forbidden' };
const conflict = { code: 'conflict' };
const all = { valueMatches: 'yes', locatorMatches: 'yes', inequalityMatches: 'yes' } as const;

const as = (ctx: GroupContext, role: GroupContext['role']): GroupContext => ({ ...ctx, role });

async function outcomes(work: readonly Promise<unknown>[]): Promise<number> {
	const settled = await Promise.allSettled(work);
	return settled.filter(({ status }) => status === 'fulfilled').length;
}

async function taskRow(number: number) {
	const [row] = await world.db.read.select().from(tasks).where(eq(tasks.number, number));
	if (!row) throw new Error(`no task ${number}`);
	return row;
}

describe('one’s own submission', () => {
	it('is accepted by no path: not by reassigning it, nor by another role, nor by an edit', async () => {
		const { owner, maintainer } = world.as;
		const claim = await world.openClaim();
		const number = await world.openTask(claim);
		// A maintainer who takes, submits and accepts.
		await takeTask(maintainer, number);
		await submitTask(maintainer, number, foundValue('0.70711'));
		await expect(acceptSubmission(maintainer, number)).rejects.toMatchObject(forbidden);
		// Handing the task to somebody else does not make it somebody else’s submission.
		const { version } = await taskRow(number);
		const asks = { kind: 'recompute', dueOn: '', instructions: '', version } as const;
		await expect(
			editTask(maintainer, number, { ...asks, assigneeId: world.wren.actor.id })
		).rejects.toMatchObject(conflict);
		await expect(editTask(maintainer, number, { ...asks, assigneeId: '' })).rejects.toMatchObject(
			conflict
		);
		// An owner now.
		await changeRole(owner, { userId: maintainer.actor.id, role: 'owner' });
		await expect(acceptSubmission(as(maintainer, 'owner'), number)).rejects.toMatchObject(
			forbidden
		);
		await expect(returnSubmission(as(maintainer, 'owner'), number, 'x')).rejects.toMatchObject(
			forbidden
		);
		expect((await taskRow(number)).state).toBe('submitted');
		expect(await acceptSubmission(owner, number)).toEqual({ contradicted: false });
	});

	it('of a member who becomes a maintainer stays somebody else’s to accept', async () => {
		const number = await world.openTask(await world.openClaim());
		await submitTask(world.wren, number, foundValue('0.70711'));
		await changeRole(world.as.owner, { userId: world.wren.actor.id, role: 'maintainer' });
		await expect(acceptSubmission(as(world.wren, 'maintainer'), number)).rejects.toMatchObject(
			forbidden
		);
	});
});

describe('at the same moment', () => {
	it('twenty accept, and it is accepted once', async () => {
		const number = await world.openTask(await world.openClaim());
		await submitTask(world.wren, number, foundValue('0.70711'));
		const { owner, maintainer } = world.as;
		const tries = Array.from({ length: 20 }, (_, i) =>
			acceptSubmission(i % 2 ? owner : maintainer, number)
		);
		expect(await outcomes(tries)).toBe(1);
		const { id } = await taskRow(number);
		expect(await world.actions(id)).toEqual(['task.opened', 'task.submitted', 'task.accepted']);
	});

	it('one accepts and another returns: one of both happens', async () => {
		const number = await world.openTask(await world.openClaim());
		await submitTask(world.wren, number, foundValue('0.70711'));
		const { owner, maintainer } = world.as;
		expect(
			await outcomes([acceptSubmission(owner, number), returnSubmission(maintainer, number, 'No.')])
		).toBe(1);
	});

	it('a form is sent twenty times, and one submission is kept', async () => {
		const number = await world.openTask(await world.openClaim());
		const tries = Array.from({ length: 20 }, () =>
			submitTask(world.wren, number, foundValue('0.70711'))
		);
		expect(await outcomes(tries)).toBe(1);
		expect(await world.db.read.$count(submissions)).toBe(1);
	});

	it('twenty people follow one joining link, and one joins', async () => {
		const { link } = await createInvitation(world.as.owner, { role: 'maintainer' });
		const token = link.split('/').at(-1) ?? '';
		const before = await world.db.read.$count(memberships);
		const { actor, ...rest } = world.outsider;
		const people = await strangers(20);
		const tries = people.map((id) => acceptInvitation({ ...rest, actor: { ...actor, id } }, token));
		expect(await outcomes(tries)).toBe(1);
		expect(await world.db.read.$count(memberships)).toBe(before + 1);
	});

	it('twenty times a calendar is asked for, and one stands', async () => {
		const feeds = await Promise.all(
			Array.from({ length: 20 }, () => createFeed(world.as.member, { groupSlug: 'first' }))
		);
		expect(new Set(feeds.map(({ id }) => id)).size).toBe(1);
	});
});

/** Accounts without a group. */
async function strangers(many: number): Promise<string[]> {
	const ids = Array.from({ length: many }, (_, i) => `stranger-${i}`);
	await world.db.write((tx) =>
		tx.insert(users).values(
			ids.map((id) => ({
				id,
				name: `Stranger ${id}`,
				email: `${id}@elsewhere.example`,
				passwordHash: 'nobody signs in here',
				createdAt: new Date()
			}))
		)
	);
	return ids;
}

describe('a page opened before', () => {
	it('accepts nothing that came after it', async () => {
		const number = await world.openTask(await world.openClaim());
		await submitTask(world.wren, number, foundValue('0.70711'));
		const { version } = await taskRow(number);
		// One maintainer looks at it; another returns it; something else is submitted.
		await returnSubmission(world.as.owner, number, 'More digits, please.');
		await submitTask(world.wren, number, foundValue('0.9'));
		await expect(acceptSubmission(world.as.maintainer, number, version)).rejects.toMatchObject(
			conflict
		);
		await expect(
			returnSubmission(world.as.maintainer, number, 'No.', version)
		).rejects.toMatchObject(conflict);
		const now = (await taskRow(number)).version;
		expect(await acceptSubmission(world.as.maintainer, number, now)).toEqual({
			contradicted: false
		});
	});
});

describe('one’s own transcription', () => {
	const swapped = (over = {}) => claimFields({ printed: '2.8248', ...over });
	const confirm = (ctx: GroupContext, number: number, version: number) =>
		confirmTranscription(ctx, number, { ...all, note: '', version });

	async function discrepancy(): Promise<{ number: number; id: string }> {
		const entered = await enterClaim(world.as.member, swapped());
		await world.recompute();
		return entered;
	}

	it('is confirmed by nobody who wrote any of it, whatever somebody edits in between', async () => {
		const { owner, maintainer, member } = world.as;
		const { number } = await discrepancy();
		await editClaim(maintainer, number, 1, swapped({ printed: '2.8249' }));
		// A word in the note, so that the version with the value is no longer the present one.
		await editClaim(member, number, 2, swapped({ printed: '2.8249', note: 'As in the preprint.' }));
		await expect(confirm(maintainer, number, 3)).rejects.toMatchObject(forbidden);
		await expect(confirm(member, number, 3)).rejects.toMatchObject(forbidden);
		// Nor through a task of that kind.
		const task = await world.openTask(number, { kind: 'confirm-transcription' });
		const answer = { kind: 'transcription', ...all } as const;
		await expect(takeTask(maintainer, task)).rejects.toMatchObject(conflict);
		await expect(submitTask(maintainer, task, answer)).rejects.toMatchObject(forbidden);
		expect((await taskRow(task)).state).toBe('open');
		await expect(confirm(owner, number, 3)).resolves.toEqual({ confirmed: true });
	});

	it('is not published by an edit between the comparison and the publication', async () => {
		const { owner, maintainer, member } = world.as;
		const { number, id } = await discrepancy();
		await confirm(owner, number, 1);
		const both = await Promise.allSettled([
			editClaim(member, number, 1, swapped({ printed: '2.8300' })),
			publishClaim(maintainer, number)
		]);
		expect(both[0].status).toBe('fulfilled');
		await world.recompute();
		const [claim] = await world.db.read.select().from(claims).where(eq(claims.id, id));
		expect(claim).toMatchObject({ version: 2, confirmedVersion: 1, status: 'discrepancy' });
		await expect(showPublicClaim(world.anonymous, id)).rejects.toMatchObject({ code: 'not-found' });
		await expect(publishClaim(maintainer, number)).rejects.toMatchObject(conflict);
	});

	it('of a version that was replaced while one compared is refused', async () => {
		const { owner, member } = world.as;
		const { number } = await discrepancy();
		const both = await Promise.allSettled([
			editClaim(member, number, 1, swapped({ locator: 'eq. (9)' })),
			confirm(owner, number, 1)
		]);
		expect(both.map(({ status }) => status)).toContain('fulfilled');
		const [claim] = await world.db.read.select().from(claims).where(eq(claims.number, number));
		expect(claim?.version === claim?.confirmedVersion).toBe(false);
	});
});

it('tells and records nothing of what was refused', async () => {
	const number = await world.openTask(await world.openClaim());
	await submitTask(world.wren, number, foundValue('0.70711'));
	const before = [await world.db.read.$count(audit), await world.db.read.$count(notifications)];
	for (const ctx of [world.wren, as(world.wren, 'owner'), world.as.observer, world.outsider]) {
		await expect(acceptSubmission(ctx, number)).rejects.toThrow();
	}
	expect([await world.db.read.$count(audit), await world.db.read.$count(notifications)]).toEqual(
		before
	);
});

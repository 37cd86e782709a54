import { asc, eq, gt, sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { GroupContext } from '../../src/lib/server/context';
import { audit, claims } from '../../src/lib/server/db/schema';
import { recordAudit } from '../../src/lib/server/services/audit';
import { editClaim } from '../../src/lib/server/services/claims/edit-claim';
import { attachCertificate } from '../../src/lib/server/services/submissions/attach-certificate';
import { solved } from '../support/certificates';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { proposeClaim } from '../../src/lib/server/services/claims/propose-claim';
import { publishClaim } from '../../src/lib/server/services/claims/publish-claim';
import { recomputeClaim } from '../../src/lib/server/services/claims/recompute-claim';
import { restoreClaim } from '../../src/lib/server/services/claims/restore-claim';
import { supersedeClaim } from '../../src/lib/server/services/claims/supersede-claim';
import { unpublishClaim } from '../../src/lib/server/services/claims/unpublish-claim';
import { withdrawClaim } from '../../src/lib/server/services/claims/withdraw-claim';
import { addComment } from '../../src/lib/server/services/comments/add-comment';
import { editComment } from '../../src/lib/server/services/comments/edit-comment';
import { removeComment } from '../../src/lib/server/services/comments/remove-comment';
import { changeRole } from '../../src/lib/server/services/groups/change-role';
import { removeMember } from '../../src/lib/server/services/groups/remove-member';
import { startGroup } from '../../src/lib/server/services/groups/start-group';
import { createInvitation } from '../../src/lib/server/services/invitations/create-invitation';
import { revokeInvitation } from '../../src/lib/server/services/invitations/revoke-invitation';
import { listInvitations } from '../../src/lib/server/services/invitations/list-invitations';
import { acceptSubmission } from '../../src/lib/server/services/tasks/accept-submission';
import { cancelTask } from '../../src/lib/server/services/tasks/cancel-task';
import { editTask } from '../../src/lib/server/services/tasks/edit-task';
import { openTasks } from '../../src/lib/server/services/tasks/open-tasks';
import { releaseTask } from '../../src/lib/server/services/tasks/release-task';
import { returnSubmission } from '../../src/lib/server/services/tasks/return-submission';
import { startTask } from '../../src/lib/server/services/tasks/start-task';
import { submitTask } from '../../src/lib/server/services/tasks/submit-task';
import { takeTask } from '../../src/lib/server/services/tasks/take-task';
import { claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
beforeAll(async () => {
	world = await openServiceWorld();
});
afterAll(() => world.close());

const REQUEST = 'request-of-this-test';
const AT = new Date('2026-12-01T10:20:30.456Z');
const traced = (ctx: GroupContext): GroupContext => ({
	...ctx,
	requestId: REQUEST,
	now: () => AT
});
const by = (role: keyof ServiceWorld['as']) => traced(world.as[role]);

type Step = readonly [what: string, action: string, run: () => Promise<unknown>, made?: 'made'];

let commentId = '';
const value = {
	kind: 'value',
	printed: '2.8284',
	program: 'a script',
	programVersion: '2.1'
} as const;

/** In an order in which each can be done; `made`: there was nothing before. */
const STEPS: readonly Step[] = [
	['enter a claim', 'claim.entered', () => enterClaim(by('member'), claimFields()), 'made'],
	[
		'enter another',
		'claim.entered',
		() => enterClaim(by('member'), claimFields({ printed: '2.83' })),
		'made'
	],
	['edit it', 'claim.edited', () => editClaim(by('member'), 1, 1, claimFields({ printed: '2.8' }))],
	['ask to recompute', 'claim.recompute-asked', () => recomputeClaim(by('member'), 1)],
	[
		'attach a certificate',
		'claim.certificate-attached',
		async () => {
			const certificate = await solved({ family: { name: 'chsh' }, quantity: 'local' });
			return attachCertificate(by('member'), 1, { certificate });
		},
		'made'
	],
	['propose it', 'claim.proposed', () => proposeClaim(by('member'), 1)],
	['publish it', 'claim.published', () => publishClaim(by('maintainer'), 1)],
	['take it back', 'claim.unpublished', () => unpublishClaim(by('maintainer'), 1)],
	['withdraw it', 'claim.withdrawn', () => withdrawClaim(by('member'), 1)],
	['restore it', 'claim.restored', () => restoreClaim(by('member'), 1)],
	['supersede it', 'claim.superseded', () => supersedeClaim(by('member'), 1, 2)],
	[
		'comment',
		'comment.added',
		async () => {
			const [claim] = await world.db.read.select().from(claims).where(eq(claims.number, 2));
			const about = { subject: 'claim', subjectId: claim?.id ?? '' } as const;
			commentId = (await addComment(by('member'), { ...about, body: 'a' })).id;
		},
		'made'
	],
	['edit a comment', 'comment.edited', () => editComment(by('member'), commentId, 'b')],
	['remove a comment', 'comment.removed', () => removeComment(by('owner'), commentId)],
	['open a task', 'task.opened', () => openTasks(by('maintainer'), { claims: [2] }), 'made'],
	['take it', 'task.taken', () => takeTask(by('member'), 1)],
	['give it back', 'task.released', () => releaseTask(by('member'), 1)],
	[
		'assign it',
		'task.edited',
		() => editTask(by('maintainer'), 1, { version: 3, assigneeId: world.as.member.actor.id })
	],
	['begin it', 'task.started', () => startTask(by('member'), 1)],
	['submit', 'task.submitted', () => submitTask(by('member'), 1, value)],
	['return it', 'task.returned', () => returnSubmission(by('maintainer'), 1, 'Which version?')],
	['submit again', 'task.submitted', () => submitTask(by('member'), 1, value)],
	['accept it', 'task.accepted', () => acceptSubmission(by('maintainer'), 1)],
	['open another task', 'task.opened', () => openTasks(by('maintainer'), { claims: [2] }), 'made'],
	['cancel it', 'task.cancelled', () => cancelTask(by('maintainer'), 2, 'Not needed')],
	['invite', 'invitation.created', () => createInvitation(by('owner'), { role: 'member' }), 'made'],
	[
		'revoke the invitation',
		'invitation.revoked',
		async () => {
			const [invitation] = await listInvitations(world.as.owner);
			await revokeInvitation(by('owner'), invitation?.id ?? '');
		}
	],
	[
		'give a role',
		'member.role-changed',
		() => changeRole(by('owner'), { userId: world.as.observer.actor.id, role: 'member' })
	],
	[
		'remove a member',
		'member.removed',
		() => removeMember(by('owner'), world.as.observer.actor.id)
	],
	['start a group', 'group.started', () => startGroup(by('owner'), { name: 'Another one' }), 'made']
];

async function rowsAfter(id: string) {
	return world.db.read.select().from(audit).where(gt(audit.id, id)).orderBy(asc(audit.id));
}

const newest = async () => (await rowsAfter('')).at(-1)?.id ?? '';

describe('each verb writes exactly one row, with who, when, in which request, before and after', () => {
	it.each(STEPS.map(([what, ...step]) => [what, step] as const))('%s', async (_, step) => {
		const [action, run, made] = step;
		const last = await newest();
		await run();
		// What the product derives from a change is its own.
		const rows = (await rowsAfter(last)).filter(({ actorId }) => actorId !== null);
		expect(rows.map((row) => row.action)).toEqual([action]);
		const [row] = rows;
		expect(row).toMatchObject({ requestId: REQUEST, at: AT });
		expect(row?.after).toBeTypeOf('object');
		expect(row?.after).not.toBeNull();
		if (made) expect(row?.before).toBeNull();
		else expect(row?.before).not.toBeNull();
		// What was asked for may be in the queue already.
		if (action === 'claim.recompute-asked') return;
		expect(JSON.stringify(row?.before)).not.toBe(JSON.stringify(row?.after));
	});

	it('and holds no secret', async () => {
		expect(JSON.stringify(await rowsAfter(''))).not.toMatch(/password|token|\/join\//i);
	});
});

describe('the audit', () => {
	it('can be neither changed nor deleted, by whatever statement', async () => {
		const rows = await rowsAfter('');
		const id = rows[0]?.id ?? '';
		const refused = /append-only/;
		const causeOf = async (work: Promise<unknown>) =>
			String(
				(
					await work.then(
						() => null,
						(error: unknown) => error as Error
					)
				)?.cause
			);
		const { db } = world;
		for (const change of [
			{ action: 'x' },
			{ before: {} },
			{ after: {} },
			{ at: AT },
			{ requestId: 'x' }
		]) {
			const work = db.write((tx) => tx.update(audit).set(change).where(eq(audit.id, id)));
			expect(await causeOf(work), JSON.stringify(change)).toMatch(refused);
		}
		expect(await causeOf(db.write((tx) => tx.delete(audit)))).toMatch(refused);
		expect(
			await causeOf(db.write((tx) => tx.run(sql`DELETE FROM audit WHERE id = ${id}`)))
		).toMatch(refused);
		expect(await rowsAfter('')).toEqual(rows);
	});

	it('keeps no row of a change that failed', async () => {
		const before = await world.db.read.$count(audit);
		const failing = world.db.write(async (tx) => {
			await recordAudit(tx, by('owner'), {
				action: 'claim.entered',
				entity: 'claim',
				entityId: 'x'
			});
			throw new Error('the change failed');
		});
		await expect(failing).rejects.toThrow('the change failed');
		await expect(withdrawClaim(by('member'), 99)).rejects.toMatchObject({ code: 'not-found' });
		expect(await world.db.read.$count(audit)).toBe(before);
	});
});

import { createHash } from 'node:crypto';
import { and, eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { notifications, outbox } from '../../src/lib/server/db/schema';
import { editClaim } from '../../src/lib/server/services/claims/edit-claim';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { findClaim } from '../../src/lib/server/services/claims/find-claim';
import { publishClaim } from '../../src/lib/server/services/claims/publish-claim';
import { showClaim } from '../../src/lib/server/services/claims/show-claim';
import { showPublicClaim } from '../../src/lib/server/services/claims/show-public-claim';
import { listNews } from '../../src/lib/server/services/notifications/list-news';
import { acceptSubmission } from '../../src/lib/server/services/tasks/accept-submission';
import { returnSubmission } from '../../src/lib/server/services/tasks/return-submission';
import { claimReproductions } from '../../src/lib/server/services/tasks/submission-views';
import { submitTask } from '../../src/lib/server/services/tasks/submit-task';
import { solved } from '../support/certificates';
import { bibtexOf, claimFields } from '../support/service';
import { foundValue, openTaskWorld, type TaskWorld } from '../support/task-world';

let world: TaskWorld;
beforeEach(async () => {
	world = await openTaskWorld();
});
afterEach(() => world.end());

const recordOf = async (claim: number) =>
	claimReproductions(world.db.read, await findClaim(world.db.read, world.as.observer, claim));
const log = new TextEncoder().encode('level 2: 0.70711\n');
const file = { name: 'run.log', bytes: log };

describe('the record of a claim', () => {
	it('says who found what, with which program and files, and who accepted it when', async () => {
		const claim = await world.openClaim();
		const task = await world.openTask(claim);
		await submitTask(world.wren, task, foundValue('0.9'));
		await returnSubmission(world.as.maintainer, task, 'Of another state.');
		await submitTask(world.wren, task, foundValue('0.70711', { method: 'own cuts' }), [file]);
		expect(await recordOf(claim)).toEqual([]);
		await acceptSubmission(world.as.maintainer, task);
		const [found, ...more] = await recordOf(claim);
		expect(more).toEqual([]);
		expect(found).toMatchObject({
			taskNumber: task,
			state: 'accepted',
			printed: '0.70711',
			program: 'own program',
			programVersion: '2.1',
			method: 'own cuts',
			by: { name: 'Wren Aldous' },
			decidedBy: { name: 'Mae Maintainer' },
			files: [{ name: 'run.log', sha256: createHash('sha256').update(log).digest('hex') }]
		});
		expect(Date.parse(found?.decidedAt ?? '')).toBeGreaterThan(Date.now() - 60_000);
	});

	it('keeps what a certificate excluded, and has the certificate as soon as it is checked', async () => {
		const fields = claimFields({
			quantity: 'npa',
			level: '1',
			printed: '2.9',
			bibtex: bibtexOf(9)
		});
		const { number: claim } = await enterClaim(world.as.member, fields);
		const value = await world.openTask(claim);
		await submitTask(world.wren, value, foundValue('2.9'));
		await acceptSubmission(world.as.maintainer, value);
		const certified = await world.openTask(claim);
		// Tsirelson 1980: level 1 proves at most 2 sqrt 2 of CHSH.
		const certificate = await solved({ family: { name: 'chsh' }, quantity: 'npa', level: 1 });
		await submitTask(world.wren, certified, { kind: 'certificate', certificate });
		await submitTask(world.wren, await world.openTask(claim, { kind: 'other' }), {
			kind: 'statement',
			comment: 'Asked, and no answer yet.'
		});
		expect(await recordOf(claim)).toMatchObject([
			{
				taskNumber: value,
				state: 'contradicted',
				decision: expect.stringContaining('Contradicts'),
				decidedBy: { name: 'Mae Maintainer' }
			},
			{ taskNumber: certified, state: 'waiting', check: { accepted: true } }
		]);
		// Who handed it in and who accepted it are told; the latter vouched for it.
		for (const ctx of [world.wren, world.as.maintainer]) {
			expect(await world.toldTo(ctx)).toContain('task-returned');
		}
	});

	it('is for the group: the public reads that a person’s reproduction decided, and no name', async () => {
		const claim = await world.openClaim();
		const task = await world.openTask(claim);
		await submitTask(world.wren, task, foundValue('0.70711'), [file]);
		await acceptSubmission(world.as.maintainer, task);
		await publishClaim(world.as.maintainer, claim);
		const { id } = await showClaim(world.as.member, claim);
		const shown = await showPublicClaim(world.anonymous, id);
		expect(shown.verdict.reason).toContain('rests on an accepted reproduction');
		const [record] = await recordOf(claim);
		expect(shown.reproducedAt).toBe(record?.decidedAt);
		expect(shown.reproducedAt).not.toBeNull();
		expect(JSON.stringify(shown)).not.toMatch(/Wren|Mae |run\.log|own program/);
	});
});

describe('who entered a claim', () => {
	const accepted = async (claim: number, printed: string, by = world.wren) => {
		const task = await world.openTask(claim);
		await submitTask(by, task, foundValue(printed));
		await acceptSubmission(world.as.maintainer, task);
		return task;
	};
	const mailed = async (kind: 'task-accepted' | 'discrepancy' | 'settled') =>
		(
			await world.db.read
				.select()
				.from(outbox)
				.where(and(eq(outbox.kind, kind), eq(outbox.userId, world.as.member.actor.id)))
		).length;

	it('reads in the list, without a mail, that a reproduction settled it as an agreement', async () => {
		const claim = await world.openClaim();
		const task = await accepted(claim, '0.70711');
		const { items } = await listNews(world.as.member, 1);
		expect(items).toMatchObject([
			{
				kind: 'task-accepted',
				text: `Mae Maintainer accepted task ${task} on claim ${claim}.`,
				detail: `Claim ${claim} agrees now, with what was found.`
			}
		]);
		expect(await mailed('task-accepted')).toBe(0);
		// Another that says the same settles nothing any more.
		await accepted(claim, '0.7071');
		expect((await listNews(world.as.member, 1)).items).toHaveLength(1);
	});

	it('reads so when a certificate settled it, once', async () => {
		const fields = { relation: '<=', printed: '2.9', quantity: 'npa', level: '1' } as const;
		const { number } = await enterClaim(world.as.member, claimFields(fields));
		const task = await world.openTask(number);
		const certificate = await solved({ family: { name: 'chsh' }, quantity: 'npa', level: 1 });
		await submitTask(world.wren, task, { kind: 'certificate', certificate });
		await acceptSubmission(world.as.maintainer, task);
		const { items } = await listNews(world.as.member, 1);
		expect(items.map(({ text, detail }) => [text, detail])).toEqual([
			[
				`Wren Aldous submitted task ${task} on claim ${number}.`,
				`Claim ${number} agrees now, with what was found.`
			]
		]);
	});

	it('is told once when it was their own reproduction', async () => {
		const claim = await world.openClaim();
		await accepted(claim, '0.70711', world.as.member);
		expect(await world.toldTo(world.as.member)).toEqual(['task-accepted']);
		expect(await mailed('task-accepted')).toBe(1);
	});

	it('is mailed a discrepancy by a reproduction, and its end as settled', async () => {
		const claim = await world.openClaim();
		await accepted(claim, '0.8000');
		expect(await mailed('discrepancy')).toBe(1);
		await world.db.write((tx) =>
			tx
				.update(notifications)
				.set({ readAt: new Date() })
				.where(eq(notifications.kind, 'discrepancy'))
		);
		const { input } = await showClaim(world.as.member, claim);
		await editClaim(world.as.member, claim, 1, { ...input, printed: '0.80' });
		expect(await mailed('settled')).toBe(1);
		expect(await world.toldTo(world.as.member)).toEqual(['discrepancy', 'settled']);
	});
});

import { and, eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import type { Role } from '../../src/lib/ledger/roles';
import type { GroupContext } from '../../src/lib/server/context';
import { audit, notifications, tasks } from '../../src/lib/server/db/schema';
import { editClaim } from '../../src/lib/server/services/claims/edit-claim';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { findClaim } from '../../src/lib/server/services/claims/find-claim';
import { ledgerRows } from '../../src/lib/server/services/claims/ledger-rows';
import { proposeClaim } from '../../src/lib/server/services/claims/propose-claim';
import { publishClaim } from '../../src/lib/server/services/claims/publish-claim';
import { showClaim } from '../../src/lib/server/services/claims/show-claim';
import { showPublicClaim } from '../../src/lib/server/services/claims/show-public-claim';
import { unpublishClaim } from '../../src/lib/server/services/claims/unpublish-claim';
import { withdrawClaim } from '../../src/lib/server/services/claims/withdraw-claim';
import { showHome } from '../../src/lib/server/services/home/show-home';
import { confirmTranscription } from '../../src/lib/server/services/transcriptions/confirm-transcription';
import { recordTranscriptionCheck } from '../../src/lib/server/services/transcriptions/record-transcription-check';
import { showTranscription } from '../../src/lib/server/services/transcriptions/show-transcription';
import { voidCheckOfTask } from '../../src/lib/server/services/transcriptions/void-check-of-task';
import { bibtexOf, claimFields, openServiceWorld, type ServiceWorld } from '../support/service';
import { addMember } from '../support/task-world';

let world: ServiceWorld;
beforeEach(async () => {
	world = await openServiceWorld();
});
afterEach(() => world.close());

const RIGHT = { valueMatches: 'yes', locatorMatches: 'yes', inequalityMatches: 'yes' } as const;
const WRONG = { ...RIGHT, valueMatches: 'no' } as const;
const conflict = { code: 'conflict' };
const forbidden = { code: 'forbidden' };
const notFound = { code: 'not-found' };

const compare = (ctx: GroupContext, number: number, version = 1, answers = RIGHT as object) =>
	confirmTranscription(ctx, number, { ...RIGHT, ...answers, note: '', version });
const wrong = (ctx: GroupContext, number: number, note: string, version = 1) =>
	confirmTranscription(ctx, number, { ...WRONG, note, version });

/** CHSH's quantum maximum with two digits swapped; 2 sqrt 2 = 2.828427... by Tsirelson (1980). */
const SWAPPED = claimFields({ printed: '2.8248' });

async function discrepancy(ctx: GroupContext, fields = SWAPPED) {
	const entered = await enterClaim(ctx, fields);
	await world.recompute();
	return entered;
}

const confirmedOf = async (number: number) =>
	(await showClaim(world.as.observer, number)).confirmed;
const told = (role: Role) =>
	world.db.read
		.select()
		.from(notifications)
		.where(
			and(
				eq(notifications.userId, world.as[role].actor.id),
				eq(notifications.kind, 'transcription')
			)
		);

describe('comparing a claim with its paper', () => {
	it('confirms this version, and tells who entered it', async () => {
		const { number, id } = await discrepancy(world.as.member);
		expect(await showTranscription(world.as.maintainer, number)).toMatchObject({
			confirmed: false,
			checks: [],
			ownClaim: false,
			mayConfirm: true
		});
		expect(await compare(world.as.maintainer, number)).toEqual({ confirmed: true });
		expect(await showTranscription(world.as.member, number)).toMatchObject({
			confirmed: true,
			checks: [{ by: { name: 'Mae Maintainer' }, claimVersion: 1, current: true, note: '' }],
			ownClaim: true,
			mayConfirm: false
		});
		expect(await told('member')).toMatchObject([
			{ claimId: id, text: 'As in the paper: value, locator and inequality.' }
		]);
		const [row] = await world.db.read
			.select()
			.from(audit)
			.where(eq(audit.action, 'claim.transcription-confirmed'));
		expect(row).toMatchObject({
			entityId: id,
			actorId: world.as.maintainer.actor.id,
			before: { confirmedBy: null, confirmedVersion: null },
			after: { confirmedBy: world.as.maintainer.actor.id, confirmedVersion: 1 }
		});
		const { history } = await showClaim(world.as.observer, number);
		expect(history[0]).toMatchObject({
			who: 'Mae Maintainer',
			text: 'Compared with the paper: all as printed'
		});
	});

	it('is nothing for who entered it, an observer or another group', async () => {
		const { number } = await discrepancy(world.as.maintainer);
		await expect(compare(world.as.maintainer, number)).rejects.toMatchObject(forbidden);
		await expect(compare(world.as.observer, number)).rejects.toMatchObject(forbidden);
		await expect(compare(world.outsider, number)).rejects.toMatchObject(notFound);
		expect(await confirmedOf(number)).toBe(false);
	});

	it('is nothing for who edited it, in the version compared or an earlier one', async () => {
		const { number } = await discrepancy(world.as.member);
		await editClaim(world.as.maintainer, number, 1, { ...SWAPPED, locator: 'eq. (8)' });
		await expect(compare(world.as.maintainer, number, 2)).rejects.toMatchObject(forbidden);
		await editClaim(world.as.owner, number, 2, { ...SWAPPED, locator: 'eq. (9)' });
		await expect(compare(world.as.owner, number, 3)).rejects.toMatchObject(forbidden);
		await expect(compare(world.as.member, number, 3)).rejects.toMatchObject(forbidden);
		await expect(compare(world.as.maintainer, number, 3)).rejects.toMatchObject(forbidden);
		const second = await addMember(world, 'Wren Aldous');
		expect(await compare(second, number, 3)).toEqual({ confirmed: true });
		// Both who entered it and who last wrote it are told.
		expect(await told('member')).toHaveLength(1);
		expect(await told('owner')).toHaveLength(1);
	});

	it('that finds something wrong is seen in the lists of the group until it is corrected', async () => {
		const { number } = await discrepancy(world.as.member);
		const other = await discrepancy(
			world.as.member,
			claimFields({ printed: '2.8248', bibtex: bibtexOf(2) })
		);
		const rowOf = async (n = number) => (await ledgerRows(world.as.observer, [n]))[0];
		expect(await rowOf()).toMatchObject({ disputed: false, wantsTask: true });
		await wrong(world.as.owner, number, 'It prints 2.8284.');
		expect(await rowOf()).toMatchObject({ disputed: true, wantsTask: false });
		expect(await rowOf(other.number)).toMatchObject({ disputed: false, wantsTask: true });
		// Changed last, yet behind what may be a real discrepancy.
		const { discrepancies } = await showHome(world.as.member);
		expect(discrepancies.map(({ row }) => [row.number, row.disputed])).toEqual([
			[other.number, false],
			[number, true]
		]);
		await compare(world.as.maintainer, number);
		expect((await rowOf())?.disputed).toBe(false);
		await wrong(world.as.owner, number, 'It prints 2.8284.');
		await editClaim(world.as.member, number, 1, { ...SWAPPED, locator: 'eq. (8)' });
		expect(await rowOf()).toMatchObject({ disputed: false, wantsTask: true });
	});

	it('that finds something wrong says what, and takes a confirmation back', async () => {
		const { number } = await discrepancy(world.as.member);
		await compare(world.as.maintainer, number);
		await expect(wrong(world.as.owner, number, ' ')).rejects.toMatchObject({
			code: 'invalid',
			issues: [{ field: 'note' }]
		});
		expect(await confirmedOf(number)).toBe(true);
		expect(await wrong(world.as.owner, number, 'It prints 2.8284.')).toEqual({ confirmed: false });
		expect(await confirmedOf(number)).toBe(false);
		const { checks } = await showTranscription(world.as.member, number);
		expect(checks.map(({ valueMatches, note }) => [valueMatches, note])).toEqual([
			[false, 'It prints 2.8284.'],
			[true, '']
		]);
		expect((await told('member')).map(({ text }) => text)).toContain(
			'Not as in the paper: value. It prints 2.8284.'
		);
		await expect(publishClaim(world.as.owner, number)).rejects.toMatchObject(conflict);
	});

	it('asks for all three answers, each at its field', async () => {
		const { number } = await discrepancy(world.as.member);
		await expect(
			compare(world.as.maintainer, number, 1, { locatorMatches: '', inequalityMatches: '' })
		).rejects.toMatchObject({
			code: 'invalid',
			issues: [{ field: 'locatorMatches' }, { field: 'inequalityMatches' }]
		});
	});

	it('lapses with the next edit, and refuses a page opened before it', async () => {
		const { number } = await discrepancy(world.as.member);
		await compare(world.as.maintainer, number);
		await editClaim(world.as.member, number, 1, { ...SWAPPED, locator: 'eq. (8)' });
		expect(await showTranscription(world.as.maintainer, number)).toMatchObject({
			confirmed: false,
			checks: [{ claimVersion: 1, current: false }]
		});
		await expect(compare(world.as.maintainer, number, 1)).rejects.toMatchObject(conflict);
		await expect(publishClaim(world.as.maintainer, number)).rejects.toMatchObject({
			code: 'conflict',
			message: expect.stringContaining('compared again')
		});
	});

	it('counts no more once its task is returned; an earlier one then counts again', async () => {
		const { number } = await discrepancy(world.as.member);
		await compare(world.as.owner, number);
		const taskId = await taskOn(number);
		const claim = await findClaim(world.db.read, world.as.maintainer, number);
		const dispute = {
			valueMatches: true,
			locatorMatches: false,
			inequalityMatches: true,
			note: 'It is eq. (8).',
			taskId
		};
		await world.db.write((tx) => recordTranscriptionCheck(tx, world.as.maintainer, claim, dispute));
		expect(await confirmedOf(number)).toBe(false);
		const task = { id: taskId, claimId: claim.id };
		await world.db.write((tx) => voidCheckOfTask(tx, world.as.owner, task));
		expect(await showTranscription(world.as.member, number)).toMatchObject({
			confirmed: true,
			checks: [{ current: false }, { current: true }]
		});
	});

	it('is refused for a withdrawn claim', async () => {
		const { number } = await discrepancy(world.as.member);
		await withdrawClaim(world.as.member, number);
		await expect(compare(world.as.maintainer, number)).rejects.toMatchObject(conflict);
	});
});

async function taskOn(number: number): Promise<string> {
	const claim = await findClaim(world.db.read, world.as.owner, number);
	const at = new Date();
	await world.db.write((tx) =>
		tx.insert(tasks).values({
			id: 'task',
			groupId: claim.groupId,
			number: 1,
			claimId: claim.id,
			kind: 'confirm-transcription',
			state: 'submitted',
			createdBy: world.as.owner.actor.id,
			createdAt: at,
			updatedAt: at
		})
	);
	return 'task';
}

describe('a proposal', () => {
	it('is told to those who decide on it, each time it is made', async () => {
		const proposals = async () =>
			(await world.db.read.select().from(notifications)).filter(
				({ kind }) => kind === 'claim-proposed'
			);
		const { number, id } = await enterClaim(
			world.as.member,
			claimFields({ visibility: 'proposed' })
		);
		const deciders = [world.as.maintainer.actor.id, world.as.owner.actor.id].sort();
		const first = await proposals();
		expect(first.map(({ userId }) => userId).sort()).toEqual(deciders);
		expect(first[0]).toMatchObject({ claimId: id, actorId: world.as.member.actor.id });
		await unpublishClaim(world.as.maintainer, number);
		await proposeClaim(world.as.member, number);
		expect(await proposals()).toHaveLength(4);
		await publishClaim(world.as.maintainer, number);
		await editClaim(world.as.member, number, 1, claimFields({ locator: 'eq. (8)' }));
		expect(await proposals()).toHaveLength(6);
	});
});

describe('publishing a discrepancy', () => {
	it('waits for a second person; then who entered it may publish it too', async () => {
		const { number, id } = await discrepancy(world.as.maintainer);
		for (const ctx of [world.as.maintainer, world.as.owner]) {
			await expect(publishClaim(ctx, number)).rejects.toMatchObject({
				code: 'conflict',
				message: expect.stringContaining('has not happened yet')
			});
		}
		await compare(world.as.member, number);
		await publishClaim(world.as.maintainer, number);
		expect(await showPublicClaim(world.anonymous, id)).toMatchObject({
			verdict: { status: 'discrepancy' },
			wording:
				'It does not reproduce as entered. Value, locator and inequality were compared with the paper by a second person of the group.'
		});
	});

	it('hides a public claim that turns out to disagree until it is confirmed', async () => {
		const { number, id } = await enterClaim(world.as.maintainer, SWAPPED);
		await publishClaim(world.as.owner, number);
		expect((await showPublicClaim(world.anonymous, id)).verdict.status).toBe('open');
		await world.recompute();
		await expect(showPublicClaim(world.anonymous, id)).rejects.toMatchObject(notFound);
		await compare(world.as.member, number);
		expect((await showPublicClaim(world.anonymous, id)).confirmed).toBe(true);
		await wrong(world.as.owner, number, 'Table 1 prints 2.8284.');
		await expect(showPublicClaim(world.anonymous, id)).rejects.toMatchObject(notFound);
	});

	it('asks for no comparison where the claim agrees', async () => {
		const { number, id } = await discrepancy(world.as.member, claimFields());
		await publishClaim(world.as.maintainer, number);
		expect(await showPublicClaim(world.anonymous, id)).toMatchObject({
			confirmed: false,
			wording: null
		});
	});
});

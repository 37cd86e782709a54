import { and, eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import type { Role } from '../../src/lib/ledger/roles';
import type { GroupContext } from '../../src/lib/server/context';
import {
	audit,
	authorMessages,
	memberships,
	notifications,
	tasks
} from '../../src/lib/server/db/schema';
import { handleAuthorMessage } from '../../src/lib/server/services/author-messages/handle-author-message';
import { listAuthorMessages } from '../../src/lib/server/services/author-messages/list-author-messages';
import {
	MESSAGES_A_DAY,
	sendAuthorMessage
} from '../../src/lib/server/services/author-messages/send-author-message';
import { attachNotice } from '../../src/lib/server/services/claim-notices/attach-notice';
import { removeNotice } from '../../src/lib/server/services/claim-notices/remove-notice';
import { editClaim } from '../../src/lib/server/services/claims/edit-claim';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { findClaim } from '../../src/lib/server/services/claims/find-claim';
import { publishClaim } from '../../src/lib/server/services/claims/publish-claim';
import { showClaim } from '../../src/lib/server/services/claims/show-claim';
import { showPublicClaim } from '../../src/lib/server/services/claims/show-public-claim';
import { withdrawClaim } from '../../src/lib/server/services/claims/withdraw-claim';
import { showPublicReference } from '../../src/lib/server/services/references/show-public-reference';
import { confirmTranscription } from '../../src/lib/server/services/transcriptions/confirm-transcription';
import { recordTranscriptionCheck } from '../../src/lib/server/services/transcriptions/record-transcription-check';
import { showTranscription } from '../../src/lib/server/services/transcriptions/show-transcription';
import { voidCheckOfTask } from '../../src/lib/server/services/transcriptions/void-check-of-task';
import { bibtexOf, claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

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
			{ claimId: id, text: 'Value, locator and inequality are as in the paper.' }
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

	it('is nothing for who edited the version compared, but for who edited an earlier one', async () => {
		const { number } = await discrepancy(world.as.member);
		await editClaim(world.as.maintainer, number, 1, { ...SWAPPED, locator: 'eq. (8)' });
		await expect(compare(world.as.maintainer, number, 2)).rejects.toMatchObject(forbidden);
		await editClaim(world.as.owner, number, 2, { ...SWAPPED, locator: 'eq. (9)' });
		await expect(compare(world.as.owner, number, 3)).rejects.toMatchObject(forbidden);
		await expect(compare(world.as.member, number, 3)).rejects.toMatchObject(forbidden);
		expect(await compare(world.as.maintainer, number, 3)).toEqual({ confirmed: true });
		// Both who entered it and who last wrote it are told.
		expect(await told('member')).toHaveLength(1);
		expect(await told('owner')).toHaveLength(1);
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
			'Not as in the paper: the value. It prints 2.8284.'
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
		await world.db.write((tx) => voidCheckOfTask(tx, world.as.owner, taskId));
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

describe('an erratum or a newer version', () => {
	it('stands with the claim, on the public pages too, with its DOI and no ids of ours', async () => {
		const { number, id } = await discrepancy(world.as.member);
		const bibtex = bibtexOf(2).replace('year ', 'annote = {my remark},\n  year ');
		await attachNotice(world.as.member, number, {
			kind: 'erratum',
			bibtex,
			note: 'Corrects\neq. (7)'
		});
		const notice = (await showClaim(world.as.observer, number)).notices[0];
		expect(notice).toMatchObject({ kind: 'erratum', note: 'Corrects eq. (7)' });
		await compare(world.as.maintainer, number);
		await publishClaim(world.as.maintainer, number);
		const shown = await showPublicClaim(world.anonymous, id);
		const paper = await showPublicReference(world.anonymous, shown.reference.id);
		for (const { notices } of [shown, paper]) {
			expect(notices).toMatchObject([{ kind: 'erratum', reference: { doi: '10.5555/jip.2' } }]);
			expect(JSON.stringify(notices)).not.toMatch(/remark|bibtex/);
			expect(JSON.stringify(notices)).not.toContain(notice?.reference.id);
		}
		expect(paper.claimRows[0]?.notices).toEqual(['erratum']);
		await removeNotice(world.as.maintainer, number, notice?.id ?? '');
		expect((await showPublicClaim(world.anonymous, id)).notices).toEqual([]);
		await expect(removeNotice(world.as.maintainer, number, notice?.id ?? '')).rejects.toMatchObject(
			notFound
		);
		const words = (await showClaim(world.as.observer, number)).history.map(({ text }) => text);
		expect(words).toEqual(expect.arrayContaining(['Erratum attached', 'Erratum removed']));
	});

	it('is another paper, of the group, and attached once', async () => {
		const { number } = await discrepancy(world.as.member);
		const { number: other } = await enterClaim(
			world.as.member,
			claimFields({ bibtex: bibtexOf(3) })
		);
		const paper = (await showClaim(world.as.member, other)).reference.id;
		const attach = (fields: object) => attachNotice(world.as.maintainer, number, fields);
		const atField = (field: string) => ({ code: 'invalid', issues: [{ field }] });
		await expect(attach({})).rejects.toMatchObject(atField('bibtex'));
		await expect(attach({ bibtex: 'no entry' })).rejects.toMatchObject(atField('bibtex'));
		await expect(attach({ bibtex: bibtexOf() })).rejects.toMatchObject(atField('bibtex'));
		await expect(attach({ referenceId: 'nowhere' })).rejects.toMatchObject(atField('referenceId'));
		await expect(attach({ referenceId: paper, bibtex: bibtexOf(4) })).rejects.toMatchObject(
			atField('referenceId')
		);
		await attach({ kind: 'newer-version', referenceId: paper });
		await expect(attach({ kind: 'newer-version', bibtex: bibtexOf(3) })).rejects.toMatchObject(
			atField('bibtex')
		);
		await attach({ kind: 'erratum', referenceId: paper });
	});

	it('is attached by who entered the claim and by maintainers', async () => {
		const { number } = await discrepancy(world.as.maintainer);
		for (const ctx of [world.as.member, world.as.observer]) {
			await expect(attachNotice(ctx, number, { bibtex: bibtexOf(2) })).rejects.toMatchObject(
				forbidden
			);
		}
		await expect(
			attachNotice(world.outsider, number, { bibtex: bibtexOf(2) })
		).rejects.toMatchObject(notFound);
		const { id } = await attachNotice(world.as.owner, number, { bibtex: bibtexOf(2) });
		await expect(removeNotice(world.as.member, number, id)).rejects.toMatchObject(forbidden);
	});
});

const MESSAGE = {
	name: 'Mira Arden',
	email: 'mira@institute.example',
	message: 'Table 2 has a misprint.\nIt should read 2.8284.',
	link: '10.5555/jip.2'
};

describe('what an author writes', () => {
	async function published() {
		const entered = await enterClaim(
			world.as.member,
			claimFields({ quantity: 'local', printed: '2' })
		);
		await publishClaim(world.as.maintainer, entered.number);
		return entered;
	}

	it('reaches maintainers and owners, and nobody else', async () => {
		const { number, id } = await published();
		await sendAuthorMessage(world.anonymous, id, MESSAGE);
		const [message] = await listAuthorMessages(world.as.owner, number);
		expect(message).toMatchObject({
			name: 'Mira Arden',
			email: 'mira@institute.example',
			message: `${MESSAGE.message}\n\n10.5555/jip.2`,
			handledBy: null
		});
		for (const ctx of [world.as.member, world.as.observer]) {
			await expect(listAuthorMessages(ctx, number)).rejects.toMatchObject(forbidden);
		}
		await expect(listAuthorMessages(world.outsider, number)).rejects.toMatchObject(notFound);
		const rows = await world.db.read
			.select()
			.from(notifications)
			.where(eq(notifications.kind, 'author-message'));
		expect(rows.map(({ userId }) => userId).sort()).toEqual(
			[world.as.maintainer.actor.id, world.as.owner.actor.id].sort()
		);
		expect(rows[0]).toMatchObject({ actorId: null, claimId: id, messageId: message?.id });
		for (const shown of [
			await showPublicClaim(world.anonymous, id),
			await showClaim(world.as.observer, number),
			await world.db.read.select().from(audit)
		]) {
			expect(JSON.stringify(shown)).not.toMatch(/Mira Arden|institute\.example|misprint/);
		}
	});

	it('is taken for public claims only, also when it is sent while signed in', async () => {
		const hidden = await enterClaim(world.as.member, claimFields());
		await expect(sendAuthorMessage(world.anonymous, hidden.id, MESSAGE)).rejects.toMatchObject(
			notFound
		);
		const { id } = await published();
		await sendAuthorMessage(world.as.owner, id, MESSAGE);
		const rows = await world.db.read.select().from(notifications);
		expect(rows.map(({ userId }) => userId)).toContain(world.as.owner.actor.id);
	});

	it('is dealt with once, by a maintainer', async () => {
		const { number, id } = await published();
		await sendAuthorMessage(world.anonymous, id, MESSAGE);
		const [message] = await listAuthorMessages(world.as.owner, number);
		const messageId = message?.id ?? '';
		await expect(handleAuthorMessage(world.as.member, messageId)).rejects.toMatchObject(forbidden);
		await expect(handleAuthorMessage(world.outsider, messageId)).rejects.toMatchObject(notFound);
		await handleAuthorMessage(world.as.maintainer, messageId);
		await handleAuthorMessage(world.as.owner, messageId);
		expect((await listAuthorMessages(world.as.owner, number))[0]).toMatchObject({
			handledBy: { name: 'Mae Maintainer' }
		});
		const rows = await world.db.read
			.select()
			.from(audit)
			.where(eq(audit.action, 'author-message.handled'));
		expect(rows).toHaveLength(1);
	});

	it(`is taken ${MESSAGES_A_DAY} times a day for one claim`, async () => {
		const { id } = await published();
		for (let i = 0; i < MESSAGES_A_DAY; i++) await sendAuthorMessage(world.anonymous, id, MESSAGE);
		await expect(sendAuthorMessage(world.anonymous, id, MESSAGE)).rejects.toMatchObject({
			code: 'rate-limited',
			retryAfterSeconds: expect.toSatisfy((seconds) => seconds > 86_000 && seconds <= 86_400)
		});
		const tomorrow = { ...world.anonymous, now: () => new Date(Date.now() + 86_500_000) };
		await sendAuthorMessage(tomorrow, id, MESSAGE);
		expect(await world.db.read.select().from(authorMessages)).toHaveLength(MESSAGES_A_DAY + 1);
	});

	it('reaches who maintains the group when it is written', async () => {
		const { id } = await published();
		await world.db.write((tx) =>
			tx
				.update(memberships)
				.set({ role: 'member' })
				.where(eq(memberships.userId, world.as.maintainer.actor.id))
		);
		await sendAuthorMessage(world.anonymous, id, MESSAGE);
		const rows = await world.db.read.select().from(notifications);
		expect(rows.filter(({ messageId }) => messageId).map(({ userId }) => userId)).toEqual([
			world.as.owner.actor.id
		]);
	});
});

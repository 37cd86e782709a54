import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import type { GroupContext } from '../../src/lib/server/context';
import { audit, authorMessages, memberships, notifications } from '../../src/lib/server/db/schema';
import { handleAuthorMessage } from '../../src/lib/server/services/author-messages/handle-author-message';
import { reopenAuthorMessage } from '../../src/lib/server/services/author-messages/reopen-author-message';
import { listAuthorMessages } from '../../src/lib/server/services/author-messages/list-author-messages';
import {
	MESSAGES_A_DAY,
	sendAuthorMessage
} from '../../src/lib/server/services/author-messages/send-author-message';
import { attachNotice } from '../../src/lib/server/services/claim-notices/attach-notice';
import { removeNotice } from '../../src/lib/server/services/claim-notices/remove-notice';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { publishClaim } from '../../src/lib/server/services/claims/publish-claim';
import { showClaim } from '../../src/lib/server/services/claims/show-claim';
import { showPublicClaim } from '../../src/lib/server/services/claims/show-public-claim';
import { showPublicReference } from '../../src/lib/server/services/references/show-public-reference';
import { confirmTranscription } from '../../src/lib/server/services/transcriptions/confirm-transcription';
import { bibtexOf, claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
beforeEach(async () => {
	world = await openServiceWorld();
});
afterEach(() => world.close());

const forbidden = { code: 'forbidden' };
const notFound = { code: 'not-found' };

/** CHSH's quantum maximum with two digits swapped; 2 sqrt 2 = 2.828427... by Tsirelson (1980). */
async function discrepancy(ctx: GroupContext) {
	const entered = await enterClaim(ctx, claimFields({ printed: '2.8248' }));
	await world.recompute();
	return entered;
}

/** A second person finds it to be the paper's. */
const compare = (ctx: GroupContext, number: number) =>
	confirmTranscription(ctx, number, {
		valueMatches: 'yes',
		locatorMatches: 'yes',
		inequalityMatches: 'yes',
		note: '',
		version: 1
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

	it('is taken up again by a maintainer, and dealt with anew', async () => {
		const { number, id } = await published();
		await sendAuthorMessage(world.anonymous, id, MESSAGE);
		const [message] = await listAuthorMessages(world.as.owner, number);
		const messageId = message?.id ?? '';
		await reopenAuthorMessage(world.as.maintainer, messageId);
		await handleAuthorMessage(world.as.maintainer, messageId);
		await expect(reopenAuthorMessage(world.as.member, messageId)).rejects.toMatchObject(forbidden);
		await expect(reopenAuthorMessage(world.outsider, messageId)).rejects.toMatchObject(notFound);
		await reopenAuthorMessage(world.as.owner, messageId);
		expect((await listAuthorMessages(world.as.owner, number))[0]).toMatchObject({
			handledBy: null,
			handledAt: null
		});
		await handleAuthorMessage(world.as.owner, messageId);
		expect((await listAuthorMessages(world.as.owner, number))[0]).toMatchObject({
			handledBy: { name: 'Olin Owner' }
		});
		const rows = await world.db.read
			.select({ action: audit.action })
			.from(audit)
			.where(eq(audit.entityId, messageId));
		expect(rows.map(({ action }) => action).sort()).toEqual([
			'author-message.handled',
			'author-message.handled',
			'author-message.received',
			'author-message.reopened'
		]);
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

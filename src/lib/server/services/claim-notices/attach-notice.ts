import { and, count, eq } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import {
	noticeInput,
	PUBLICATION_LIMITS,
	type NoticeInput
} from '../../../schemas/publication-input';
import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import { claimNotices, references } from '../../db/schema';
import { ServiceError } from '../../errors';
import { newId } from '../../ids';
import { readReference } from '../../references/read-reference';
import type { ParsedReference } from '../../references/parse-bibtex';
import { recordAudit } from '../audit';
import { findClaim, isOwn, type ClaimRow } from '../claims/find-claim';
import { parseInput } from '../parse-input';
import { addReference } from '../references/add-reference';

const wrong = (field: keyof NoticeInput, message: string) =>
	new ServiceError('invalid', message, [{ field, message }]);

/** Attaches an erratum or a newer version of its paper to a claim; the public sees it too. */
export async function attachNotice(
	ctx: GroupContext,
	number: number,
	input: Partial<NoticeInput>
): Promise<{ id: string }> {
	const { kind, referenceId, bibtex, note } = parseInput(noticeInput, input);
	requireMay(ctx, await findClaim(ctx.db.read, ctx, number));
	if (referenceId && bibtex) {
		throw wrong('referenceId', 'Choose a paper or paste BibTeX, not both.');
	}
	const parsed = referenceId ? null : await parse(bibtex);
	const id = newId();
	await ctx.db.write(async (tx) => {
		const claim = await findClaim(tx, ctx, number);
		requireMay(ctx, claim);
		const field = parsed ? 'bibtex' : 'referenceId';
		const paperId = parsed
			? (await addReference(tx, ctx, bibtex, parsed)).id
			: await knownPaper(tx, ctx, referenceId);
		if (paperId === claim.referenceId) {
			throw wrong(field, 'This is the paper the claim was taken from; give the other one.');
		}
		await requireRoom(tx, claim, kind, paperId, field);
		const oneLineNote = note.replace(/\s+/g, ' ');
		await tx.insert(claimNotices).values({
			id,
			claimId: claim.id,
			kind,
			referenceId: paperId,
			note: oneLineNote,
			createdBy: ctx.actor.id,
			createdAt: ctx.now()
		});
		await recordAudit(tx, ctx, {
			action: 'claim.notice-attached',
			entity: 'claim',
			entityId: claim.id,
			groupId: ctx.group.id,
			after: { noticeId: id, kind, referenceId: paperId, note: oneLineNote }
		});
	});
	return { id };
}

function requireMay(ctx: GroupContext, claim: ClaimRow): void {
	if (may(ctx.role, 'attach-notice', { own: isOwn(ctx, claim) })) return;
	throw new ServiceError(
		'forbidden',
		'Only who entered a claim and maintainers attach an erratum or a newer version.'
	);
}

async function parse(bibtex: string): Promise<ParsedReference> {
	if (!bibtex) throw wrong('bibtex', 'Choose a paper of the group or paste its BibTeX.');
	const reading = await readReference(bibtex);
	if (!reading.ok) throw wrong('bibtex', reading.message);
	return reading.reference;
}

async function knownPaper(tx: Transaction, ctx: GroupContext, id: string): Promise<string> {
	const [row] = await tx
		.select({ id: references.id })
		.from(references)
		.where(and(eq(references.groupId, ctx.group.id), eq(references.id, id)));
	if (!row) throw wrong('referenceId', 'The group has no such paper; choose one of the list.');
	return row.id;
}

async function requireRoom(
	tx: Transaction,
	claim: ClaimRow,
	kind: NoticeInput['kind'],
	paperId: string,
	field: keyof NoticeInput
): Promise<void> {
	const [same] = await tx
		.select({ id: claimNotices.id })
		.from(claimNotices)
		.where(
			and(
				eq(claimNotices.claimId, claim.id),
				eq(claimNotices.kind, kind),
				eq(claimNotices.referenceId, paperId)
			)
		);
	if (same) throw wrong(field, 'This paper is attached already.');
	const [held] = await tx
		.select({ number: count() })
		.from(claimNotices)
		.where(eq(claimNotices.claimId, claim.id));
	if ((held?.number ?? 0) >= PUBLICATION_LIMITS.notices) {
		throw new ServiceError(
			'conflict',
			`A claim holds at most ${PUBLICATION_LIMITS.notices} errata and newer versions; remove one first.`
		);
	}
}

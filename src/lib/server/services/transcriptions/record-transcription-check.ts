import { comparisonWords } from '../../../ledger/comparison';
import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import { transcriptionChecks } from '../../db/schema';
import { newId } from '../../ids';
import { recordAudit } from '../audit';
import type { ClaimRow } from '../claims/find-claim';
import { notify } from '../notifications/notify';
import { requireMayConfirm } from './may-confirm';
import { requireNote, type Comparison } from './read-comparison';
import { settleConfirmation } from './settle-confirmation';
import { editorOf } from './wrote-any';

export interface TranscriptionCheck extends Comparison {
	/** The task it was done for; null: done from the claim's page. */
	readonly taskId: string | null;
}

/**
 * Records that a second person compared the claim, as it now stands, with its paper. All right
 * confirms this version; anything wrong takes a confirmation back, and whoever entered or edited
 * the claim is told either way.
 * @throws ServiceError forbidden for who wrote it; conflict when it is withdrawn; invalid when
 * something is wrong and no note says what
 */
export async function recordTranscriptionCheck(
	tx: Transaction,
	ctx: GroupContext,
	claim: ClaimRow,
	check: TranscriptionCheck
): Promise<{ id: string; confirmed: boolean }> {
	await requireMayConfirm(tx, ctx, claim);
	requireNote(check);
	const now = ctx.now();
	const id = newId();
	const { valueMatches, locatorMatches, inequalityMatches, taskId } = check;
	const note = check.note.trim();
	await tx.insert(transcriptionChecks).values({
		id,
		claimId: claim.id,
		claimVersion: claim.version,
		valueMatches,
		locatorMatches,
		inequalityMatches,
		note,
		taskId,
		checkedBy: ctx.actor.id,
		checkedAt: now
	});
	const after = await settleConfirmation(tx, claim, now);
	const confirmed = valueMatches && locatorMatches && inequalityMatches;
	const { confirmedBy, confirmedVersion } = claim;
	await recordAudit(tx, ctx, {
		action: confirmed ? 'claim.transcription-confirmed' : 'claim.transcription-disputed',
		entity: 'claim',
		entityId: claim.id,
		groupId: ctx.group.id,
		before: { confirmedBy, confirmedVersion },
		after: { ...after, valueMatches, locatorMatches, inequalityMatches, note, taskId }
	});
	const editor = await editorOf(tx, claim);
	await notify(tx, ctx, {
		kind: 'transcription',
		groupId: ctx.group.id,
		recipients: [claim.createdBy, ...(editor ? [editor] : [])],
		event: id,
		claimId: claim.id,
		...(taskId ? { taskId } : {}),
		text: [comparisonWords(check), note].filter(Boolean).join(' ')
	});
	return { id, confirmed };
}

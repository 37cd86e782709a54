import { submissionInput, type SubmissionInput } from '../../../schemas/task-input';
import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import { submissions } from '../../db/schema';
import { newId } from '../../ids';
import { deriveClaim } from '../claims/derive-claim';
import type { ClaimRow } from '../claims/find-claim';
import { quantityKey } from '../claims/quantity-key';
import {
	discardFiles,
	recordFiles,
	storeFiles,
	type StoredFile,
	type UploadedFile
} from '../evidence-files/keep-files';
import { maintainersOf } from '../groups/maintainers-of';
import { parseInput } from '../parse-input';
import { recordTranscriptionCheck } from '../transcriptions/record-transcription-check';
import { claimOfTask, findTask } from './find-task';
import { requireClaimAsSeen } from './require-claim-as-seen';
import { readSubmission, type ReadSubmission } from './read-submission';
import { asActor, refuseStep, stepTask } from './step-task';
import { tell } from './tell';
import { tellAgreement } from './tell-agreement';

/**
 * Hands in what was found. A certificate is judged by its check at once; anything else waits for
 * somebody else to accept it. Nothing is kept when anything of it is refused.
 * @throws ServiceError forbidden; conflict, also when the claim was edited meanwhile; invalid with an
 *   issue for each field at fault
 */
export async function submitTask(
	ctx: GroupContext,
	number: number,
	input: Partial<SubmissionInput>,
	files: readonly UploadedFile[] = []
): Promise<{ id: string; renamed: RenamedFile[] }> {
	const { claimVersion, ...asks } = parseInput(submissionInput, input);
	const { read } = ctx.db;
	const task = await findTask(read, ctx, number);
	// Asked again in the transaction; here so that nothing is checked or stored in vain.
	await refuseStep(read, task, { kind: 'submit' }, asActor(ctx));
	const claim = await claimOfTask(read, task);
	await requireClaimAsSeen(read, claim, claimVersion ?? claim.version);
	const found = await readSubmission(ctx, task, claim, asks, files.length);
	const stored = await storeFiles(ctx, files);
	try {
		const { id } = await ctx.db.write((tx) => write(tx, ctx, { number, claim, found, stored }));
		return { id, renamed: stored.flatMap(renamedFrom) };
	} catch (error) {
		await discardFiles(stored);
		throw error;
	}
}

/** A file that could not keep the name it came with. */
export interface RenamedFile {
	readonly from: string;
	readonly to: string;
}

/** What it was called, on one line and no longer than a name may be: it goes back into a page. */
function renamedFrom({ calledBefore, name }: StoredFile): RenamedFile[] {
	if (calledBefore === null) return [];
	const from = Array.from(calledBefore.replace(/[\p{C}\s]+/gu, ' ').trim());
	return [{ from: from.length > 100 ? `${from.slice(0, 99).join('')}…` : from.join(''), to: name }];
}

interface Handed {
	readonly number: number;
	/** As it was when the submission was read. */
	readonly claim: ClaimRow;
	readonly found: ReadSubmission;
	readonly stored: readonly StoredFile[];
}

async function write(
	tx: Transaction,
	ctx: GroupContext,
	{ number, claim, found, stored }: Handed
): Promise<{ id: string }> {
	const before = await findTask(tx, ctx, number);
	const current = await claimOfTask(tx, before);
	await requireClaimAsSeen(tx, current, claim.version);
	const id = newId();
	const { columns, comparison } = found;
	const { kind, printed, relation } = columns;
	const { task } = await stepTask(tx, ctx, before, { kind: 'submit' }, asActor(ctx), {
		audit: 'task.submitted',
		after: { submissionId: id, submission: kind, printed, relation, files: stored.length }
	});
	await tx.insert(submissions).values({
		...columns,
		id,
		taskId: task.id,
		claimId: claim.id,
		quantityKey: quantityKey(current),
		submittedBy: ctx.actor.id,
		submittedAt: ctx.now()
	});
	await recordFiles(tx, ctx, id, stored);
	if (comparison) {
		await recordTranscriptionCheck(tx, ctx, current, { ...comparison, taskId: task.id });
	}
	if (kind === 'certificate') await deriveClaim(tx, claim.id, ctx.now());
	await tell(tx, ctx, 'task-submitted', task, await maintainersOf(tx, task.groupId));
	await tellAgreement(tx, ctx, 'task-submitted', task, current, ctx.actor.id);
	return { id };
}

import { createHash } from 'node:crypto';
import { eq, sum } from 'drizzle-orm';
import { TASK_LIMITS } from '../../../schemas/task-input';
import type { GroupContext } from '../../context';
import type { Reader, Transaction } from '../../db/client';
import { evidenceFiles, submissions } from '../../db/schema';
import { ServiceError } from '../../errors';
import { newId } from '../../ids';
import { log } from '../../log';
import { fileStore } from '../../storage/open-store';
import { recordAudit } from '../audit';
import { checkFile, type CheckedFile, type UploadedFile } from './check-file';

export type { UploadedFile } from './check-file';

/** A file whose bytes are in the storage, and whose row is still to be written. */
export interface StoredFile {
	readonly id: string;
	readonly name: string;
	/** What the browser called it, when the kept name is another. */
	readonly calledBefore: string | null;
	readonly mediaType: string;
	readonly bytes: number;
	readonly sha256: string;
}

/**
 * Checks files and puts their bytes into the storage; `recordFiles` then writes their rows in the
 * transaction of the submission, and `discardFiles` takes them back when that failed. Who may hand
 * in is the caller's to know, before.
 * @throws ServiceError invalid or too-large, with an issue of the field `files` for each bad one
 */
export async function storeFiles(
	ctx: GroupContext,
	files: readonly UploadedFile[]
): Promise<StoredFile[]> {
	if (files.length === 0) return [];
	if (files.length > TASK_LIMITS.files) {
		const message = `These are ${files.length} files; at most ${TASK_LIMITS.files} go with one submission. Pack some of them into a .zip.`;
		throw new ServiceError('invalid', message, [{ field: 'files', message }]);
	}
	const checked = await checkAll(files);
	const size = checked.reduce((total, { bytes }) => total + bytes.byteLength, 0);
	// Before anything is sent away; what counts is looked at again in the transaction.
	await assertQuota(ctx.db.read, ctx, size);
	const stored: StoredFile[] = [];
	try {
		for (const [i, file] of checked.entries()) {
			stored.push(await store(file, files[i]?.name ?? ''));
		}
	} catch (error) {
		log().error({ err: error, group: ctx.group.id }, 'storing evidence failed');
		await discardFiles(stored);
		const message = 'The files can’t be stored right now; try again in a minute.';
		throw new ServiceError('unavailable', message, [{ field: 'files', message }], 60);
	}
	return stored;
}

async function checkAll(files: readonly UploadedFile[]): Promise<CheckedFile[]> {
	const good: CheckedFile[] = [];
	const issues: { field: string; message: string }[] = [];
	let tooLarge = false;
	for (const [i, file] of files.entries()) {
		const result = await checkFile(file, i + 1);
		if (!('problem' in result)) good.push(result);
		else {
			issues.push({ field: 'files', message: result.problem });
			tooLarge ||= result.tooLarge === true;
		}
	}
	const [first] = issues;
	if (!first) return good;
	const message = issues.map((issue) => issue.message).join(' ');
	throw new ServiceError(tooLarge ? 'too-large' : 'invalid', message, issues);
}

async function store({ name, mediaType, bytes }: CheckedFile, given: string): Promise<StoredFile> {
	const id = newId();
	await (await fileStore()).put(id, bytes, mediaType);
	const sha256 = createHash('sha256').update(bytes).digest('hex');
	const calledBefore = name === given ? null : given;
	return { id, name, calledBefore, mediaType, bytes: bytes.byteLength, sha256 };
}

/**
 * Writes the rows of stored files, within the submission's transaction.
 * @throws ServiceError too-large when the group's evidence would take more than it may
 */
export async function recordFiles(
	tx: Transaction,
	ctx: GroupContext,
	submissionId: string,
	stored: readonly StoredFile[]
): Promise<void> {
	if (stored.length === 0) return;
	await assertQuota(
		tx,
		ctx,
		stored.reduce((total, { bytes }) => total + bytes, 0)
	);
	await tx.insert(evidenceFiles).values(
		stored.map(({ id, name, mediaType, bytes, sha256 }) => ({
			id,
			groupId: ctx.group.id,
			submissionId,
			name,
			mediaType,
			bytes,
			sha256,
			uploadedBy: ctx.actor.id,
			uploadedAt: ctx.now()
		}))
	);
	const [submission] = await tx
		.select({ claimId: submissions.claimId })
		.from(submissions)
		.where(eq(submissions.id, submissionId));
	await recordAudit(tx, ctx, {
		action: 'submission.files-added',
		entity: 'submission',
		entityId: submissionId,
		groupId: ctx.group.id,
		...(submission && { claimId: submission.claimId }),
		after: { files: stored.map(({ id, name, bytes, sha256 }) => ({ id, name, bytes, sha256 })) }
	});
}

/** Takes back what `storeFiles` kept. Never throws: the sweep finds what stays behind. */
export async function discardFiles(stored: readonly Pick<StoredFile, 'id'>[]): Promise<void> {
	for (const { id } of stored) {
		try {
			await (await fileStore()).delete(id);
		} catch (error) {
			log().warn({ err: error, file: id }, 'an unused file stays for the sweep');
		}
	}
}

async function assertQuota(read: Reader, { group }: GroupContext, more: number): Promise<void> {
	const [row] = await read
		.select({ total: sum(evidenceFiles.bytes) })
		.from(evidenceFiles)
		.where(eq(evidenceFiles.groupId, group.id));
	const total = Number(row?.total ?? 0);
	if (total + more <= TASK_LIMITS.groupBytes) return;
	const free = Math.max(0, Math.floor((TASK_LIMITS.groupBytes - total) / 1e6));
	const message = `The group’s files may take ${TASK_LIMITS.groupBytes / 1e9} GB together, of which ${free} MB are left. Say in the comment where the files can be found instead.`;
	throw new ServiceError('too-large', message, [{ field: 'files', message }]);
}

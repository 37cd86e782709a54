import { and, asc, eq, inArray } from 'drizzle-orm';
import { alias } from 'drizzle-orm/sqlite-core';
import { readStatedValue } from '../../../ledger/stated-value';
import type { EvidenceFileView, SubmissionView } from '../../../schemas/task-views';
import type { Reader } from '../../db/client';
import { evidenceFiles, submissions, transcriptionChecks, users } from '../../db/schema';
import type { ClaimRow } from '../claims/find-claim';
import { isOfInequality, quantityKey } from '../claims/quantity-key';
import { exactText, mapSides, readMap, showSides } from '../inequalities/affine';
import { problemLabel } from '../recomputations/problem-label';
import { transcriptionChecksWhere } from '../transcriptions/transcription-view';
import type { SubmissionRecord, TaskRecord } from './find-task';

const deciderNames = alias(users, 'deciders');

/** Every try at a task, oldest first. */
export async function submissionViews(
	read: Reader,
	task: TaskRecord,
	claim: ClaimRow
): Promise<readonly SubmissionView[]> {
	const rows = await read
		.select({ submission: submissions, by: users.name, decider: deciderNames.name })
		.from(submissions)
		.innerJoin(users, eq(users.id, submissions.submittedBy))
		.leftJoin(deciderNames, eq(deciderNames.id, submissions.decidedBy))
		.where(eq(submissions.taskId, task.id))
		.orderBy(asc(submissions.submittedAt), asc(submissions.id));
	const files = await filesOf(
		read,
		rows.map(({ submission }) => submission.id)
	);
	// Newest first; each comparison was written with one submission of this task, in that order.
	const checks = [
		...(await transcriptionChecksWhere(
			read,
			and(eq(transcriptionChecks.claimId, claim.id), eq(transcriptionChecks.taskId, task.id))
		))
	];
	const views = [...rows].reverse().map(({ submission, by, decider }): SubmissionView => {
		const { kind, decidedBy } = submission;
		const current =
			kind === 'certificate'
				? isOfInequality(submission.quantityKey, claim)
				: submission.quantityKey === quantityKey(claim);
		return {
			id: submission.id,
			kind,
			state: submission.state,
			relation: submission.relation,
			printed: submission.printed,
			reading: kind === 'value' ? readStatedValue(submission.printed, 'as-printed').text : null,
			program: submission.program,
			programVersion: submission.programVersion,
			method: submission.method,
			comment: submission.comment,
			check: checkView(submission, claim, current),
			transcription: kind === 'transcription' ? (checks.shift() ?? null) : null,
			files: files.get(submission.id) ?? [],
			by: { id: submission.submittedBy, name: by },
			at: submission.submittedAt.toISOString(),
			decidedBy: decidedBy === null ? null : { id: decidedBy, name: decider ?? '' },
			decidedAt: submission.decidedAt?.toISOString() ?? null,
			decision: submission.decision,
			current
		};
	});
	return views.reverse();
}

/** What the check said of a certificate; its bounds in the claim's normalisation, rounded outward. */
function checkView(
	{ finding }: SubmissionRecord,
	claim: ClaimRow,
	current: boolean
): SubmissionView['check'] {
	if (!finding) return null;
	const label = problemLabel(finding.result.problem);
	const { check } = finding;
	const nothing = { label, lower: null, upper: null, exact: null };
	if (!check) return { ...nothing, accepted: false, note: 'It carries no certificate.' };
	if (!check.checked) return { ...nothing, accepted: false, note: check.reason };
	// The map to another inequality is not this claim's any more.
	if (!current) return { ...nothing, accepted: true, note: check.method };
	const sides = mapSides(readMap(claim), check);
	return {
		label,
		accepted: true,
		...showSides(sides),
		exact: exactText(sides),
		note: check.method
	};
}

async function filesOf(
	read: Reader,
	submissionIds: readonly string[]
): Promise<Map<string, EvidenceFileView[]>> {
	const found = new Map<string, EvidenceFileView[]>();
	if (submissionIds.length === 0) return found;
	const rows = await read
		.select()
		.from(evidenceFiles)
		.where(inArray(evidenceFiles.submissionId, [...submissionIds]))
		.orderBy(asc(evidenceFiles.id));
	for (const { id, submissionId, name, mediaType, bytes, sha256 } of rows) {
		const list = found.get(submissionId) ?? [];
		list.push({ id, name, mediaType, bytes, sha256 });
		found.set(submissionId, list);
	}
	return found;
}

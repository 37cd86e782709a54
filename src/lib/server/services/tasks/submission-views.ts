import { and, asc, eq, getTableColumns, inArray, ne, or, type SQL } from 'drizzle-orm';
import { alias } from 'drizzle-orm/sqlite-core';
import { readStatedValue } from '../../../ledger/stated-value';
import type {
	ClaimReproduction,
	EvidenceFileView,
	SubmissionView
} from '../../../schemas/task-views';
import type { Reader } from '../../db/client';
import { evidenceFiles, submissions, tasks, transcriptionChecks, users } from '../../db/schema';
import { renderMarkdown } from '../../markdown/render-markdown';
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
	const rows = await selectSubmissions(read, eq(submissions.taskId, task.id));
	const files = await filesOf(read, rows);
	// Newest first; each comparison was written with one submission of this task, in that order.
	const checks = [
		...(await transcriptionChecksWhere(read, eq(transcriptionChecks.taskId, task.id)))
	];
	return [...rows]
		.reverse()
		.map((row) => ({
			...viewOf(row, claim, files),
			transcription: row.submission.kind === 'transcription' ? (checks.shift() ?? null) : null
		}))
		.reverse();
}

/**
 * What was found for a claim and counts, or counted until a certificate excluded it: what somebody
 * else accepted, and certificates, which count once their check accepted them. Oldest first;
 * comparisons with the paper stand elsewhere.
 */
export async function claimReproductions(
	read: Reader,
	claim: ClaimRow
): Promise<readonly ClaimReproduction[]> {
	const rows = await selectSubmissions(
		read,
		and(
			eq(submissions.claimId, claim.id),
			ne(submissions.kind, 'transcription'),
			or(
				inArray(submissions.state, ['accepted', 'contradicted']),
				eq(submissions.kind, 'certificate')
			)
		)
	);
	const files = await filesOf(read, rows);
	return rows
		.map((row) => ({ ...viewOf(row, claim, files), taskNumber: row.taskNumber }))
		.filter(({ kind, check }) => kind !== 'certificate' || check?.accepted);
}

/** Everything but what was handed in, which may be megabytes. */
const WITHOUT_CERTIFICATE = columnsWithoutCertificate();

function columnsWithoutCertificate() {
	const { certificate, ...columns } = getTableColumns(submissions);
	void certificate;
	return columns;
}

function selectSubmissions(read: Reader, where: SQL | undefined) {
	return read
		.select({
			submission: WITHOUT_CERTIFICATE,
			by: users.name,
			decider: deciderNames.name,
			taskNumber: tasks.number
		})
		.from(submissions)
		.innerJoin(tasks, eq(tasks.id, submissions.taskId))
		.innerJoin(users, eq(users.id, submissions.submittedBy))
		.leftJoin(deciderNames, eq(deciderNames.id, submissions.decidedBy))
		.where(where)
		.orderBy(asc(submissions.submittedAt), asc(submissions.id));
}
type Selected = Awaited<ReturnType<typeof selectSubmissions>>[number];

function viewOf(
	{ submission, by, decider }: Selected,
	claim: ClaimRow,
	files: ReadonlyMap<string, readonly EvidenceFileView[]>
): SubmissionView {
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
		transcription: null,
		files: files.get(submission.id) ?? [],
		by: { id: submission.submittedBy, name: by },
		at: submission.submittedAt.toISOString(),
		decidedBy: decidedBy === null ? null : { id: decidedBy, name: decider ?? '' },
		decidedAt: submission.decidedAt?.toISOString() ?? null,
		decision: submission.decision,
		decisionHtml: renderMarkdown(submission.decision),
		current
	};
}

/** What the check said of a certificate; its bounds in the claim's normalisation, rounded outward. */
function checkView(
	{ finding }: Pick<SubmissionRecord, 'finding'>,
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
	selected: readonly Selected[]
): Promise<ReadonlyMap<string, readonly EvidenceFileView[]>> {
	const found = new Map<string, EvidenceFileView[]>();
	if (selected.length === 0) return found;
	const ids = selected.map(({ submission }) => submission.id);
	const rows = await read
		.select()
		.from(evidenceFiles)
		.where(inArray(evidenceFiles.submissionId, ids))
		.orderBy(asc(evidenceFiles.id));
	for (const { id, submissionId, name, mediaType, bytes, sha256 } of rows) {
		const list = found.get(submissionId) ?? [];
		list.push({ id, name, mediaType, bytes, sha256 });
		found.set(submissionId, list);
	}
	return found;
}

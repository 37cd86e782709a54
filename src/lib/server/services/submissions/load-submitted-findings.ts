import { and, asc, eq, isNotNull } from 'drizzle-orm';
import type { Reader } from '../../db/client';
import { attachedCertificates, inequalities, submissions, users } from '../../db/schema';
import type { ClaimRow } from '../claims/find-claim';
import type { StoredFinding } from '../claims/findings';

/** A certificate of a person that the check accepted: a guaranteed enclosure like the machine's. */
export interface SubmittedFinding extends StoredFinding {
	/** Who handed it in. */
	readonly by: string;
	/** The task it answers; null: attached to the claim itself. */
	readonly taskId: string | null;
}

/**
 * What certificates handed in for a claim prove, oldest first. They count from the moment the check
 * accepted them, whatever a maintainer decides on the submission: what is proved stays proved. One
 * handed in while the claim was about another inequality says nothing of the present one.
 */
export async function loadSubmittedFindings(
	tx: Reader,
	claim: Pick<ClaimRow, 'id' | 'inequalityId'>
): Promise<SubmittedFinding[]> {
	if (claim.inequalityId === null) return [];
	const [about] = await tx
		.select({ outputs: inequalities.outputs, terms: inequalities.terms })
		.from(inequalities)
		.where(eq(inequalities.id, claim.inequalityId));
	if (!about) return [];
	const rows = await tx
		.select({
			id: submissions.id,
			taskId: submissions.taskId,
			finding: submissions.finding,
			by: users.name
		})
		.from(submissions)
		.innerJoin(users, eq(users.id, submissions.submittedBy))
		.where(
			and(
				eq(submissions.claimId, claim.id),
				eq(submissions.kind, 'certificate'),
				isNotNull(submissions.finding)
			)
		)
		.orderBy(asc(submissions.submittedAt), asc(submissions.id));
	const attached = await tx
		.select({
			id: attachedCertificates.id,
			finding: attachedCertificates.finding,
			by: users.name
		})
		.from(attachedCertificates)
		.innerJoin(users, eq(users.id, attachedCertificates.attachedBy))
		.where(eq(attachedCertificates.claimId, claim.id))
		.orderBy(asc(attachedCertificates.attachedAt), asc(attachedCertificates.id));
	const all = [...rows, ...attached.map((row) => ({ ...row, taskId: null }))];
	const subject = JSON.stringify([about.outputs, about.terms]);
	return all.flatMap(({ finding, ...row }) => {
		if (!finding?.check?.checked) return [];
		const { outputs, terms } = finding.result.problem;
		if (JSON.stringify([outputs, terms]) !== subject) return [];
		return [{ ...row, ...finding, isStation: false }];
	});
}

import { and, asc, eq, inArray } from 'drizzle-orm';
import {
	evidenceOfReproduction,
	reproductionLabel,
	type FoundValue,
	type Reproduction
} from '../../../ledger/reproductions';
import type { Transaction } from '../../db/client';
import { submissions, tasks, users } from '../../db/schema';
import type { ClaimRow } from './find-claim';
import { quantityKey } from './quantity-key';

/** A reproduction with the value as it was submitted. */
export interface StoredReproduction extends Reproduction {
	readonly found: FoundValue;
}

/** The values people found for what the claim is about now, and that somebody else accepted. */
export async function loadReproductions(
	tx: Transaction,
	claim: ClaimRow
): Promise<readonly StoredReproduction[]> {
	const rows = await tx
		.select({ submission: submissions, taskNumber: tasks.number, name: users.name })
		.from(submissions)
		.innerJoin(tasks, eq(tasks.id, submissions.taskId))
		.innerJoin(users, eq(users.id, submissions.submittedBy))
		.where(
			and(
				eq(submissions.claimId, claim.id),
				eq(submissions.kind, 'value'),
				inArray(submissions.state, ['accepted', 'contradicted']),
				eq(submissions.quantityKey, quantityKey(claim))
			)
		)
		.orderBy(asc(submissions.submittedAt), asc(submissions.id));
	return rows.flatMap(({ submission, taskNumber, name }) => {
		const { id: submissionId, state, printed, relation } = submission;
		if (state !== 'accepted' && state !== 'contradicted') return [];
		const found = { printed, relation };
		const evidence = evidenceOfReproduction(found, reproductionLabel(name, submission));
		return [{ submissionId, taskNumber, state, evidence, found }];
	});
}

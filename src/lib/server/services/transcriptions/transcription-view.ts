import { desc, eq, type SQL } from 'drizzle-orm';
import { isConfirmed } from '../../../ledger/publication';
import type { TranscriptionCheckView, TranscriptionView } from '../../../schemas/task-views';
import type { GroupContext } from '../../context';
import type { Reader } from '../../db/client';
import { claims, transcriptionChecks, users } from '../../db/schema';
import type { ClaimRow } from '../claims/find-claim';
import { wroteAny } from './wrote-any';

/** Older comparisons of a claim are of no interest on its page; the audit has them all. */
const SHOWN = 20;

/** How far a claim is confirmed, for its group. */
export async function transcriptionView(
	read: Reader,
	ctx: GroupContext,
	claim: ClaimRow
): Promise<TranscriptionView> {
	return {
		confirmed: isConfirmed(claim),
		checks: await transcriptionChecksWhere(read, eq(transcriptionChecks.claimId, claim.id)),
		ownClaim: await wroteAny(read, claim, ctx.actor.id)
	};
}

/** Comparisons that match, newest first; also for the page of the task one was handed in for. */
export async function transcriptionChecksWhere(
	read: Reader,
	where: SQL | undefined
): Promise<(TranscriptionCheckView & { readonly taskId: string | null })[]> {
	const rows = await read
		.select({ check: transcriptionChecks, by: users.name, version: claims.version })
		.from(transcriptionChecks)
		.innerJoin(users, eq(users.id, transcriptionChecks.checkedBy))
		.innerJoin(claims, eq(claims.id, transcriptionChecks.claimId))
		.where(where)
		.orderBy(desc(transcriptionChecks.checkedAt), desc(transcriptionChecks.id))
		.limit(SHOWN);
	return rows.map(({ check, by, version }) => ({
		by: { id: check.checkedBy, name: by },
		at: check.checkedAt.toISOString(),
		claimVersion: check.claimVersion,
		valueMatches: check.valueMatches,
		locatorMatches: check.locatorMatches,
		inequalityMatches: check.inequalityMatches,
		note: check.note,
		taskId: check.taskId,
		current: check.claimVersion === version && check.voidedAt === null
	}));
}

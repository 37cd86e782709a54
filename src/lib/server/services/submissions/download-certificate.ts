import { and, eq } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import type { GroupContext } from '../../context';
import { claims, submissions } from '../../db/schema';
import { ServiceError } from '../../errors';

export interface DownloadedCertificate {
	readonly name: string;
	/** As it was handed in: the command line's `verify-certificate` reads it. */
	readonly text: string;
}

/** @throws ServiceError not-found, also for a submission of another group or of another kind */
export async function downloadCertificate(
	ctx: GroupContext,
	submissionId: string
): Promise<DownloadedCertificate> {
	if (!may(ctx.role, 'view-group')) throw new ServiceError('forbidden', 'This is the group’s own.');
	const [row] = await ctx.db.read
		.select({ text: submissions.certificate, number: claims.number })
		.from(submissions)
		.innerJoin(claims, eq(claims.id, submissions.claimId))
		.where(and(eq(submissions.id, submissionId), eq(claims.groupId, ctx.group.id)));
	if (!row?.text) throw new ServiceError('not-found', 'There is no such certificate here.');
	return { name: `${ctx.group.slug}-claim-${row.number}-${submissionId}.json`, text: row.text };
}

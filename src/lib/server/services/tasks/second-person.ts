import { eq } from 'drizzle-orm';
import type { TaskKind } from '../../../ledger/tasks';
import type { Reader } from '../../db/client';
import { claims } from '../../db/schema';
import { ServiceError } from '../../errors';
import { wroteAny } from '../transcriptions/wrote-any';

interface Asked {
	readonly kind: TaskKind;
	readonly claimId: string;
	readonly assigneeId: string | null;
}

/**
 * A comparison with the paper is not given to who entered or edited the claim: they could
 * never hand it in.
 * @throws ServiceError conflict, with an issue of the assignee's field
 */
export async function requireSecondPerson(
	read: Reader,
	{ kind, claimId, assigneeId }: Asked
): Promise<void> {
	if (kind !== 'confirm-transcription' || assigneeId === null) return;
	const [claim] = await read.select().from(claims).where(eq(claims.id, claimId));
	if (!claim || !(await wroteAny(read, claim, assigneeId))) return;
	const message = `Claim ${claim.number} is compared with its paper by somebody who neither entered nor edited it.`;
	throw new ServiceError('conflict', message, [{ field: 'assigneeId', message }]);
}

import { eq } from 'drizzle-orm';
import type { TaskKind } from '../../../ledger/tasks';
import type { Reader } from '../../db/client';
import { claims } from '../../db/schema';
import { ServiceError, type FieldIssue } from '../../errors';
import { wroteAny } from '../transcriptions/wrote-any';

interface Asked {
	readonly kind: TaskKind;
	readonly claimId: string;
	readonly assigneeId: string | null;
}

/**
 * A comparison with the paper is not given to who entered or edited the claim: they could
 * never hand it in.
 * @returns the sentence that says so; null when the claim may be given to them
 */
async function whyNotSecond(
	read: Reader,
	{ kind, claimId, assigneeId }: Asked
): Promise<string | null> {
	if (kind !== 'confirm-transcription' || assigneeId === null) return null;
	const [claim] = await read.select().from(claims).where(eq(claims.id, claimId));
	if (!claim || !(await wroteAny(read, claim, assigneeId))) return null;
	return `Claim ${claim.number} is compared with its paper by somebody who neither entered nor edited it.`;
}

/** @throws ServiceError conflict, with an issue of the assignee's field */
export async function requireSecondPerson(read: Reader, asked: Asked): Promise<void> {
	const message = await whyNotSecond(read, asked);
	if (message) throw new ServiceError('conflict', message, [{ field: 'assigneeId', message }]);
}

/**
 * The same of several claims at once.
 * @throws ServiceError conflict, with an issue of each claim (`claim-7`) and one of the assignee's field
 */
export async function requireSecondPersons(
	read: Reader,
	asked: Pick<Asked, 'kind' | 'assigneeId'>,
	about: readonly { readonly id: string; readonly number: number }[]
): Promise<void> {
	const issues: FieldIssue[] = [];
	for (const { id, number } of about) {
		const message = await whyNotSecond(read, { ...asked, claimId: id });
		if (message) issues.push({ field: `claim-${number}`, message });
	}
	const [first] = issues;
	if (!first) return;
	const message =
		about.length === 1
			? first.message
			: `Nothing is opened: ${issues.length} of these ${about.length} claims can’t be compared by this person. Choose somebody else, or leave them out.`;
	const field = { field: 'assigneeId', message };
	throw new ServiceError('conflict', message, about.length === 1 ? [field] : [field, ...issues]);
}

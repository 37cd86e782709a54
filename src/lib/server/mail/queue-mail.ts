import { and, eq, inArray } from 'drizzle-orm';
import { hasRole } from '../../ledger/roles';
import type { Transaction } from '../db/client';
import { memberships, outbox } from '../db/schema';
import { newId } from '../ids';

/** Stations explain most discrepancies: the mail waits for them, but not longer than this. */
export const MAIL_WAIT_MS = 60_000;
const MESSAGE_DOMAIN = 'merestone.invalid';

export interface MailedClaim {
	readonly id: string;
	readonly groupId: string;
	readonly createdBy: string;
}

/**
 * One row each for the one who entered the claim and everyone from maintainer up, in the
 * transaction that stores the verdict.
 * @param verdictId the stored verdict that turned to a discrepancy: one mail per person and turn
 */
export async function queueDiscrepancyMails(
	tx: Transaction,
	claim: MailedClaim,
	verdictId: string,
	now: Date,
	stationsDone: boolean
): Promise<number> {
	const people = await tx
		.select({ userId: memberships.userId, role: memberships.role })
		.from(memberships)
		.where(eq(memberships.groupId, claim.groupId));
	const recipients = people.filter(
		({ userId, role }) => userId === claim.createdBy || hasRole(role, 'maintainer')
	);
	if (recipients.length === 0) return 0;
	const notBefore = stationsDone ? now : new Date(now.getTime() + MAIL_WAIT_MS);
	await tx
		.insert(outbox)
		.values(
			recipients.map(({ userId }) => {
				const id = newId();
				return {
					id,
					kind: 'discrepancy' as const,
					dedupeKey: `discrepancy:${verdictId}:${userId}`,
					messageId: `<${id}@${MESSAGE_DOMAIN}>`,
					userId,
					claimId: claim.id,
					notBefore,
					createdAt: now
				};
			})
		)
		.onConflictDoNothing();
	return recipients.length;
}

/** The claim no longer disagrees: what has not been sent stays unsent. */
export async function dropWaitingMails(tx: Transaction, claimId: string): Promise<void> {
	await tx
		.update(outbox)
		.set({ state: 'dropped' })
		.where(and(eq(outbox.claimId, claimId), eq(outbox.state, 'waiting')));
}

/** The stations are done: nothing more to wait for. */
export async function releaseWaitingMails(
	tx: Transaction,
	claimIds: readonly string[],
	now: Date
): Promise<void> {
	if (claimIds.length === 0) return;
	await tx
		.update(outbox)
		.set({ notBefore: now })
		.where(
			and(
				inArray(outbox.claimId, [...claimIds]),
				eq(outbox.state, 'waiting'),
				eq(outbox.attempts, 0)
			)
		);
}

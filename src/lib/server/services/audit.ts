import type { Context } from '../context';
import type { Transaction } from '../db/client';
import { audit } from '../db/schema';
import { newId } from '../ids';

export interface AuditEntry {
	/** `claim.entered`, `group.started`: entity, dot, past tense. */
	readonly action: string;
	readonly entity: string;
	readonly entityId: string;
	readonly groupId?: string | null;
	/** The claim it concerns, where that is not the entity itself: a task or comment on it. */
	readonly claimId?: string;
	readonly before?: unknown;
	readonly after?: unknown;
}

/** Writes who changed what, in the transaction of the change itself; never secrets. */
export async function recordAudit(
	tx: Transaction,
	ctx: Pick<Context, 'actor' | 'requestId' | 'now'>,
	entry: AuditEntry
): Promise<void> {
	await tx.insert(audit).values({
		id: newId(),
		groupId: entry.groupId ?? null,
		actorId: ctx.actor?.id ?? null,
		action: entry.action,
		entity: entry.entity,
		entityId: entry.entityId,
		claimId: entry.claimId ?? (entry.entity === 'claim' ? entry.entityId : null),
		before: entry.before ?? null,
		after: entry.after ?? null,
		requestId: ctx.requestId,
		at: ctx.now()
	});
}

import { and, eq, inArray, notInArray } from 'drizzle-orm';
import type { Database } from '../../db/client';
import { users } from '../../db/schema';
import { newId } from '../../ids';
import { recordAudit } from '../audit';

export interface AppliedAdmins {
	readonly admins: readonly string[];
	/** Ids that are no account's. */
	readonly unknown: readonly string[];
}

/**
 * Makes exactly these accounts the site's administrators. By account id, never by address: anybody
 * could sign up with an address before its owner does.
 */
export async function applyAdmins(
	db: Database,
	ids: readonly string[],
	now: Date
): Promise<AppliedAdmins> {
	const wanted = [...new Set(ids)];
	const admins = await db.write(async (tx) => {
		const gone = await tx
			.update(users)
			.set({ isAdmin: false })
			.where(and(eq(users.isAdmin, true), notInArray(users.id, wanted)))
			.returning({ id: users.id });
		const made = await tx
			.update(users)
			.set({ isAdmin: true })
			.where(and(eq(users.isAdmin, false), inArray(users.id, wanted)))
			.returning({ id: users.id });
		const changes = [
			...gone.map(({ id }) => ({ id, isAdmin: false })),
			...made.map(({ id }) => ({ id, isAdmin: true }))
		];
		const ctx = { actor: null, requestId: `start-${newId()}`, now: () => now };
		for (const { id, isAdmin } of changes) {
			await recordAudit(tx, ctx, {
				action: isAdmin ? 'user.made-administrator' : 'user.no-longer-administrator',
				entity: 'user',
				entityId: id,
				before: { isAdmin: !isAdmin },
				after: { isAdmin }
			});
		}
		return tx.select({ id: users.id }).from(users).where(eq(users.isAdmin, true));
	});
	const known = admins.map(({ id }) => id);
	return { admins: known, unknown: wanted.filter((id) => !known.includes(id)) };
}

import { and, eq } from 'drizzle-orm';
import type { Reader, Transaction } from '../../db/client';
import { formerSlugs, groups } from '../../db/schema';
import { ServiceError } from '../../errors';

/** A former address stays taken for good: so that nobody hoards them. */
const MOST_FORMER = 10;

/** @throws ServiceError conflict, beside the field `slug` */
function refuseAddress(message: string): never {
	throw new ServiceError('conflict', message, [{ field: 'slug', message }]);
}

export const addressIsTaken = (slug: string) =>
	refuseAddress(`The address /g/${slug} is taken; choose another`);

/** Whether an address is, or leads to, another group; `groupId` null: any group. */
export async function isAddressTaken(
	read: Reader,
	slug: string,
	groupId: string | null
): Promise<boolean> {
	const now = await read.select({ id: groups.id }).from(groups).where(eq(groups.slug, slug));
	const before = await read
		.select({ id: formerSlugs.groupId })
		.from(formerSlugs)
		.where(eq(formerSlugs.slug, slug));
	return [...now, ...before].some(({ id }) => id !== groupId);
}

/**
 * Keeps a group's address as one that leads to the new one, which may be one it had before. The
 * caller writes the new one.
 * @throws ServiceError conflict: taken, or too many former ones
 */
export async function moveAddress(
	tx: Transaction,
	groupId: string,
	from: string,
	to: string
): Promise<void> {
	if (await isAddressTaken(tx, to, groupId)) addressIsTaken(to);
	await tx
		.delete(formerSlugs)
		.where(and(eq(formerSlugs.slug, to), eq(formerSlugs.groupId, groupId)));
	const kept = await tx.$count(formerSlugs, eq(formerSlugs.groupId, groupId));
	if (kept >= MOST_FORMER) {
		refuseAddress(
			`The group has had ${MOST_FORMER} other addresses, the most it keeps; take one of them back`
		);
	}
	await tx.insert(formerSlugs).values({ slug: from, groupId });
}

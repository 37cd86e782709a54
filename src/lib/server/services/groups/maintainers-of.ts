import { and, asc, eq, inArray } from 'drizzle-orm';
import { rolesFrom } from '../../../ledger/roles';
import type { Reader } from '../../db/client';
import { memberships } from '../../db/schema';

/** User ids of a group's maintainers and owners, in the order they joined. */
export async function maintainersOf(read: Reader, groupId: string): Promise<string[]> {
	const rows = await read
		.select({ userId: memberships.userId })
		.from(memberships)
		.where(
			and(eq(memberships.groupId, groupId), inArray(memberships.role, rolesFrom('maintainer')))
		)
		.orderBy(asc(memberships.createdAt));
	return rows.map(({ userId }) => userId);
}

import { asc, eq } from 'drizzle-orm';
import { handlesOf, type Handle } from '../../../ledger/mentions';
import type { GroupContext } from '../../context';
import type { Reader } from '../../db/client';
import { memberships, users } from '../../db/schema';

/** The handles of everybody in the group, who came first first: so numbers behind names stay. */
export async function groupHandles(
	read: Reader,
	{ group }: Pick<GroupContext, 'group'>
): Promise<readonly Handle[]> {
	const members = await read
		.select({ id: users.id, name: users.name })
		.from(memberships)
		.innerJoin(users, eq(users.id, memberships.userId))
		.where(eq(memberships.groupId, group.id))
		.orderBy(asc(memberships.createdAt), asc(users.id));
	return handlesOf(members);
}

import { and, asc, eq, inArray } from 'drizzle-orm';
import { rolesFrom } from '../../../ledger/roles';
import type { PersonView } from '../../../schemas/task-views';
import type { Reader } from '../../db/client';
import { memberships, users } from '../../db/schema';

/** Whom a task of the group may be assigned to, by name. */
export async function peopleForTasks(
	read: Reader,
	groupId: string
): Promise<readonly PersonView[]> {
	return read
		.select({ id: users.id, name: users.name })
		.from(memberships)
		.innerJoin(users, eq(users.id, memberships.userId))
		.where(and(eq(memberships.groupId, groupId), inArray(memberships.role, rolesFrom('member'))))
		.orderBy(asc(users.name), asc(users.id));
}

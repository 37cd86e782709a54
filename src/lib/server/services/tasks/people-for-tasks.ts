import { and, asc, eq, ne } from 'drizzle-orm';
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
		.where(and(eq(memberships.groupId, groupId), ne(memberships.role, 'observer')))
		.orderBy(asc(users.name), asc(users.id));
}

import { asc, eq } from 'drizzle-orm';
import type { MemberView } from '../../../schemas/views';
import type { GroupContext } from '../../context';
import { memberships, users } from '../../db/schema';

/** Everyone of the group by name. */
export async function listMembers(ctx: GroupContext): Promise<readonly MemberView[]> {
	const rows = await ctx.db.read
		.select({
			id: users.id,
			name: users.name,
			email: users.email,
			role: memberships.role,
			since: memberships.createdAt
		})
		.from(memberships)
		.innerJoin(users, eq(users.id, memberships.userId))
		.where(eq(memberships.groupId, ctx.group.id))
		.orderBy(asc(users.name), asc(users.id));
	return rows.map((row) => ({ ...row, since: row.since.toISOString() }));
}

import { asc, eq } from 'drizzle-orm';
import type { GroupView } from '../../../schemas/views';
import type { Context } from '../../context';
import { groups, memberships } from '../../db/schema';

/** The actor's groups by name, with their role in each; none for a visitor. */
export async function listGroupsOf(ctx: Context): Promise<readonly GroupView[]> {
	if (!ctx.actor) return [];
	return ctx.db.read
		.select({
			id: groups.id,
			slug: groups.slug,
			name: groups.name,
			description: groups.description,
			role: memberships.role
		})
		.from(memberships)
		.innerJoin(groups, eq(groups.id, memberships.groupId))
		.where(eq(memberships.userId, ctx.actor.id))
		.orderBy(asc(groups.name));
}

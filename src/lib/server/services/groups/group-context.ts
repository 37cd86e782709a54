import { and, eq } from 'drizzle-orm';
import type { GroupContext, UserContext } from '../../context';
import { formerSlugs, groups, memberships } from '../../db/schema';

/**
 * The context of one of the actor's groups; null when there is no such group or the actor is not
 * in it, which nobody outside may tell apart. A former address finds it too.
 */
export async function groupContext(
	ctx: UserContext,
	by: { readonly slug: string } | { readonly id: string }
): Promise<GroupContext | null> {
	const [found] = await ctx.db.read
		.select({ id: groups.id, slug: groups.slug, name: groups.name, role: memberships.role })
		.from(groups)
		.innerJoin(
			memberships,
			and(eq(memberships.groupId, groups.id), eq(memberships.userId, ctx.actor.id))
		)
		.where('slug' in by ? eq(groups.slug, by.slug) : eq(groups.id, by.id));
	if (!found) return 'slug' in by ? formerly(ctx, by.slug) : null;
	const { role, ...group } = found;
	return { ...ctx, group, role };
}

async function formerly(ctx: UserContext, slug: string): Promise<GroupContext | null> {
	const [found] = await ctx.db.read
		.select({ id: formerSlugs.groupId })
		.from(formerSlugs)
		.where(eq(formerSlugs.slug, slug));
	return found ? groupContext(ctx, found) : null;
}

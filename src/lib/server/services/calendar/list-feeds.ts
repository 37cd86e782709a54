import type { CalendarFeedView } from '../../../schemas/talk-views';
import type { UserContext } from '../../context';
import { feedsOf } from './feed-rows';

/**
 * The actor's standing calendar addresses: all, or the one of a group (null: of their own tasks).
 * A secret is sent to no page that does not show it.
 */
export async function listFeeds(
	ctx: UserContext,
	of?: { readonly groupSlug: string | null }
): Promise<readonly CalendarFeedView[]> {
	const feeds = await feedsOf(ctx.db.read, ctx.actor.id);
	return of ? feeds.filter(({ groupSlug }) => groupSlug === of.groupSlug) : feeds;
}

import type { CalendarFeedView } from '../../../schemas/talk-views';
import type { UserContext } from '../../context';
import { feedsOf } from './feed-rows';

/** The actor's standing calendar addresses. */
export async function listFeeds(ctx: UserContext): Promise<readonly CalendarFeedView[]> {
	return feedsOf(ctx.db.read, ctx.actor.id);
}

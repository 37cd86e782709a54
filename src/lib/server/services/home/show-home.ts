import type { HomeView } from '../../../schemas/talk-views';
import type { UserContext } from '../../context';
import { listGroupsOf } from '../groups/list-groups-of';
import { unreadCount } from '../notifications/list-news';
import { listMyTasks } from '../tasks/list-my-tasks';
import { changedClaims } from './changed-claims';
import { standingDiscrepancies } from './standing-discrepancies';

/** Rows of each list on the home page: what is read at a glance; the rest is one link away. */
const ROWS = 8;

/** What concerns a person today, over all their groups. */
export async function showHome(ctx: UserContext): Promise<HomeView> {
	const groups = await listGroupsOf(ctx);
	const { mine, toDecide } = await listMyTasks(ctx);
	const changed = await changedClaims(ctx, ROWS);
	const standing = await standingDiscrepancies(ctx, groups, ROWS);
	const counted = groups.map(({ id, slug, name, role }) => ({
		slug,
		name,
		role,
		discrepancies: standing.ofGroup.get(id) ?? 0
	}));
	return {
		tasks: mine.slice(0, ROWS),
		toDecide: toDecide.slice(0, ROWS),
		changed: changed.rows,
		discrepancies: standing.rows,
		totals: {
			tasks: mine.length,
			overdue: mine.filter(({ overdue }) => overdue).length,
			toDecide: toDecide.length,
			changed: changed.total,
			discrepancies: counted.reduce((sum, { discrepancies }) => sum + discrepancies, 0)
		},
		groups: counted,
		unread: await unreadCount(ctx)
	};
}

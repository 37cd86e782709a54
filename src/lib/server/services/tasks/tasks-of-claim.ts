import { desc, eq } from 'drizzle-orm';
import { isActiveTask } from '../../../ledger/tasks';
import type { ClaimTask } from '../../../schemas/task-views';
import type { GroupContext } from '../../context';
import { tasks } from '../../db/schema';
import { findClaim } from '../claims/find-claim';
import { claimTask, selectTaskRows } from './task-rows';

/** The tasks of a claim: those under way first, each part with the one changed last on top. */
export async function tasksOfClaim(
	ctx: GroupContext,
	claimNumber: number
): Promise<readonly ClaimTask[]> {
	const { read } = ctx.db;
	const claim = await findClaim(read, ctx, claimNumber);
	const selected = await selectTaskRows(read, eq(tasks.claimId, claim.id)).orderBy(
		desc(tasks.updatedAt),
		desc(tasks.number)
	);
	const rows = selected.map((row) => claimTask(row, ctx.now()));
	return [
		...rows.filter(({ state }) => isActiveTask(state)),
		...rows.filter(({ state }) => !isActiveTask(state))
	];
}

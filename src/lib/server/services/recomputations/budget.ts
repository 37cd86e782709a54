import { eq } from 'drizzle-orm';
import type { Reader } from '../../db/client';
import { groups } from '../../db/schema';

let seconds = 60;

/**
 * Computing time a recomputation gets by default; the operator's setting, read once at the start.
 * Stations get it whatever a group has set: all groups share them.
 */
export const budgetSeconds = () => seconds;

/** Computing time what a group's claims ask for gets: its own setting, else the operator's. */
export async function groupBudget(read: Reader, groupId: string): Promise<number> {
	const [group] = await read
		.select({ own: groups.budgetSeconds })
		.from(groups)
		.where(eq(groups.id, groupId));
	return group?.own ?? seconds;
}

export function setBudgetSeconds(budget: number): void {
	seconds = budget;
}

/** "Recompute" doubles the time, up to this. */
export const LONGEST_BUDGET = 600;

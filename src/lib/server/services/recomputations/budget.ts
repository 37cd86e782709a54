let seconds = 60;

/** Computing time a recomputation gets by default; the operator's setting, read once at the start. */
export const budgetSeconds = () => seconds;

export function setBudgetSeconds(budget: number): void {
	seconds = budget;
}

/** "Recompute" doubles the time, up to this. */
export const LONGEST_BUDGET = 600;

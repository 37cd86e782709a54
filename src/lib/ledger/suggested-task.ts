import { isActiveTask, type TaskKind, type TaskState } from './tasks';
import type { ClaimState } from './claim';
import type { Verdict } from './verdict';

type Judged = Pick<Verdict, 'status' | 'reasonCode'>;

/**
 * Machines do not settle the claim and no task on it is under way: one should be opened.
 * @param disputed the entry differs from its paper: it is corrected, not reproduced
 */
export function wantsTask(
	state: ClaimState,
	{ status, reasonCode }: Judged,
	tasks: readonly TaskState[],
	disputed = false
): boolean {
	if (disputed || state !== 'active' || tasks.some(isActiveTask)) return false;
	return status === 'discrepancy' || (status === 'open' && reasonCode === 'no-solver');
}

/**
 * What a task on such a claim would ask for first. A Discrepancy may be a slip of whoever entered
 * it, so the transcription comes before the authors; where that was found wrong the entry is to be
 * corrected, and neither is of use.
 */
export function suggestedTask(
	{ status, reasonCode }: Judged,
	confirmed: boolean,
	disputed = false
): TaskKind {
	if (disputed) return 'other';
	if (status === 'discrepancy') return confirmed ? 'ask-authors' : 'confirm-transcription';
	return status === 'open' && reasonCode === 'no-solver' ? 'recompute' : 'other';
}

import { isActiveTask, type TaskKind, type TaskState } from './tasks';
import type { ClaimState } from './claim';
import type { Verdict } from './verdict';

type Judged = Pick<Verdict, 'status' | 'reasonCode'>;

/** Machines do not settle the claim and no task on it is under way: one should be opened. */
export function wantsTask(
	state: ClaimState,
	{ status, reasonCode }: Judged,
	tasks: readonly TaskState[]
): boolean {
	if (state !== 'active' || tasks.some(isActiveTask)) return false;
	return status === 'discrepancy' || (status === 'open' && reasonCode === 'no-solver');
}

/**
 * What a task on such a claim would ask for first. A Discrepancy may be a slip of whoever entered
 * it, so the transcription comes before the authors.
 */
export function suggestedTask({ status, reasonCode }: Judged, confirmed: boolean): TaskKind {
	if (status === 'discrepancy') return confirmed ? 'ask-authors' : 'confirm-transcription';
	return status === 'open' && reasonCode === 'no-solver' ? 'recompute' : 'other';
}

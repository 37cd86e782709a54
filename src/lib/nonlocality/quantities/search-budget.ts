import { SolverStop, type Control } from '../problem';

/** Thrown by a poll when the seconds of a search are over; the best found so far stands. */
export class BudgetSpent extends Error {}

/** For a `catch`: @throws whatever is not the end of the search's seconds */
export function expectBudgetSpent(error: unknown): void {
	if (!(error instanceof BudgetSpent)) throw error;
}

/**
 * For the `catch` of one part of a search that the others outlive: why the part stopped.
 * @throws whatever is no such stop, and the cancellation of all
 */
export function stopOfPart(error: unknown): SolverStop {
	if (!(error instanceof SolverStop) || error.status === 'cancelled') throw error;
	return error;
}

/** A poll for the inner loops. @throws SolverStop `cancelled`, BudgetSpent (from the poll) */
export function pollWithin(control: Control, seconds: number): () => void {
	const end = control.now() + 1000 * seconds;
	return () => {
		if (control.shouldStop()) throw new SolverStop('cancelled', 'stopped on request');
		if (control.now() > end) throw new BudgetSpent();
	};
}

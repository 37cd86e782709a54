import { SolverStop, type Control } from '../problem';

/** Thrown by a poll when the seconds of a search are over; the best found so far stands. */
export class BudgetSpent extends Error {}

/** A poll for the inner loops. @throws SolverStop `cancelled`, BudgetSpent (from the poll) */
export function pollWithin(control: Control, seconds: number): () => void {
	const end = control.now() + 1000 * seconds;
	return () => {
		if (control.shouldStop()) throw new SolverStop('cancelled', 'stopped on request');
		if (control.now() > end) throw new BudgetSpent();
	};
}

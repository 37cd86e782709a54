import type { Control, ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import { npaBound } from './npa-bound';
import { levelsToTry, predictLevel } from './quantum-plan';
import { stopOfPart } from './search-budget';

/** Predicted seconds up to which a relaxation costs less than the starts it may save. */
const QUICK = 0.01;
/** Its share of the budget. */
const SHARE = 0.1;

/**
 * A guaranteed upper bound on the quantum maximum of g from the levels that take no time, so that a
 * search can end where it is met; null when no level is that quick.
 * @throws SolverStop `cancelled`
 */
export function quickUpperBound(
	problem: ProblemOf<'see-saw'>,
	g: Functional,
	control: Control
): number | null {
	let best: number | null = null;
	const quiet: Control = {
		now: () => control.now(),
		shouldStop: () => control.shouldStop(),
		report: () => undefined
	};
	for (const level of levelsToTry(problem.outputs.length)) {
		if (predictLevel(g, level, () => 1).seconds > QUICK) break;
		const seconds = SHARE * problem.seconds;
		const relaxation = { ...problem, quantity: 'npa', level, nonNegative: false, seconds } as const;
		try {
			const { upper } = npaBound(relaxation, g, quiet);
			if (upper !== null) best = Math.min(best ?? Infinity, upper);
		} catch (error) {
			stopOfPart(error);
		}
	}
	return best;
}

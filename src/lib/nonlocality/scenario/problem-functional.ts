import type { Problem } from '../problem';
import { COEFFICIENT_ONE, negateCoefficient } from '../exact/coefficient';
import { scaleFunctional, type Functional } from './functional';
import { functionalOfTerms } from './problem-terms';

/**
 * The functional g that is maximised: the problem's own for `max`, its negative for `min` (min f =
 * -max(-f)). All solvers and all certificates speak about g. The value of a box has no sense.
 */
export function functionalToMaximise(problem: Problem): Functional {
	const f = functionalOfTerms({ outputs: problem.outputs }, problem.terms);
	return isNegated(problem) ? scaleFunctional(f, negateCoefficient(COEFFICIENT_ONE)) : f;
}

function isNegated(problem: Problem): boolean {
	return problem.sense === 'min' && problem.quantity !== 'value';
}

/** Whether the answer about g has the other sign than the one about f: a facet test has none. */
export function turnsSigns(problem: Problem): boolean {
	return isNegated(problem) && problem.quantity !== 'facet';
}

/** Quantities whose upper side is an enumeration, which a check repeats only while it is cheap. */
export function isEnumerated(problem: Problem): boolean {
	return (
		problem.quantity === 'local' ||
		(problem.quantity === 'hybrid' && problem.model === 'svetlichny')
	);
}

import { parseCoefficient } from '../exact/expression';
import type { ProblemTerm } from '../problem';
import { makeFunctional, type Functional } from './functional';

/**
 * The functional that a problem's terms stand for.
 * @throws NotationError for an unreadable coefficient, RangeError for an event outside `outputs`.
 */
export function functionalOfTerms(
	outputs: readonly (readonly number[])[],
	terms: readonly ProblemTerm[]
): Functional {
	return makeFunctional(
		{ outputs },
		terms.map(([coefficient, events]) => ({ coefficient: parseCoefficient(coefficient), events }))
	);
}

/** The terms of a functional as a problem stores them; reading them back gives the functional. */
export function termsOfFunctional(functional: Functional): ProblemTerm[] {
	return functional.terms.map(({ coefficient, events }) => [coefficient.text, events]);
}

import { parseCoefficient } from '../exact/expression';
import type { ProblemTerm } from '../problem';
import { makeFunctional, type Functional } from './functional';
import type { Scenario } from './scenario';

/**
 * The functional that a problem's terms stand for, in a scenario or its `outputs`.
 * @throws NotationError for an unreadable coefficient, RangeError for an event outside the scenario.
 */
export function functionalOfTerms(
	scenario: Scenario | Scenario['outputs'],
	terms: readonly ProblemTerm[]
): Functional {
	return makeFunctional(
		'outputs' in scenario ? scenario : { outputs: scenario },
		terms.map(([coefficient, events]) => ({ coefficient: parseCoefficient(coefficient), events }))
	);
}

/** The terms of a functional as a problem stores them; reading them back gives the functional. */
export function termsOfFunctional(functional: Functional): ProblemTerm[] {
	return functional.terms.map(({ coefficient, events }) => [coefficient.text, events]);
}

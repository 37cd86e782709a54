import { COEFFICIENT_ONE, negateCoefficient } from '../exact/coefficient';
import { parseCoefficient } from '../exact/expression';
import type { ProblemConstraint } from '../problem';
import { makeFunctional, scaleFunctional, type Functional } from './functional';
import { functionalOfTerms } from './problem-terms';
import type { Scenario } from './scenario';

/** A constraint as `form = 0` or `form <= 0`; `>=` turns the signs. */
export interface ConstraintForm {
	readonly form: Functional;
	readonly equality: boolean;
}

/** @throws NotationError, RangeError as for a functional's terms. */
export function constraintForm(
	scenario: Scenario,
	{ terms, relation, value }: ProblemConstraint
): ConstraintForm {
	const left = functionalOfTerms(scenario, terms);
	const right = { events: [], coefficient: negateCoefficient(parseCoefficient(value)) };
	const form = makeFunctional(scenario, [...left.terms, right]);
	const turned =
		relation === '>=' ? scaleFunctional(form, negateCoefficient(COEFFICIENT_ONE)) : form;
	return { form: turned, equality: relation === '=' };
}

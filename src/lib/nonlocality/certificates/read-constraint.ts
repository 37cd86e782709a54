import type { Rational } from '../exact/rational';
import type { ProblemConstraint } from '../problem';
import type { Functional } from '../scenario/functional';
import { functionalOfTerms } from '../scenario/problem-terms';
import type { Scenario } from '../scenario/scenario';

/** form = 0, form <= 0 or form >= 0: the constraint's value is taken off its form. */
export interface ReadConstraint {
	readonly form: Functional;
	readonly relation: ProblemConstraint['relation'];
}

export function readConstraint(
	scenario: Scenario,
	{ terms, relation, value }: ProblemConstraint
): ReadConstraint {
	const form = functionalOfTerms(scenario, [...terms, [`-(${value})`, []] as const]);
	return { form, relation };
}

/** Whether a form that comes to `sum` breaks its constraint. */
export function isBroken(relation: ReadConstraint['relation'], sum: Rational): boolean {
	const sign = sum.compare(0);
	return (relation !== '<=' && sign < 0) || (relation !== '>=' && sign > 0);
}

/** The first constraint with an irrational coefficient, or -1. */
export function firstIrrational(constraints: readonly ReadConstraint[]): number {
	return constraints.findIndex(({ form }) =>
		form.terms.some(({ coefficient }) => !coefficient.exact)
	);
}

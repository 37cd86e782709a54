import { SolverStop, type ProblemConstraint } from '../problem';
import { integerFunctional, type IntegerFunctional } from '../scenario/fixed-point';
import { collinsGisinForm, isRational } from '../scenario/functional';
import { functionalOfTerms } from '../scenario/problem-terms';
import type { Scenario } from '../scenario/scenario';

/** A constraint as `integers <= 0`, `= 0` or `>= 0`, in Collins-Gisin coordinates. */
export interface IntegerConstraint {
	readonly relation: ProblemConstraint['relation'];
	/** `denominator` times (terms - value). */
	readonly integers: IntegerFunctional;
}

/** Larger coefficients of a constraint would not be exact on their way through doubles. */
const LARGEST_COEFFICIENT = 2n ** 40n;

/** @throws SolverStop `failed` for an irrational constraint or one with very long coefficients */
export function integerConstraints(
	scenario: Scenario,
	constraints: readonly ProblemConstraint[]
): IntegerConstraint[] {
	return constraints.map(({ terms, relation, value }, index) => {
		const form = collinsGisinForm(
			functionalOfTerms(scenario, [...terms, [`-(${value})`, []] as const])
		);
		const integers = integerFunctional(form);
		const long = integers.terms.some(({ coefficient: c }) => c * c > LARGEST_COEFFICIENT ** 2n);
		if (!isRational(form) || long || integers.denominator > LARGEST_COEFFICIENT)
			throw new SolverStop(
				'failed',
				`constraint ${index} needs rational coefficients of at most 12 digits`
			);
		return { relation, integers };
	});
}

import { ZERO, ratio } from '../exact/rational';
import type { Control, ProblemOf } from '../problem';
import { integerFunctional } from '../scenario/fixed-point';
import { collinsGisinForm, type Functional } from '../scenario/functional';
import { outcomeOfSides } from './exact-sides';
import { maximiseOverPolytope, objectiveOf, recordOfRows } from './no-signalling-programme';
import { noSignallingRows, withConstraints } from './no-signalling-rows';
import type { Outcome } from './outcome';
import { twiceTheErrors } from './strategy-tensor';
import { WorkClock } from './work-clock';

/**
 * Maximum of a functional over the no-signalling polytope {P(a|x) >= 0} in Collins-Gisin
 * coordinates, and under the problem's linear constraints: a linear programme.
 *
 * The simplex method's vertex and multipliers are turned into rationals (by their continued
 * fractions, else by solving the basis exactly) and checked exactly. Guarantee: both sides hold by
 * exact arithmetic; when they meet, `exact` is the maximum. Otherwise (or for irrational
 * coefficients) they enclose it, rounded outward.
 * @throws SolverStop `limit` beyond 20,000 inequalities or the budget, or when told to stop
 * @see Barrett et al., Phys. Rev. A 71, 022101 (2005)
 */
export async function noSignallingMaximum(
	problem: ProblemOf<'no-signalling'>,
	functional: Functional,
	control: Control
): Promise<Outcome> {
	const clock = new WorkClock(control, problem.seconds);
	const { scenario } = functional;
	const polytope = withConstraints(noSignallingRows(scenario), scenario, problem.constraints);
	const form = collinsGisinForm(functional);
	const integers = integerFunctional(form);
	const objective = objectiveOf(polytope, integers.terms);
	control.report({
		stage: 'no-signalling linear programme',
		iteration: 0,
		fraction: null,
		lower: null,
		upper: null
	});
	clock.check();
	const { behaviour, multipliers, solution } = await maximiseOverPolytope(
		polytope,
		objective,
		clock,
		control
	);

	const allowance = integers.allowance.add(twiceTheErrors(functional));
	const unit = ratio(1n, integers.denominator);
	const below = behaviour.value.mul(unit);
	const above = multipliers.bound.mul(unit);
	const sides = outcomeOfSides(below, above, allowance);
	return {
		...sides,
		method: {
			name: 'linear programme over the no-signalling polytope',
			inequalities: polytope.probabilityCount,
			constraints: polytope.rows.length - polytope.probabilityCount,
			coordinates: polytope.columns.length,
			iterations: solution.iterations,
			vertex: behaviour.how,
			multipliers: multipliers.how
		},
		certificate: {
			kind: 'linear-programme',
			primal: recordOfRows(polytope, behaviour.probabilities),
			dual: recordOfRows(
				polytope,
				polytope.rows.map(({ scale }, i) =>
					(multipliers.multipliers[i] ?? ZERO).mul(unit).mul(scale)
				)
			),
			value: sides.exact
		}
	};
}

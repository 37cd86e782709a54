import { exactOfDouble, printRational, toDoubleDown, toDoubleUp } from '../exact/rational';
import { SolverStop, type ProblemOf } from '../problem';
import { behaviourOfTable, valueOnBehaviour, type Behaviour } from '../scenario/behaviour';
import type { Functional } from '../scenario/functional';
import { behaviourOfStrategy } from '../scenario/strategy-behaviour';
import type { Outcome } from './outcome';

/**
 * The value of a functional on a box: a table of probabilities, or a state with measurements.
 *
 * Guarantee: exact for a rational functional on a rational table; otherwise the value with the
 * rounding allowance, both sides rounded outward. For a quantum strategy the value is numerical
 * here; the check proves its sides. The certificate is null: the check evaluates the box again.
 * @throws SolverStop `failed` naming the first defect of the box
 */
export function boxValue(problem: ProblemOf<'value'>, functional: Functional): Outcome {
	const { box } = problem;
	const value = valueOnBehaviour(functional, readBox(problem, functional));
	const exact = value.exact === null ? null : printRational(value.exact);
	const proved = box.kind === 'table';
	const middle = value.exact ?? exactOfDouble(value.value);
	// Twice: the check sums in another order.
	const allowance = exactOfDouble(value.exact ? 0 : 2 * value.error);
	return {
		lower: proved ? toDoubleDown(middle.sub(allowance)) : null,
		upper: proved ? toDoubleUp(middle.add(allowance)) : null,
		value: value.value,
		tolerance: exact === null ? 2 * value.error : null,
		optimum: null,
		guaranteed: { lower: proved, upper: proved },
		exact,
		method: { name: 'evaluation', box: box.kind },
		certificate: null
	};
}

function readBox({ box }: ProblemOf<'value'>, { scenario }: Functional): Behaviour {
	try {
		return box.kind === 'table'
			? behaviourOfTable(scenario, box.probabilities)
			: behaviourOfStrategy(scenario, box.strategy);
	} catch (error) {
		if (error instanceof RangeError) throw new SolverStop('failed', `the box: ${error.message}`);
		throw error;
	}
}

import {
	printRational,
	ratio,
	toDouble,
	toDoubleDown,
	toDoubleUp,
	type Rational
} from '../exact/rational';
import { SolverStop, type Control, type ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import { enumerateStrategies } from './enumerate-strategies';
import type { Outcome } from './outcome';
import { strategyTensor, type StrategyTensor } from './strategy-tensor';
import { WorkClock } from './work-clock';

/** Strategies enumerated at most: 2^26, some 10 s for two parties with ten inputs. */
export const STRATEGY_LIMIT = 2 ** 26;

/**
 * Maximum of a functional over local strategies: the maximum of a linear form over a polytope is at
 * a vertex, a deterministic strategy. Enumerates the strategies of all parties but the one with
 * most; that one gives its best reply, input by input.
 *
 * Guarantee: exact for rational coefficients (`exact` set). Otherwise the coefficients are rounded
 * to a common grid, the maximum is exact for those, and both sides carry the sum of the rounding
 * errors, rounded outward.
 * @throws SolverStop `limit` beyond 2^26 enumerated strategies, or when told to stop.
 * @see Fine, Phys. Rev. Lett. 48, 291 (1982); Werner and Wolf, Phys. Rev. A 64, 032112 (2001)
 */
export function localMaximum(
	problem: ProblemOf<'local'>,
	functional: Functional,
	control: Control
): Outcome {
	if (problem.constraints.length > 0)
		throw new SolverStop(
			'failed',
			'the local maximum under additional constraints has no solver yet; leave out "constraints"'
		);
	const tensor = strategyTensor(functional);
	if (tensor.count > STRATEGY_LIMIT)
		throw new SolverStop(
			'limit',
			`${tensor.count} deterministic strategies would have to be enumerated, more than the limit of ${STRATEGY_LIMIT}`
		);
	const clock = new WorkClock(control, problem.seconds);
	const best = enumerateStrategies(tensor, (enumerated) => {
		clock.check();
		control.report({
			stage: 'local strategies',
			iteration: enumerated,
			fraction: enumerated / tensor.count,
			lower: null,
			upper: null
		});
	});
	const value = ratio(best.value, tensor.denominator);
	const strategy = wholeStrategy(functional, tensor, best.digits);
	return localOutcome(value, tensor, strategy);
}

function localOutcome(value: Rational, tensor: StrategyTensor, strategy: number[][]): Outcome {
	const exact = tensor.allowance.n === 0n ? printRational(value) : null;
	const lower = toDoubleDown(value.sub(tensor.allowance));
	const upper = toDoubleUp(value.add(tensor.allowance));
	return {
		lower,
		upper,
		value: toDouble(value),
		tolerance: exact === null ? toDoubleUp(tensor.allowance) : null,
		optimum: null,
		guaranteed: { lower: true, upper: true },
		exact,
		method: {
			name: 'enumeration of deterministic strategies',
			enumerated: tensor.count,
			bestReplyOfParty: tensor.parties.at(-1)?.party ?? 0
		},
		certificate: {
			kind: 'deterministic-strategy',
			strategy,
			value: exact,
			enumerated: String(tensor.count)
		}
	};
}

/** Output 0 for every input on which the functional does not depend. */
function wholeStrategy(
	functional: Functional,
	tensor: StrategyTensor,
	digits: readonly (readonly number[])[]
): number[][] {
	const strategy = functional.scenario.outputs.map((counts) => counts.map(() => 0));
	tensor.parties.forEach(({ party, inputs }, k) => {
		inputs.forEach((input, i) => {
			const row = strategy[party];
			if (row) row[input] = digits[k]?.[i] ?? 0;
		});
	});
	return strategy;
}

import { printRational, ratio, toDouble, toDoubleDown, toDoubleUp } from '../exact/rational';
import { SolverStop, type Control, type ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import { enumerateStrategies, type BestStrategy } from './enumerate-strategies';
import type { Outcome } from './outcome';
import { strategyTensor, type StrategyTensor } from './strategy-tensor';
import { wholeStrategy } from './whole-strategy';
import { WorkClock } from './work-clock';

/** Strategies enumerated at most: 2^26, some 6 s for two parties with 26 inputs of two outputs. */
export const STRATEGY_LIMIT = 2 ** 26;

/**
 * Maximum of a functional over local strategies: the maximum of a linear form over a polytope is at
 * a vertex, a deterministic strategy. Enumerates the strategies of all parties but the one with
 * most; that one gives its best reply, input by input.
 *
 * Guarantee: exact for rational coefficients (`exact` set). Otherwise the coefficients are rounded
 * to a common grid, the maximum is exact for those, and both sides carry the sum of the rounding
 * errors, rounded outward. When the budget ends first, the best strategy met is the lower side and
 * there is no upper one.
 * @throws SolverStop `limit` beyond 2^26 enumerated strategies, `cancelled` when told to stop
 * @see Fine, Phys. Rev. Lett. 48, 291 (1982); Werner and Wolf, Phys. Rev. A 64, 032112 (2001)
 */
export function localMaximum(
	problem: ProblemOf<'local'>,
	functional: Functional,
	control: Control
): Outcome {
	const tensor = strategyTensor(functional);
	refuseTooMany(tensor);
	const clock = new WorkClock(control, problem.seconds);
	let enumerated = tensor.count;
	let best: BestStrategy;
	try {
		best = enumerateStrategies(tensor, (steps, bestSoFar) => {
			if (clock.left === 0 && !control.shouldStop()) throw new BudgetSpent(steps, bestSoFar());
			clock.check();
			reportProgress(control, 'local strategies', steps, tensor.count);
		});
	} catch (error) {
		if (!(error instanceof BudgetSpent)) throw error;
		({ enumerated, best } = error);
	}
	return localOutcome(functional, tensor, best, enumerated);
}

/** The budget ended in the midst of an enumeration. */
class BudgetSpent extends Error {
	constructor(
		readonly enumerated: number,
		readonly best: BestStrategy
	) {
		super();
	}
}

/** @throws SolverStop `limit` with the figure */
export function refuseTooMany({ count }: StrategyTensor): void {
	if (count > STRATEGY_LIMIT)
		throw new SolverStop(
			'limit',
			`${count} deterministic strategies would have to be enumerated, more than the limit of ${STRATEGY_LIMIT}`
		);
}

export function reportProgress(
	control: Control,
	stage: string,
	iteration: number,
	total: number
): void {
	const fraction = total > 0 ? Math.min(1, iteration / total) : null;
	control.report({ stage, iteration, fraction, lower: null, upper: null });
}

function localOutcome(
	functional: Functional,
	tensor: StrategyTensor,
	best: BestStrategy,
	enumerated: number
): Outcome {
	const value = ratio(best.value, tensor.denominator);
	const rational = tensor.allowance.n === 0n ? printRational(value) : null;
	const complete = enumerated === tensor.count;
	const exact = complete ? rational : null;
	return {
		lower: toDoubleDown(value.sub(tensor.allowance)),
		upper: complete ? toDoubleUp(value.add(tensor.allowance)) : null,
		value: complete ? toDouble(value) : null,
		tolerance: complete && exact === null ? toDoubleUp(tensor.allowance) : null,
		optimum: null,
		guaranteed: { lower: true, upper: complete },
		exact,
		method: {
			name: 'enumeration of deterministic strategies',
			enumerated,
			...(complete ? {} : { strategies: tensor.count, ended: 'the budget was used up' }),
			bestReplyOfParty: tensor.parties.at(-1)?.party ?? 0
		},
		certificate: {
			kind: 'deterministic-strategy',
			strategy: wholeStrategy(functional, tensor, best.digits),
			value: rational,
			enumerated: String(enumerated),
			...(complete ? {} : { complete: false })
		}
	};
}

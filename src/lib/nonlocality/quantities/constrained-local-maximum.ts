import { exactCoefficient } from '../exact/coefficient';
import { ZERO, printRational, ratio, type Rational } from '../exact/rational';
import { SolverStop, type Control, type ProblemOf } from '../problem';
import { absoluteSum, integerFunctional, type IntegerFunctional } from '../scenario/fixed-point';
import {
	collinsGisinForm,
	makeFunctional,
	type Functional,
	type Term
} from '../scenario/functional';
import { enumerateStrategies } from './enumerate-strategies';
import { outcomeOfSides } from './exact-sides';
import { integerConstraints, type IntegerConstraint } from './integer-constraints';
import { refuseTooMany, reportProgress } from './local-maximum';
import type { Outcome } from './outcome';
import { strategyTensor, twiceTheErrors } from './strategy-tensor';
import {
	bestMixture,
	type MixtureSolution,
	type MultiplierSign,
	type StrategyColumn
} from './strategy-programme';
import { wholeStrategy } from './whole-strategy';
import { WorkClock } from './work-clock';

/** Rounds of linear programme and enumeration: each adds one strategy. */
const ROUND_LIMIT = 2_000;

/**
 * Maximum of a functional over local behaviours that meet linear constraints: a linear programme
 * over mixtures of deterministic strategies, solved by column generation. Given the multipliers m of
 * the strategies listed so far, the local maximum of g - sum m_k (form_k - value_k) is an upper side;
 * the strategy that reaches it is listed next, until it is no better than those listed. A first
 * programme, without g, finds a mixture that meets the constraints or proves that there is none.
 *
 * Guarantee: both sides by exact arithmetic, equal when the last basis is exactly optimal.
 * @throws SolverStop `infeasible` (proved exactly), `limit`, `cancelled`, or `failed` for
 *   constraints that are not rational
 * @see Dantzig and Wolfe, Oper. Res. 8, 101 (1960)
 */
export async function constrainedLocalMaximum(
	problem: ProblemOf<'local'>,
	functional: Functional,
	control: Control
): Promise<Outcome> {
	const search = new MixtureSearch(problem, functional, control);
	await search.findFeasible();
	await search.maximise();
	return search.outcome();
}

class MixtureSearch {
	readonly #functional: Functional;
	readonly #control: Control;
	readonly #clock: WorkClock;
	readonly #objective: IntegerFunctional;
	readonly #constraints: readonly IntegerConstraint[];
	readonly #signs: readonly MultiplierSign[];
	readonly #columns: StrategyColumn[] = [];
	readonly #listed = new Set<string>();
	#rounds = 0;
	#enumerated = 0;
	/** Times the objective's denominator. */
	#below: { readonly value: Rational; readonly weights: readonly Rational[] } | null = null;
	#above: { readonly bound: Rational; readonly multipliers: readonly Rational[] } | null = null;

	constructor(problem: ProblemOf<'local'>, functional: Functional, control: Control) {
		this.#functional = functional;
		this.#control = control;
		this.#clock = new WorkClock(control, problem.seconds);
		this.#objective = integerFunctional(collinsGisinForm(functional));
		this.#constraints = integerConstraints(functional.scenario, problem.constraints);
		this.#signs = this.#constraints.map(({ relation }) =>
			relation === '=' ? 'any' : relation === '<=' ? '>=' : '<='
		);
		const large = this.#constraints.findIndex(({ integers }) => absoluteSum(integers) >= 2n ** 53n);
		if (large >= 0)
			throw new SolverStop(
				'failed',
				`the coefficients of constraint ${large} sum to more than 2^53`
			);
		this.#list(
			this.#bestStrategy(
				this.#constraints.map(() => ZERO),
				true
			).strategy
		);
	}

	/** A mixture of listed strategies that meets the constraints. @throws SolverStop `infeasible` */
	async findFeasible(): Promise<void> {
		for (;;) {
			const columns = this.#columns.map((column) => ({ ...column, objective: 0n }));
			const solution = await this.#solve(columns, 1n);
			if (solution.bound.n === 0n && solution.weights) return;
			const { bound, strategy } = this.#bestStrategy(solution.multipliers, false);
			if (bound.compare(0) < 0)
				throw new SolverStop('infeasible', 'no local behaviour meets the constraints');
			if (!this.#list(strategy))
				throw new SolverStop(
					'failed',
					'whether a local behaviour meets the constraints is not clear'
				);
		}
	}

	/** Adds strategies until the two sides meet, none is new, or the budget ends. */
	async maximise(): Promise<void> {
		try {
			for (;;) {
				const solution = await this.#solve(this.#columns, null);
				if (solution.weights) this.#below = { value: solution.bound, weights: solution.weights };
				const { bound, strategy } = this.#bestStrategy(solution.multipliers, true);
				if (this.#above === null || bound.compare(this.#above.bound) < 0)
					this.#above = { bound, multipliers: solution.multipliers };
				if (bound.equals(solution.bound) || !this.#list(strategy)) return;
			}
		} catch (error) {
			const ended = error instanceof SolverStop && error.status === 'limit';
			if (!ended || !this.#below || !this.#above) throw error; // else both sides are known
		}
	}

	outcome(): Outcome {
		if (!this.#below || !this.#above)
			throw new SolverStop('failed', 'the linear programme gave no exact mixture');
		const { denominator } = this.#objective;
		const unit = ratio(1n, denominator);
		const [below, above] = [this.#below.value.mul(unit), this.#above.bound.mul(unit)];
		const allowance = this.#objective.allowance.add(twiceTheErrors(this.#functional));
		const sides = outcomeOfSides(below, above, allowance);
		const { weights } = this.#below;
		const { multipliers } = this.#above;
		return {
			...sides,
			method: {
				name: 'linear programme over deterministic strategies, by column generation',
				strategies: this.#columns.length,
				rounds: this.#rounds,
				enumerated: this.#enumerated
			},
			certificate: {
				kind: 'local-mixture',
				mixture: this.#columns.flatMap(({ strategy }, i) => {
					const weight = weights[i] ?? ZERO;
					return weight.n === 0n ? [] : [{ weight: printRational(weight), strategy }];
				}),
				multipliers: this.#constraints.map(({ integers }, k) =>
					printRational((multipliers[k] ?? ZERO).mul(ratio(integers.denominator, denominator)))
				),
				value: sides.exact
			}
		};
	}

	#solve(columns: readonly StrategyColumn[], box: bigint | null): Promise<MixtureSolution> {
		if (++this.#rounds > ROUND_LIMIT)
			throw new SolverStop('limit', `more than the limit of ${ROUND_LIMIT} rounds would be needed`);
		this.#clock.check();
		return bestMixture(columns, this.#signs, box, this.#clock, this.#control);
	}

	/** The largest objective - sum m_k constraint_k (with or without the objective), exactly. */
	#bestStrategy(multipliers: readonly Rational[], withObjective: boolean) {
		const terms: Term[] = withObjective ? termsOf(this.#objective, ratio(1n)) : [];
		this.#constraints.forEach(({ integers }, k) => {
			terms.push(...termsOf(integers, (multipliers[k] ?? ZERO).neg()));
		});
		const { scenario } = this.#functional;
		const tensor = strategyTensor(makeFunctional(scenario, terms));
		refuseTooMany(tensor);
		const best = enumerateStrategies(tensor, (steps) => {
			this.#clock.check();
			const stage = `local strategies, round ${this.#rounds}`;
			reportProgress(this.#control, stage, steps, tensor.count);
		});
		this.#enumerated += tensor.count;
		return {
			bound: ratio(best.value, tensor.denominator),
			strategy: wholeStrategy({ scenario }, tensor, best.digits)
		};
	}

	/** False when the strategy is listed already. */
	#list(strategy: readonly (readonly number[])[]): boolean {
		const key = JSON.stringify(strategy);
		if (this.#listed.has(key)) return false;
		this.#listed.add(key);
		this.#columns.push({
			strategy,
			objective: valueAt(this.#objective, strategy),
			constraints: this.#constraints.map(({ integers }) => Number(valueAt(integers, strategy)))
		});
		return true;
	}
}

function termsOf({ terms }: IntegerFunctional, factor: Rational): Term[] {
	if (factor.n === 0n) return [];
	return terms.map(({ coefficient, events }) => ({
		events,
		coefficient: exactCoefficient(factor.mul(ratio(coefficient)))
	}));
}

function valueAt({ terms }: IntegerFunctional, strategy: readonly (readonly number[])[]): bigint {
	return terms.reduce(
		(sum, { coefficient, events }) =>
			events.every(([p, x, a]) => strategy[p]?.[x] === a) ? sum + coefficient : sum,
		0n
	);
}

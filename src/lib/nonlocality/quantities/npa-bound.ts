import { SolverStop, type Control, type ProblemOf } from '../problem';
import type { Monomial, MomentCertificate } from '../certificates/types';
import {
	SemidefiniteSolver,
	type Ending,
	type Iterate
} from '../optimization/semidefinite-programme';
import type { Functional } from '../scenario/functional';
import { provenFeasibleValue, provenUpperBound, type Multipliers } from './guaranteed-moments';
import { printLevel } from './moment-level';
import type { MomentMatrix } from './moment-matrix';
import { makeMomentProblem, type MomentProblem } from './moment-problem';
import type { Outcome } from './outcome';

/**
 * Guaranteed gap at which more iterations would be wasted: relative to the objective's scale (its
 * largest coefficient), but no more than LARGEST_GAP unless rounding at that scale forbids it.
 */
const ENOUGH_GAP = 1e-9;
const LARGEST_GAP = 2e-9;
const ROUNDING_GAP = 1e-10;
/** The solver's own end, where rounding keeps the guaranteed gap from closing. */
const SOLVER_TOLERANCE = 1e-11;
const MOST_ITERATIONS = 80;
/** A gap smaller by less than this factor is no progress. */
const WORTHWHILE = 0.8;
/** How far to go from the last proved point towards an iterate that cannot be proved itself. */
const TOWARDS_ITERATE = [1, 0.99, 0.95, 0.85, 0.7, 0.5, 0.25];
/**
 * Iterations without such progress after which there will be none: few where rounding is the
 * reason, more where the problem has no interior (Hardy's) and each step is short.
 */
const PATIENCE = 3;
const LONG_PATIENCE = 15;
const NEARLY = 1e-6;

/**
 * Optimum of the moment-matrix relaxation for the functional g, from both sides.
 * Guarantee: `upper` is proved from the dual multiplier, `lower` is g at moments proved feasible
 * (a bound on this relaxation only); both rounded outward. `optimum` is the solver's own.
 * Cost: about n^4 + m^3/6 operations an iteration, n rows and m moments; 8 to 20 iterations.
 * @throws SolverStop `limit` past the size limits, `failed` for a level that lacks a moment,
 *   `cancelled` when told to stop. When the budget runs out the bounds proved so far are returned.
 * Source: Navascues, Pironio, Acin, Phys. Rev. Lett. 98, 010401 (2007).
 */
export function npaBound(problem: ProblemOf<'npa'>, g: Functional, control: Control): Outcome {
	const started = control.now();
	const relaxation = makeMomentProblem(problem, g, () => refuseWhenCancelled(control));
	const search = new BoundSearch(relaxation, control, started + 1000 * problem.seconds);
	const run = search.run();
	const { matrix, programme } = relaxation;
	if (!Number.isFinite(search.upper))
		throw new SolverStop('failed', 'the interior-point method found no bound');
	return {
		lower: search.lower,
		upper: search.upper,
		value: null,
		tolerance: null,
		optimum: search.clippedOptimum(),
		guaranteed: { lower: search.lower !== null, upper: true },
		exact: null,
		method: {
			level: problem.level,
			nonNegative: problem.nonNegative,
			size: matrix.size,
			moments: programme.unknowns,
			rows: programme.rows.length,
			iterations: run.iterations,
			residual: search.residual,
			ending: run.ending,
			...(run.ending === 'budget' && {
				note: `stopped after ${problem.seconds} s; the bounds are those proved by then`
			}),
			...(programme.equalities.length > 0 && {
				equalities:
					'an equality leaves no moments that are exactly feasible in doubles: no lower side'
			})
		},
		certificate: search.certificate()
	};
}

class BudgetSpent extends Error {}

function refuseWhenCancelled(control: Control): void {
	if (control.shouldStop()) throw new SolverStop('cancelled', 'cancelled');
}

class BoundSearch {
	upper = Infinity;
	lower: number | null = null;
	optimum: number | null = null;
	residual = Infinity;
	readonly #problem: MomentProblem;
	readonly #control: Control;
	readonly #deadline: number;
	/** A power of two near the largest coefficient: the solver sees entries of about 1. */
	readonly #scale: number;
	readonly #target: number;
	readonly #work: Float64Array;
	readonly #gamma: Float64Array;
	#multipliers: Multipliers | null = null;
	#shift = 0;
	#moments: Float64Array | null = null;
	#bestError = Infinity;
	#bestGap = Infinity;
	#idle = 0;

	constructor(problem: MomentProblem, control: Control, deadline: number) {
		const { programme } = problem;
		const largest = programme.objective.subarray(1).reduce((a, c) => Math.max(a, Math.abs(c)), 0);
		this.#problem = problem;
		this.#control = control;
		this.#deadline = deadline;
		this.#scale = largest > 0 ? 2 ** Math.round(Math.log2(largest)) : 1;
		this.#target = Math.max(
			Math.min(ENOUGH_GAP * this.#scale, LARGEST_GAP),
			ROUNDING_GAP * this.#scale
		);
		this.#work = new Float64Array(programme.size ** 2);
		this.#gamma = new Float64Array(programme.size ** 2);
	}

	run(): { ending: Ending | 'budget'; iterations: number } {
		const { programme } = this.#problem;
		let iterations = 0;
		const scaled = {
			...programme,
			objective: programme.objective.map((c) => c / this.#scale)
		};
		const solver = new SemidefiniteSolver(scaled, this.#problem.start, {
			poll: () => {
				refuseWhenCancelled(this.#control);
				if (this.#control.now() > this.#deadline) throw new BudgetSpent();
			},
			visit: (iterate) => {
				iterations = iterate.iteration;
				return this.#visit(iterate);
			}
		});
		try {
			return solver.run({ tolerance: SOLVER_TOLERANCE, mostIterations: MOST_ITERATIONS });
		} catch (error) {
			if (!(error instanceof BudgetSpent)) throw error;
			return { ending: 'budget', iterations };
		}
	}

	/** Keeps the best bounds of all iterates; true when they are good enough, or stopped improving. */
	#visit(iterate: Iterate): boolean {
		const scale = this.#scale;
		const multipliers = {
			matrix: iterate.multiplier.map((value) => value * scale),
			rows: iterate.rowMultipliers.map((value) => Math.max(0, value) * scale),
			equalities: iterate.equalityMultipliers.map((value) => value * scale)
		};
		const proven = provenUpperBound(this.#problem, multipliers, this.#work);
		if (proven && proven.bound < this.upper) {
			this.upper = proven.bound;
			this.#shift = proven.shift;
			this.#multipliers = multipliers;
		}
		this.#keepFeasible(iterate.moments);
		const error = Math.abs(iterate.dual - iterate.primal) + iterate.residual;
		if (error < this.#bestError) {
			this.#bestError = error;
			this.optimum = (scale * (iterate.dual + iterate.primal)) / 2;
			this.residual = iterate.residual;
		}
		this.#control.report({
			stage: `NPA level ${printLevel(this.#problem.matrix.level)}`,
			iteration: iterate.iteration,
			fraction: null,
			lower: this.lower,
			upper: Number.isFinite(this.upper) ? this.upper : null
		});
		this.#refuseInfeasible();
		return this.#isEnough();
	}

	/**
	 * Keeps y when Gamma(y) is proved positive and g is larger there. Once the iterates lie too near
	 * the boundary for that, goes as far towards them from the last good point as the proof allows.
	 */
	#keepFeasible(moments: Float64Array): void {
		const from = this.#moments;
		for (const fraction of from ? TOWARDS_ITERATE : [1]) {
			const candidate =
				from && fraction < 1
					? moments.map((value, i) => (1 - fraction) * (from[i] ?? 0) + fraction * value)
					: moments.slice();
			candidate[0] = 1;
			const value = provenFeasibleValue(this.#problem, candidate, this.#work, this.#gamma);
			if (value === null) continue;
			if (this.lower === null || value > this.lower) {
				this.lower = value;
				this.#moments = candidate;
			}
			return;
		}
	}

	/** Without a proved lower side the iterate itself stands in for it. */
	#isEnough(): boolean {
		const gap = Math.abs(this.upper - (this.lower ?? this.optimum ?? Infinity));
		if (gap <= this.#target) return true;
		if (gap < WORTHWHILE * this.#bestGap) {
			this.#idle = 0;
			this.#bestGap = gap;
			return false;
		}
		this.#idle++;
		return this.#idle >= (gap < NEARLY * this.#scale ? PATIENCE : LONG_PATIENCE);
	}

	/** Every |y_i| is at most 1: an upper side below this proves that there is no feasible point. */
	#refuseInfeasible(): void {
		const { programme, objectiveError } = this.#problem;
		const least = programme.objective.reduce(
			(sum, c, i) => sum + (i === 0 ? c : -Math.abs(c)),
			-objectiveError - 1e-9 * this.#scale
		);
		if (this.upper < least)
			throw new SolverStop(
				'infeasible',
				'no moment matrix of this level satisfies the constraints'
			);
	}

	/** The solver's own optimum, which rounding may put outside what is proved. */
	clippedOptimum(): number | null {
		if (this.optimum === null) return null;
		return Math.min(Math.max(this.optimum, this.lower ?? -Infinity), this.upper);
	}

	certificate(): MomentCertificate | null {
		const multipliers = this.#multipliers;
		if (!multipliers) return null;
		const { matrix, probabilities, inequalities, equalities } = this.#problem;
		const n = matrix.size;
		const multiplier: number[] = [];
		for (let i = 0; i < n; i++)
			multiplier.push(...multipliers.matrix.subarray(i * n, i * n + i + 1));
		const rowMultipliers: Record<string, number> = {};
		probabilities.forEach(({ key }, j) => (rowMultipliers[key] = multipliers.rows[j] ?? 0));
		const constraintMultipliers: number[] = [];
		inequalities.forEach(({ place }, j) => {
			constraintMultipliers[place] = multipliers.rows[probabilities.length + j] ?? 0;
		});
		equalities.forEach(({ place }, k) => {
			constraintMultipliers[place] = multipliers.equalities[k] ?? 0;
		});
		return {
			kind: 'npa-dual',
			monomials: printMonomials(matrix),
			multiplier,
			rowMultipliers,
			...(constraintMultipliers.length > 0 && { constraintMultipliers }),
			shift: this.#shift,
			bound: this.upper,
			moments: this.#moments ? [...this.#moments.subarray(1)] : null,
			feasibleValue: this.lower
		};
	}
}

function printMonomials(matrix: MomentMatrix): Monomial[] {
	const { inputs, outputs } = matrix.alphabet;
	return matrix.words.map((word) =>
		word.map((letters, party) =>
			letters.map(
				(letter) => [inputs[party]?.[letter] ?? 0, outputs[party]?.[letter] ?? 0] as const
			)
		)
	);
}

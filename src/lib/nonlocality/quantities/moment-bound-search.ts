import { SolverStop, type Control, type ProblemOf } from '../problem';
import type { MomentCertificate } from '../certificates/types';
import type { MomentProgramme } from '../optimization/moment-programme';
import type { Ending, Iterate } from '../optimization/semidefinite-programme';
import type { Functional } from '../scenario/functional';
import { exactMomentBound, type ExactBound } from './exact-moments';
import { provenFeasibleValue, provenUpperBound, type Multipliers } from './guaranteed-moments';
import { printMultipliers } from './moment-certificate';
import { printLevel } from './moment-level';
import type { MomentProblem } from './moment-problem';

/**
 * Guaranteed gap at which more iterations would be wasted: relative to the objective's scale (its
 * largest coefficient), but no more than LARGEST_GAP unless rounding at that scale forbids it.
 */
const ENOUGH_GAP = 1e-9;
const LARGEST_GAP = 2e-9;
const ROUNDING_GAP = 1e-10;
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

class BudgetSpent extends Error {}

/** @throws SolverStop `cancelled` when told to stop. */
export function refuseWhenCancelled(control: Control): void {
	if (control.shouldStop()) throw new SolverStop('cancelled', 'cancelled');
}

/** What a route's solver is given: when to stop, and what to do with its iterates. */
export interface RouteHooks {
	/** Called at least every few milliseconds of work; stops the solver by throwing. */
	poll(): void;
	/** Sees an iterate of the original problem; true ends the iteration. */
	visit(iterate: Iterate): boolean;
	/** Told of an iterate that is not worth a proof yet. */
	pass(iteration: number): void;
}

/** One way to solve a moment problem: everything that may differ in how, and nothing in what. */
export interface Route {
	/** For the result's `method`. */
	readonly method: Readonly<Record<string, unknown>>;
	/** The relaxation as it stands: there is no other route to fall back to. */
	readonly isPlain?: true;
	/**
	 * @param programme the original one, its objective divided by `scale`, to entries of about 1:
	 *   iterates are those of this one.
	 */
	run(programme: MomentProgramme, scale: number, hooks: RouteHooks): RunEnd;
	/** The last iterate when it was not visited, for a run that was stopped. */
	unvisited?(): Iterate | null;
}

export interface RunEnd {
	readonly ending: Ending | 'budget';
	readonly iterations: number;
}

/**
 * Keeps the best proved sides among the iterates of one or more routes. Whatever the route, the
 * proofs are about the original problem.
 */
export class MomentBoundSearch {
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

	/** @param deadline on the clock of `control`. */
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

	/** True when a route got as near as the target, or as rounding allows. */
	get isClose(): boolean {
		return this.#bestGap <= NEARLY * this.#scale;
	}

	run(route: Route): RunEnd {
		const { programme } = this.#problem;
		let iterations = 0;
		this.#idle = 0;
		const scaled = {
			...programme,
			objective: programme.objective.map((c) => c / this.#scale)
		};
		const hooks: RouteHooks = {
			poll: () => {
				refuseWhenCancelled(this.#control);
				if (this.#control.now() > this.#deadline) throw new BudgetSpent();
			},
			visit: (iterate) => {
				iterations = iterate.iteration;
				return this.#visit(iterate);
			},
			pass: (iteration) => {
				iterations = iteration;
				this.#report(iteration);
			}
		};
		try {
			return route.run(scaled, this.#scale, hooks);
		} catch (error) {
			if (!(error instanceof BudgetSpent)) throw error;
			const last = route.unvisited?.();
			if (last) this.#visit(last);
			return { ending: 'budget', iterations };
		}
	}

	#report(iteration: number): void {
		this.#control.report({
			stage: `NPA level ${printLevel(this.#problem.matrix.level)}`,
			iteration,
			fraction: null,
			lower: this.lower,
			upper: Number.isFinite(this.upper) ? this.upper : null
		});
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
		this.#report(iterate.iteration);
		this.#refuseInfeasible();
		return this.#isEnough();
	}

	/**
	 * Keeps y when Gamma(y) is proved positive and g is larger there. Once the iterates lie too near
	 * the boundary for that, goes as far towards them from the last good point as the proof allows.
	 */
	#keepFeasible(moments: Float64Array): void {
		const { programme, start } = this.#problem;
		const from = this.#moments ?? (programme.rows.length === 0 ? start : null);
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
	clippedOptimum(upper: number): number | null {
		if (this.optimum === null) return null;
		return Math.min(Math.max(this.optimum, this.lower ?? -Infinity), upper);
	}

	/** The bound once more in rationals, where the problem is rational. */
	exactBound(problem: ProblemOf<'npa'>, g: Functional): ExactBound | null {
		const certificate = this.certificate();
		if (!certificate || !this.#multipliers) return null;
		return exactMomentBound(problem, g, this.#problem, this.#multipliers, certificate);
	}

	certificate(): MomentCertificate | null {
		if (!this.#multipliers) return null;
		return {
			...printMultipliers(this.#problem, this.#multipliers),
			shift: this.#shift,
			bound: this.upper,
			moments: this.#moments ? [...this.#moments.subarray(1)] : null,
			feasibleValue: this.lower
		};
	}
}

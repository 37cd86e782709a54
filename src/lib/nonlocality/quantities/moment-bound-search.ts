import { SolverStop, type Control, type ProblemOf } from '../problem';
import type { MomentCertificate } from '../certificates/types';
import type { MomentProgramme } from '../optimization/moment-programme';
import type { Ending, Iterate } from '../optimization/interior-point-loop';
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
/** How far to go from the maximally mixed state, well inside, towards an iterate ... */
const NEARLY_THE_ITERATE = [1 - 1e-10, 1 - 1e-9, 1 - 1e-8, 1 - 1e-7];
/** ... and from the last proved point, where the iterate cannot be proved itself. */
const TOWARDS_ITERATE = [0.99, 0.95, 0.85, 0.7, 0.5, 0.25];
/** Parts of an earlier multiplier to mix in where the last one cannot be proved positive. */
const INTERIOR_PARTS = [0.01, 0.03, 0.1, 0.3];
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
	/**
	 * Sees an iterate of the original problem; true ends the iteration.
	 * @param earlier iterates that were passed, the last first, for when this one lies too near the
	 *   boundary to be proved.
	 */
	visit(iterate: Iterate, earlier?: () => Iterable<Iterate>): boolean;
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
	/** The last multipliers whose Z is proved positive as it is. */
	#interior: Multipliers | null = null;
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
			visit: (iterate, earlier) => {
				iterations = iterate.iteration;
				return this.#visit(iterate, earlier);
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
	#visit(iterate: Iterate, earlier?: () => Iterable<Iterate>): boolean {
		const shiftless = this.#keepMultipliers(this.#scaled(iterate));
		const feasible = this.#keepFeasible(iterate.moments);
		if (earlier && ((!shiftless && !this.#interior) || (!feasible && !this.#moments)))
			this.#seekInterior(earlier());
		if (!shiftless) this.#keepMixtures(this.#scaled(iterate));
		if (!feasible) this.#keepTowards(iterate.moments);
		const scale = this.#scale;
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

	#scaled(iterate: Iterate): Multipliers {
		const scale = this.#scale;
		return {
			matrix: iterate.multiplier.map((value) => value * scale),
			rows: iterate.rowMultipliers.map((value) => Math.max(0, value) * scale),
			equalities: iterate.equalityMultipliers.map((value) => value * scale)
		};
	}

	/** Keeps the bound they prove when it is the best; true when Z is proved positive as it is. */
	#keepMultipliers(multipliers: Multipliers): boolean {
		const proven = provenUpperBound(this.#problem, multipliers, this.#work);
		if (proven && proven.bound < this.upper) {
			this.upper = proven.bound;
			this.#shift = proven.shift;
			this.#multipliers = multipliers;
		}
		if (proven?.shift !== 0) return false;
		this.#interior = multipliers;
		return true;
	}

	/**
	 * Near the optimum rounding hides whether Z is positive. A small part of an earlier multiplier,
	 * well inside, often costs less than the shift that would cover it.
	 */
	#keepMixtures(multipliers: Multipliers): void {
		const interior = this.#interior;
		if (!interior) return;
		for (const part of INTERIOR_PARTS) {
			const mixed = (a: Float64Array, b: Float64Array) =>
				a.map((value, i) => (1 - part) * value + part * (b[i] ?? 0));
			const mixture = {
				matrix: mixed(multipliers.matrix, interior.matrix),
				rows: mixed(multipliers.rows, interior.rows),
				equalities: mixed(multipliers.equalities, interior.equalities)
			};
			if (this.#keepMultipliers(mixture)) break;
		}
		this.#interior = interior;
	}

	/** Earlier iterates, the last first, until both sides have one that is proved as it is. */
	#seekInterior(earlier: Iterable<Iterate>): void {
		for (const iterate of earlier) {
			if (!this.#interior) this.#keepMultipliers(this.#scaled(iterate));
			if (!this.#moments) this.#keepFeasible(iterate.moments);
			if (this.#interior && this.#moments) return;
		}
	}

	/** Keeps y when Gamma(y) is proved positive; false when it is not. */
	#keepFeasible(moments: Float64Array): boolean {
		const candidate = moments.slice();
		candidate[0] = 1;
		const value = provenFeasibleValue(this.#problem, candidate, this.#work, this.#gamma);
		if (value === null) return false;
		if (this.lower === null || value > this.lower) {
			this.lower = value;
			this.#moments = candidate;
		}
		return true;
	}

	/** Goes from a good point towards an iterate, as far as the proof allows. */
	#keepTowards(moments: Float64Array): void {
		const { programme, start } = this.#problem;
		const towards = (from: Float64Array, fractions: readonly number[]) =>
			fractions.some((fraction) =>
				this.#keepFeasible(
					moments.map((value, i) => (1 - fraction) * (from[i] ?? 0) + fraction * value)
				)
			);
		if (programme.rows.length === 0) towards(start, NEARLY_THE_ITERATE);
		if (this.#moments) towards(this.#moments, TOWARDS_ITERATE);
	}

	/** Without a proved lower side the iterate itself stands in for it. */
	#isEnough(): boolean {
		const gap = Math.abs(this.upper - (this.lower ?? this.optimum ?? Infinity));
		const improves = gap < WORTHWHILE * this.#bestGap;
		if (improves) this.#bestGap = gap;
		if (gap <= this.#target) return true;
		if (improves) {
			this.#idle = 0;
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
		return exactMomentBound(problem, g, this.#problem, this.#multipliers, certificate, () =>
			refuseWhenCancelled(this.#control)
		);
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

import { largestMagnitude } from '../linalg/dense';
import { makeKernels, type KernelDemand, type Kernels } from '../linalg/kernels/kernels';
import { stepScratch } from '../linalg/kernels/plain-step';
import { InteriorPoint, SMALLEST_STEP, type Iterate } from './interior-point';
import type { MomentProgramme } from './moment-programme';
import { makeDirection, NewtonSystem, type Direction } from './newton-system';

export type { Iterate } from './interior-point';

export interface SolverHooks {
	/** Called at least every few milliseconds of work; stops the solver by throwing. */
	poll(): void;
	/** Sees every iterate; true ends the iteration. */
	visit(iterate: Iterate): boolean;
}

export type Ending = 'converged' | 'accepted' | 'stalled' | 'iterations';

export interface SolverOptions {
	/** Relative gap and residual at which the iteration ends by itself. */
	readonly tolerance: number;
	readonly mostIterations: number;
}

/** What the solver takes of the kernels' memory, generously: n x n matrices, Lanczos' basis, lists. */
function demandOf({ size: n, unknowns: m }: MomentProgramme): KernelDemand {
	const square = (n + 3) ** 2;
	return {
		doubles: m * m + 30 * m + 30 * square + stepScratch(n),
		arrays: 200,
		order: Math.max(n, m)
	};
}

/**
 * Fraction of the way to the boundary that a step takes: little more than LEAST_FRACTION where the
 * predictor is stopped early, MORE_FRACTION more where it gets all the way (Toh, Todd, Tutuncu,
 * Optim. Methods Softw. 11, 545 (1999)).
 */
const LEAST_FRACTION = 0.9;
const MORE_FRACTION = 0.09;
/** Smallest centring: below it the corrector's second-order terms are noise. */
const LEAST_CENTRING = 1e-6;
/** Further corrections, each far cheaper than a new factorisation, while steps stay short ... */
const MOST_CORRECTIONS = 2;
const LONG_STEPS = 0.95;
/** ... and the product of the two steps grows by this factor. */
const WORTHWHILE = 1.02;

/** Residual of a direction, relative to the complementarity, at which it is refined no further ... */
const ENOUGH_ACCURACY = 1e-4;
/** ... and one above which the linear system is regularised and solved again. */
const TOLERABLE_ERROR = 0.03;
const MOST_REFINEMENTS = 3;
/** A refinement that leaves more than this share of the error has met the rounding errors. */
const WORTHWHILE_REFINEMENT = 0.5;

/**
 * Primal-dual interior-point method: the HKM direction with Mehrotra's predictor and corrector (the
 * corrector repeated where that lengthens the steps), started from a strictly feasible y (rows may
 * start infeasible) and X = Gamma(y)^-1. The multiplier is kept on its linear equalities by
 * projection, which the disjoint supports make an average over cells.
 * Helmberg, Rendl, Vanderbei, Wolkowicz, SIAM J. Optim. 6, 342 (1996); Mehrotra's corrector as in
 * Fujisawa, Kojima, Nakata, Yamashita, SDPA manual (2002).
 * The objective should be scaled to entries of about 1.
 */
export class SemidefiniteSolver {
	readonly #hooks: SolverHooks;
	readonly #kernels: Kernels;
	readonly #point: InteriorPoint;
	readonly #newton: NewtonSystem;
	readonly #attempts: readonly [Attempt, Attempt];

	/** @param start moments with Gamma > 0, `start[0] = 1`. */
	constructor(programme: MomentProgramme, start: Float64Array, hooks: SolverHooks) {
		const kernels = makeKernels(demandOf(programme));
		const attempt = () => ({
			direction: makeDirection(programme, kernels),
			spare: makeDirection(programme, kernels),
			fraction: LEAST_FRACTION,
			error: Infinity
		});
		this.#hooks = hooks;
		this.#kernels = kernels;
		this.#point = new InteriorPoint(programme, start, kernels);
		this.#newton = new NewtonSystem(programme, kernels, () => hooks.poll());
		this.#attempts = [attempt(), attempt()];
	}

	/** Once only: the iterates' arrays are given back when it ends. */
	run(options: SolverOptions): { ending: Ending; iterations: number } {
		try {
			return this.#iterate(options);
		} finally {
			this.#kernels.release();
		}
	}

	#iterate(options: SolverOptions): { ending: Ending; iterations: number } {
		if (!this.#point.begin()) return { ending: 'stalled', iterations: 0 };
		for (let iteration = 0; ; iteration++) {
			this.#hooks.poll();
			const iterate = this.#point.measure(iteration);
			if (this.#hooks.visit(iterate)) return { ending: 'accepted', iterations: iteration };
			const scale = 1 + Math.abs(iterate.primal);
			if (
				Math.abs(iterate.dual - iterate.primal) <= options.tolerance * scale &&
				iterate.residual <= options.tolerance
			)
				return { ending: 'converged', iterations: iteration };
			if (iteration === options.mostIterations)
				return { ending: 'iterations', iterations: iteration };
			if (!this.#advance()) return { ending: 'stalled', iterations: iteration };
		}
	}

	#advance(): boolean {
		const point = this.#point;
		if (!this.#newton.prepare(point)) return false;
		const tolerable = TOLERABLE_ERROR * point.complementarity();
		let [best, other] = this.#attempts;
		this.#seek(best);
		while (!(best.error <= tolerable) && this.#newton.regularise()) {
			this.#seek(other);
			if (other.error < best.error || Number.isNaN(best.error)) [best, other] = [other, best];
		}
		const { direction, fraction } = best;
		point.projectDirection(direction);
		const steps = this.#steps(direction, fraction);
		const movedX = point.moveMultiplier(direction, steps.multiplier);
		const movedY = point.moveMoments(direction, steps.moments);
		return movedX > SMALLEST_STEP || movedY > SMALLEST_STEP;
	}

	/** Fills `attempt` with the corrected direction and its error. */
	#seek(attempt: Attempt): void {
		const point = this.#point;
		let { direction, spare } = attempt;
		this.#newton.solve(point, 0, null, spare);
		const ahead = this.#steps(spare, 1);
		const fraction = LEAST_FRACTION + MORE_FRACTION * Math.min(ahead.multiplier, ahead.moments);
		const target = this.#centring(spare, ahead) * point.complementarity();
		this.#newton.solve(point, target, spare, direction);
		let steps = this.#steps(direction, fraction);
		for (let extra = 0; extra < MOST_CORRECTIONS && product(steps) < LONG_STEPS; extra++) {
			this.#newton.solve(point, target, direction, spare);
			const nextSteps = this.#steps(spare, fraction);
			if (product(nextSteps) < WORTHWHILE * product(steps)) break;
			[direction, spare] = [spare, direction];
			steps = nextSteps;
		}
		attempt.direction = direction;
		attempt.spare = spare;
		attempt.fraction = fraction;
		attempt.error = this.#refine(attempt);
	}

	/**
	 * Brings the errors of dX well below X's smallest eigenvalues, which are about as large as the
	 * complementarity. Projection alone would spread them over all of X, and where the optimal
	 * moments are not unique they would end the method early.
	 * @returns the largest residual left; NaN after a useless factorisation.
	 */
	#refine({ direction, spare }: Attempt): number {
		const point = this.#point;
		const enough = ENOUGH_ACCURACY * point.complementarity();
		let before = Infinity;
		for (let step = 0; ; step++) {
			const residuals = point.residualsAfter(direction);
			const error = largestMagnitude(residuals.subarray(1));
			if (error <= enough || step === MOST_REFINEMENTS) return error;
			if (!(error <= WORTHWHILE_REFINEMENT * before)) return error;
			before = error;
			this.#newton.correct(point, direction, residuals, spare);
		}
	}

	/** Mehrotra's choice: little centring when the predictor gets far by itself. */
	#centring(predictor: Direction, { multiplier, moments }: Steps): number {
		const point = this.#point;
		const ahead = point.complementarityAfter(predictor, multiplier, moments);
		const ratio = Math.max(0, ahead / point.complementarity());
		const power = Math.max(1, 3 * Math.min(multiplier, moments) ** 2);
		return Math.min(1, Math.max(LEAST_CENTRING, ratio ** power));
	}

	#steps(direction: Direction, fraction: number): Steps {
		return {
			multiplier: Math.min(1, fraction * this.#point.multiplierStep(direction)),
			moments: Math.min(1, fraction * this.#point.slackStep(direction))
		};
	}
}

/** A direction, room for another, and the largest residual it leaves of the dual's equalities. */
interface Attempt {
	direction: Direction;
	spare: Direction;
	/** Of the way to the boundary, to be taken along it. */
	fraction: number;
	error: number;
}

interface Steps {
	readonly multiplier: number;
	readonly moments: number;
}

function product(steps: Steps): number {
	return steps.multiplier * steps.moments;
}

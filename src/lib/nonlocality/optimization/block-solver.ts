import { largestMagnitude } from '../linalg/dense';
import { BlockInteriorPoint, SMALLEST_STEP } from './block-interior-point';
import { BlockNewtonSystem, type BlockDirection } from './block-newton-system';
import type { BlockProgramme } from './block-programme';
import type { Ending, SolverHooks, SolverOptions } from './semidefinite-programme';

/** Fraction of the way to the boundary that a step takes. */
const STEP_FRACTION = 0.97;
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
 * The primal-dual interior-point method of semidefinite-programme.ts on a block programme: the HKM
 * direction with Mehrotra's predictor and corrector, X projected on its linear equalities in every
 * iteration. The objective should be scaled to entries of about 1.
 * Helmberg, Rendl, Vanderbei, Wolkowicz, SIAM J. Optim. 6, 342 (1996).
 */
export class BlockSolver {
	readonly #hooks: SolverHooks;
	readonly #point: BlockInteriorPoint;
	readonly #newton: BlockNewtonSystem;

	/** @param start unknowns with B > 0, `start[0] = 1`. */
	constructor(programme: BlockProgramme, start: Float64Array, hooks: SolverHooks) {
		this.#hooks = hooks;
		this.#point = new BlockInteriorPoint(programme, start);
		this.#newton = new BlockNewtonSystem(programme, () => hooks.poll());
	}

	run(options: SolverOptions): { ending: Ending; iterations: number } {
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
		let { direction, error } = this.#direction();
		while (!(error <= tolerable) && this.#newton.regularise()) {
			const next = this.#direction();
			if (next.error < error || Number.isNaN(error)) ({ direction, error } = next);
		}
		point.projectDirection(direction);
		const steps = this.#steps(direction);
		const movedX = point.moveMultiplier(direction, steps.multiplier);
		const movedY = point.moveMoments(direction, steps.moments);
		return movedX > SMALLEST_STEP || movedY > SMALLEST_STEP;
	}

	/** The corrected direction, and what it leaves of the multiplier's linear equalities. */
	#direction(): { direction: BlockDirection; error: number } {
		const point = this.#point;
		const predictor = this.#newton.solve(point, 0, null);
		const target = this.#centring(predictor) * point.complementarity();
		let direction = this.#newton.solve(point, target, predictor);
		let steps = this.#steps(direction);
		for (let extra = 0; extra < MOST_CORRECTIONS && product(steps) < LONG_STEPS; extra++) {
			const next = this.#newton.solve(point, target, direction);
			const nextSteps = this.#steps(next);
			if (product(nextSteps) < WORTHWHILE * product(steps)) break;
			direction = next;
			steps = nextSteps;
		}
		return { direction, error: this.#refine(direction) };
	}

	/**
	 * Brings the errors of dX well below X's smallest eigenvalues, which are about as large as the
	 * complementarity. Projection alone would spread them over all of X, and where the optimal
	 * moments are not unique they would end the method early.
	 * @returns the largest residual left; NaN after a useless factorisation.
	 */
	#refine(direction: BlockDirection): number {
		const point = this.#point;
		const enough = ENOUGH_ACCURACY * point.complementarity();
		let before = Infinity;
		for (let step = 0; ; step++) {
			const residuals = point.residualsAfter(direction);
			const error = largestMagnitude(residuals.subarray(1));
			if (error <= enough || step === MOST_REFINEMENTS) return error;
			if (!(error <= WORTHWHILE_REFINEMENT * before)) return error;
			before = error;
			this.#newton.correct(point, direction, residuals);
		}
	}

	/** Mehrotra's choice: little centring when the predictor gets far by itself. */
	#centring(predictor: BlockDirection): number {
		const point = this.#point;
		const multiplierStep = Math.min(1, point.multiplierStep(predictor));
		const momentStep = Math.min(1, point.slackStep(predictor));
		const ahead = point.complementarityAfter(predictor, multiplierStep, momentStep);
		const ratio = Math.max(0, ahead / point.complementarity());
		const power = Math.max(1, 3 * Math.min(multiplierStep, momentStep) ** 2);
		return Math.min(1, Math.max(LEAST_CENTRING, ratio ** power));
	}

	#steps(direction: BlockDirection): Steps {
		return {
			multiplier: Math.min(1, STEP_FRACTION * this.#point.multiplierStep(direction)),
			moments: Math.min(1, STEP_FRACTION * this.#point.slackStep(direction))
		};
	}
}

interface Steps {
	readonly multiplier: number;
	readonly moments: number;
}

function product(steps: Steps): number {
	return steps.multiplier * steps.moments;
}

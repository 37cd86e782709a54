import { largestMagnitude } from '../linalg/dense';
import { InteriorPoint } from './interior-point';
import {
	mehrotraCentring,
	runInteriorPoint,
	SMALLEST_STEP,
	type InteriorPointMethod,
	type Iterate,
	type SolverEnd,
	type SolverHooks,
	type SolverOptions
} from './interior-point-loop';
import type { MatrixCone } from './matrix-cone';
import { makeDirection, NewtonSystem, type Direction } from './newton-system';

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
 * start infeasible) and X = F(y)^-1. The multiplier is kept on its linear equalities by projection.
 * Helmberg, Rendl, Vanderbei, Wolkowicz, SIAM J. Optim. 6, 342 (1996); Mehrotra's corrector as in
 * Fujisawa, Kojima, Nakata, Yamashita, SDPA manual (2002).
 * The objective should be scaled to entries of about 1.
 */
export class SemidefiniteSolver implements InteriorPointMethod {
	readonly #hooks: SolverHooks;
	readonly #cone: MatrixCone;
	readonly #point: InteriorPoint;
	readonly #newton: NewtonSystem;
	readonly #attempts: readonly [Attempt, Attempt];

	/** @param start unknowns with F > 0, `start[0] = 1`. */
	constructor(cone: MatrixCone, start: Float64Array, hooks: SolverHooks) {
		const attempt = () => ({
			direction: makeDirection(cone),
			spare: makeDirection(cone),
			fraction: cone.stepFraction.least,
			error: Infinity
		});
		this.#hooks = hooks;
		this.#cone = cone;
		this.#point = new InteriorPoint(cone, start);
		this.#newton = new NewtonSystem(cone, () => hooks.poll());
		this.#attempts = [attempt(), attempt()];
	}

	/** Once only: the iterates' arrays are given back when it ends. */
	run(options: SolverOptions): SolverEnd {
		try {
			return runInteriorPoint(this, this.#hooks, options);
		} finally {
			this.#cone.kernels.release();
		}
	}

	begin(): boolean {
		return this.#point.begin();
	}

	measure(iteration: number): Iterate {
		return this.#point.measure(iteration);
	}

	advance(): boolean {
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
		const { least, more } = this.#cone.stepFraction;
		const fraction = least + more * Math.min(ahead.multiplier, ahead.moments);
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

	#centring(predictor: Direction, { multiplier, moments }: Steps): number {
		const point = this.#point;
		const ahead = point.complementarityAfter(predictor, multiplier, moments);
		return mehrotraCentring(ahead / point.complementarity(), Math.min(multiplier, moments));
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

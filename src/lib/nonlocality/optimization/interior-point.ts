import { addScaled, dot, largestMagnitude } from '../linalg/dense';
import { backtrack, type Iterate } from './interior-point-loop';
import { LinearRows } from './linear-rows';
import type { MatrixCone } from './matrix-cone';
import { addRows } from './moment-programme';
import type { Direction, NewtonState } from './newton-system';

/**
 * Where the interior-point method stands: y with S = F(y) > 0, X > 0, the linear block, and what
 * follows from them. Every move is verified by a Cholesky factorisation and shortened until it
 * completes.
 */
export class InteriorPoint implements NewtonState {
	readonly y: Float64Array;
	readonly x: Float64Array;
	readonly w: Float64Array;
	readonly rows: LinearRows;
	readonly equalityMultipliers: Float64Array;
	readonly #cone: MatrixCone;
	/** Order of the matrices and of the linear block. */
	readonly #rank: number;
	readonly #s: Float64Array;
	readonly #inverseS: Float64Array;
	readonly #inverseX: Float64Array;
	/** X before a move, and before its projection. */
	readonly #before: Float64Array;
	readonly #unprojected: Float64Array;

	/** @param start unknowns with F > 0, `start[0] = 1`. */
	constructor(cone: MatrixCone, start: Float64Array) {
		this.#cone = cone;
		this.#rank = cone.order + cone.rows.length;
		this.y = start.slice();
		this.x = cone.matrix();
		this.w = cone.matrix();
		this.#s = cone.matrix();
		this.#inverseS = cone.matrix();
		this.#inverseX = cone.matrix();
		this.#before = cone.matrix();
		this.#unprojected = cone.matrix();
		this.rows = new LinearRows(cone.rows);
		this.equalityMultipliers = new Float64Array(cone.equalities.length);
	}

	/** X = S^-1, so that X S is the identity: a centred start. False when S is not positive. */
	begin(): boolean {
		this.#cone.fill(this.y, this.#s);
		if (!this.#factorSlack()) return false;
		this.x.set(this.w);
		if (!this.#factorMultiplier()) return false;
		this.rows.begin(this.y);
		return true;
	}

	/** Inverse Cholesky factor of S, and W = S^-1. */
	#factorSlack(): boolean {
		if (!this.#cone.invertFactor(this.#s, this.#inverseS)) return false;
		this.#cone.invert(this.#inverseS, this.w);
		return true;
	}

	#factorMultiplier(): boolean {
		return this.#cone.invertFactor(this.x, this.#inverseX);
	}

	/** c_i + <F_i, X> + rows + equalities, entry 0 the dual objective. */
	#dualResiduals(): Float64Array {
		const { objective, rows, equalities } = this.#cone;
		const residuals = objective.slice();
		this.#cone.addInnerProducts(this.x, residuals);
		addRows(rows, this.rows.multipliers, residuals);
		addRows(equalities, this.equalityMultipliers, residuals);
		return residuals;
	}

	measure(iteration: number): Iterate {
		const residuals = this.#dualResiduals();
		return {
			iteration,
			moments: this.y,
			multiplier: this.x,
			rowMultipliers: this.rows.multipliers,
			equalityMultipliers: this.equalityMultipliers,
			primal: dot(this.#cone.objective, this.y),
			dual: residuals[0] ?? 0,
			residual: largestMagnitude(residuals.subarray(1))
		};
	}

	complementarity(): number {
		return (this.#cone.kernels.dot(this.x, this.#s) + this.rows.complementarity()) / this.#rank;
	}

	complementarityAfter(direction: Direction, primalStep: number, dualStep: number): number {
		const { dx, ds } = direction;
		const { kernels } = this.#cone;
		const sum =
			kernels.dot(this.x, this.#s) +
			primalStep * kernels.dot(dx, this.#s) +
			dualStep * kernels.dot(this.x, ds) +
			primalStep * dualStep * kernels.dot(dx, ds);
		return this.rows.addComplementarityAfter(sum, direction, primalStep, dualStep) / this.#rank;
	}

	multiplierStep(direction: Direction): number {
		const step = this.#cone.largestStep(this.#inverseX, direction.dx);
		return Math.min(step, this.rows.multiplierStep(direction));
	}

	slackStep(direction: Direction): number {
		const step = this.#cone.largestStep(this.#inverseS, direction.ds);
		return Math.min(step, this.rows.slackStep(direction));
	}

	/** Returns the step taken; 0 leaves everything as it was. */
	moveMultiplier(direction: Direction, wanted: number): number {
		const before = this.#before;
		before.set(this.x);
		const rowsBefore = this.rows.multipliers.slice();
		const equalitiesBefore = this.equalityMultipliers.slice();
		const taken = backtrack(wanted, (step) => {
			this.x.set(before);
			this.#cone.kernels.addScaled(this.x, step, direction.dx);
			this.rows.moveMultipliers(rowsBefore, step, direction);
			this.equalityMultipliers.set(equalitiesBefore);
			addScaled(this.equalityMultipliers, step, direction.equalityMultipliers);
			this.#unprojected.set(this.x);
			this.#cone.project(this.#dualResiduals(), this.x);
			if (this.#factorMultiplier()) return true;
			this.x.set(this.#unprojected);
			return this.#factorMultiplier();
		});
		if (taken === 0) {
			this.x.set(before);
			this.rows.multipliers.set(rowsBefore);
			this.equalityMultipliers.set(equalitiesBefore);
		}
		return taken;
	}

	/** c + <F, X + dX> + rows + equalities: what a full step would leave of the dual's equalities. */
	residualsAfter(direction: Direction): Float64Array {
		const { equalities, rows } = this.#cone;
		const residuals = this.#dualResiduals();
		this.#cone.addInnerProducts(direction.dx, residuals);
		addRows(rows, direction.rowMultipliers, residuals);
		addRows(equalities, direction.equalityMultipliers, residuals);
		return residuals;
	}

	/**
	 * Takes the rest of the rounding errors of the linear solve out of dX, so that a full step would
	 * meet the equalities.
	 */
	projectDirection(direction: Direction): void {
		this.#cone.project(this.residualsAfter(direction), direction.dx);
	}

	/** Returns the step taken; 0 leaves everything as it was. */
	moveMoments(direction: Direction, wanted: number): number {
		const before = this.y.slice();
		const taken = backtrack(wanted, (step) => {
			this.y.set(before);
			addScaled(this.y, step, direction.dy);
			this.#cone.fill(this.y, this.#s);
			const keepSlack = this.rows.moveSlack(this.y, step);
			if (!keepSlack || !this.#factorSlack()) return false;
			keepSlack();
			return true;
		});
		if (taken === 0) {
			this.y.set(before);
			this.#cone.fill(this.y, this.#s);
			this.#factorSlack();
		}
		return taken;
	}
}

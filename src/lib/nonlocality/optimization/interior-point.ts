import { factorCholesky, invertFactor, inverseFromFactor } from '../linalg/cholesky';
import { addScaled, dot, largestMagnitude } from '../linalg/dense';
import {
	addInnerProducts,
	addRows,
	countCells,
	evaluateRow,
	fillMoments,
	type MomentProgramme
} from './moment-programme';
import type { Direction, NewtonState } from './newton-system';
import { largestStep } from './step-length';

/** A primal point y with Gamma(y) > 0 and a multiplier; arrays are the solver's own, copy to keep. */
export interface Iterate {
	readonly iteration: number;
	/** y[0] = 1. */
	readonly moments: Float64Array;
	/** X > 0, symmetric row-major. */
	readonly multiplier: Float64Array;
	/** z >= 0, one per row. */
	readonly rowMultipliers: Float64Array;
	/** Free, one per equality. */
	readonly equalityMultipliers: Float64Array;
	/** Objective at y, and the value the multiplier would prove were it exactly feasible. */
	readonly primal: number;
	readonly dual: number;
	/** Largest |c_i + <F_i, X> + ...|. */
	readonly residual: number;
}

/** Below this step in both variables rounding has won. */
export const SMALLEST_STEP = 1e-6;
const BACKTRACK = 0.8;
/** Slack given to a row that the start does not satisfy. */
const FIRST_SLACK = 0.1;

/**
 * Where the interior-point method stands: y with S = Gamma(y) > 0, X > 0, the linear block, and what
 * follows from them. Every move is verified by a Cholesky factorisation and shortened until it
 * completes.
 */
export class InteriorPoint implements NewtonState {
	readonly y: Float64Array;
	readonly x: Float64Array;
	readonly w: Float64Array;
	readonly rowSlack: Float64Array;
	readonly rowResidual: Float64Array;
	readonly rowMultipliers: Float64Array;
	readonly equalityMultipliers: Float64Array;
	readonly #programme: MomentProgramme;
	readonly #n: number;
	readonly #cells: Int32Array;
	readonly #s: Float64Array;
	readonly #factor: Float64Array;
	readonly #inverseS: Float64Array;
	readonly #inverseX: Float64Array;

	/** @param start moments with Gamma > 0, `start[0] = 1`. */
	constructor(programme: MomentProgramme, start: Float64Array) {
		const n = programme.size;
		const square = () => new Float64Array(n * n);
		this.#programme = programme;
		this.#n = n;
		this.#cells = countCells(programme);
		this.y = start.slice();
		this.x = square();
		this.w = square();
		this.#s = square();
		this.#factor = square();
		this.#inverseS = square();
		this.#inverseX = square();
		this.rowSlack = new Float64Array(programme.rows.length);
		this.rowResidual = new Float64Array(programme.rows.length);
		this.rowMultipliers = new Float64Array(programme.rows.length);
		this.equalityMultipliers = new Float64Array(programme.equalities.length);
	}

	/** X = S^-1, so that X S is the identity: a centred start. False when S is not positive. */
	begin(): boolean {
		const n = this.#n;
		fillMoments(this.#programme, this.y, this.#s);
		if (!this.#factorSlack()) return false;
		this.x.set(this.w);
		this.#factor.set(this.x);
		if (!factorCholesky(this.#factor, n)) return false;
		invertFactor(this.#factor, n, this.#inverseX);
		this.#programme.rows.forEach((row, j) => {
			const value = evaluateRow(row, this.y);
			const slack = Math.max(value, FIRST_SLACK);
			this.rowSlack[j] = slack;
			this.rowResidual[j] = value - slack;
			this.rowMultipliers[j] = 1 / slack;
		});
		return true;
	}

	/** Cholesky of S, its inverse factor and W = S^-1. */
	#factorSlack(): boolean {
		this.#factor.set(this.#s);
		if (!factorCholesky(this.#factor, this.#n)) return false;
		invertFactor(this.#factor, this.#n, this.#inverseS);
		inverseFromFactor(this.#inverseS, this.#n, this.w);
		return true;
	}

	/** c_i + <F_i, X> + rows + equalities, entry 0 the dual objective. */
	#dualResiduals(): Float64Array {
		const { objective, rows, equalities } = this.#programme;
		const residuals = objective.slice();
		addInnerProducts(this.#programme, this.x, 1, residuals);
		addRows(rows, this.rowMultipliers, 1, residuals);
		addRows(equalities, this.equalityMultipliers, 1, residuals);
		return residuals;
	}

	measure(iteration: number): Iterate {
		const residuals = this.#dualResiduals();
		return {
			iteration,
			moments: this.y,
			multiplier: this.x,
			rowMultipliers: this.rowMultipliers,
			equalityMultipliers: this.equalityMultipliers,
			primal: dot(this.#programme.objective, this.y),
			dual: residuals[0] ?? 0,
			residual: largestMagnitude(residuals.subarray(1))
		};
	}

	complementarity(): number {
		const products = dot(this.x, this.#s) + dot(this.rowMultipliers, this.rowSlack);
		return products / (this.#n + this.rowSlack.length);
	}

	multiplierStep(direction: Direction): number {
		let step = largestStep(this.#inverseX, direction.dx, this.#n);
		this.rowMultipliers.forEach((z, j) => {
			const dz = direction.rowMultipliers[j] ?? 0;
			if (dz < 0) step = Math.min(step, -z / dz);
		});
		return step;
	}

	slackStep(direction: Direction): number {
		let step = largestStep(this.#inverseS, direction.ds, this.#n);
		this.rowSlack.forEach((s, j) => {
			const ds = direction.rowSlack[j] ?? 0;
			if (ds < 0) step = Math.min(step, -s / ds);
		});
		return step;
	}

	complementarityAfter(direction: Direction, primalStep: number, dualStep: number): number {
		const { dx, ds } = direction;
		let sum =
			dot(this.x, this.#s) +
			primalStep * dot(dx, this.#s) +
			dualStep * dot(this.x, ds) +
			primalStep * dualStep * dot(dx, ds);
		this.rowSlack.forEach((s, j) => {
			sum +=
				(s + dualStep * (direction.rowSlack[j] ?? 0)) *
				((this.rowMultipliers[j] ?? 0) + primalStep * (direction.rowMultipliers[j] ?? 0));
		});
		return sum / (this.#n + this.rowSlack.length);
	}

	/** Returns the step taken; 0 leaves everything as it was. */
	moveMultiplier(direction: Direction, wanted: number): number {
		const n = this.#n;
		const before = this.x.slice();
		const rowsBefore = this.rowMultipliers.slice();
		const equalitiesBefore = this.equalityMultipliers.slice();
		for (let step = wanted; step > SMALLEST_STEP; step *= BACKTRACK) {
			this.x.set(before);
			addScaled(this.x, step, direction.dx);
			this.rowMultipliers.set(rowsBefore);
			addScaled(this.rowMultipliers, step, direction.rowMultipliers);
			this.equalityMultipliers.set(equalitiesBefore);
			addScaled(this.equalityMultipliers, step, direction.equalityMultipliers);
			const unprojected = this.x.slice();
			this.#project();
			this.#factor.set(this.x);
			if (!factorCholesky(this.#factor, n)) {
				this.x.set(unprojected);
				this.#factor.set(unprojected);
				if (!factorCholesky(this.#factor, n)) continue;
			}
			invertFactor(this.#factor, n, this.#inverseX);
			return step;
		}
		this.x.set(before);
		this.rowMultipliers.set(rowsBefore);
		this.equalityMultipliers.set(equalitiesBefore);
		return 0;
	}

	/** c + <F, X + dX> + rows + equalities: what a full step would leave of the dual's equalities. */
	residualsAfter(direction: Direction): Float64Array {
		const { equalities, rows } = this.#programme;
		const residuals = this.#dualResiduals();
		addInnerProducts(this.#programme, direction.dx, 1, residuals);
		addRows(rows, direction.rowMultipliers, 1, residuals);
		addRows(equalities, direction.equalityMultipliers, 1, residuals);
		return residuals;
	}

	/**
	 * Takes the rest of the rounding errors of the linear solve out of dX, so that a full step would
	 * meet the equalities.
	 */
	projectDirection(direction: Direction): void {
		this.#subtractAverages(direction.dx, this.residualsAfter(direction));
	}

	/** Moves X to the nearest matrix that meets the linear equalities. */
	#project(): void {
		this.#subtractAverages(this.x, this.#dualResiduals());
	}

	#subtractAverages(matrix: Float64Array, residuals: Float64Array): void {
		const { index } = this.#programme;
		for (let cell = 0; cell < index.length; cell++) {
			const moment = index[cell] ?? -1;
			if (moment > 0)
				matrix[cell] = (matrix[cell] ?? 0) - (residuals[moment] ?? 0) / (this.#cells[moment] ?? 1);
		}
	}

	moveMoments(direction: Direction, wanted: number): number {
		const before = this.y.slice();
		for (let step = wanted; step > SMALLEST_STEP; step *= BACKTRACK) {
			this.y.set(before);
			addScaled(this.y, step, direction.dy);
			fillMoments(this.#programme, this.y, this.#s);
			const slacks = this.#programme.rows.map(
				(row, j) => evaluateRow(row, this.y) - (1 - step) * (this.rowResidual[j] ?? 0)
			);
			if (slacks.some((slack) => !(slack > 0)) || !this.#factorSlack()) continue;
			slacks.forEach((slack, j) => {
				this.rowSlack[j] = slack;
				this.rowResidual[j] = (1 - step) * (this.rowResidual[j] ?? 0);
			});
			return step;
		}
		this.y.set(before);
		fillMoments(this.#programme, this.y, this.#s);
		this.#factorSlack();
		return 0;
	}
}

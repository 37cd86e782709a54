import { factorCholesky, invertFactor, inverseFromFactor } from '../linalg/cholesky';
import { addScaled, dot, largestMagnitude } from '../linalg/dense';
import {
	addBlockProducts,
	blocksOf,
	fillBlocks,
	projectBlocks,
	type BlockProgramme
} from './block-programme';
import type { Iterate } from './semidefinite-programme';
import { addRows, evaluateRow } from './moment-programme';
import type { BlockDirection, BlockState } from './block-newton-system';
import { largestBlockStep } from './block-step-length';

/** Below this step in both variables rounding has won. */
export const SMALLEST_STEP = 1e-6;
const BACKTRACK = 0.8;
/** Slack given to a row that the start does not satisfy. */
const FIRST_SLACK = 0.1;

/**
 * Where the method stands on a block programme: as interior-point.ts, with X, S and W block by block
 * and the projection of X on its equalities by the Gram matrix of the B_j.
 */
export class BlockInteriorPoint implements BlockState {
	readonly y: Float64Array;
	readonly x: Float64Array;
	readonly w: Float64Array;
	readonly rowSlack: Float64Array;
	readonly rowResidual: Float64Array;
	readonly rowMultipliers: Float64Array;
	readonly #programme: BlockProgramme;
	/** Rows of all blocks and of the linear block. */
	readonly #rank: number;
	readonly #s: Float64Array;
	readonly #factor: Float64Array;
	readonly #inverseS: Float64Array;
	readonly #inverseX: Float64Array;

	/** @param start unknowns with B > 0, `start[0] = 1`. */
	constructor(programme: BlockProgramme, start: Float64Array) {
		const length = programme.offsets.at(-1) ?? 0;
		const matrix = () => new Float64Array(length);
		this.#programme = programme;
		this.#rank = programme.sizes.reduce((a, b) => a + b, programme.rows.length);
		this.y = start.slice();
		this.x = matrix();
		this.w = matrix();
		this.#s = matrix();
		this.#factor = matrix();
		this.#inverseS = matrix();
		this.#inverseX = matrix();
		this.rowSlack = new Float64Array(programme.rows.length);
		this.rowResidual = new Float64Array(programme.rows.length);
		this.rowMultipliers = new Float64Array(programme.rows.length);
	}

	/** X = S^-1, so that X S is the identity: a centred start. False when S is not positive. */
	begin(): boolean {
		fillBlocks(this.#programme, this.y, this.#s);
		if (!this.#factorSlack()) return false;
		this.x.set(this.w);
		if (!this.#factorInto(this.x, this.#inverseX)) return false;
		this.#programme.rows.forEach((row, j) => {
			const value = evaluateRow(row, this.y);
			const slack = Math.max(value, FIRST_SLACK);
			this.rowSlack[j] = slack;
			this.rowResidual[j] = value - slack;
			this.rowMultipliers[j] = 1 / slack;
		});
		return true;
	}

	/** Writes the inverse Cholesky factor of every block; false when one is not positive. */
	#factorInto(matrix: Float64Array, inverse: Float64Array): boolean {
		this.#factor.set(matrix);
		const factors = blocksOf(this.#programme, this.#factor);
		const inverses = blocksOf(this.#programme, inverse);
		if (!this.#programme.sizes.every((size, b) => factorCholesky(factors[b] ?? inverse, size)))
			return false;
		this.#programme.sizes.forEach((size, b) =>
			invertFactor(factors[b] ?? inverse, size, inverses[b] ?? inverse)
		);
		return true;
	}

	#factorSlack(): boolean {
		if (!this.#factorInto(this.#s, this.#inverseS)) return false;
		const inverses = blocksOf(this.#programme, this.#inverseS);
		const ws = blocksOf(this.#programme, this.w);
		this.#programme.sizes.forEach((size, b) =>
			inverseFromFactor(inverses[b] ?? this.w, size, ws[b] ?? this.w)
		);
		return true;
	}

	/** c_j + <B_j, X> + rows, entry 0 the dual objective. */
	#dualResiduals(): Float64Array {
		const residuals = this.#programme.objective.slice();
		addBlockProducts(this.#programme, this.x, 1, residuals);
		addRows(this.#programme.rows, this.rowMultipliers, 1, residuals);
		return residuals;
	}

	measure(iteration: number): Iterate {
		const residuals = this.#dualResiduals();
		return {
			iteration,
			moments: this.y,
			multiplier: this.x,
			rowMultipliers: this.rowMultipliers,
			equalityMultipliers: new Float64Array(0),
			primal: dot(this.#programme.objective, this.y),
			dual: residuals[0] ?? 0,
			residual: largestMagnitude(residuals.subarray(1))
		};
	}

	complementarity(): number {
		return (dot(this.x, this.#s) + dot(this.rowMultipliers, this.rowSlack)) / this.#rank;
	}

	#blockStep(inverse: Float64Array, direction: Float64Array): number {
		const inverses = blocksOf(this.#programme, inverse);
		const directions = blocksOf(this.#programme, direction);
		return this.#programme.sizes.reduce(
			(step, size, b) =>
				Math.min(step, largestBlockStep(inverses[b] ?? inverse, directions[b] ?? direction, size)),
			Infinity
		);
	}

	multiplierStep(direction: BlockDirection): number {
		let step = this.#blockStep(this.#inverseX, direction.dx);
		this.rowMultipliers.forEach((z, j) => {
			const dz = direction.rowMultipliers[j] ?? 0;
			if (dz < 0) step = Math.min(step, -z / dz);
		});
		return step;
	}

	slackStep(direction: BlockDirection): number {
		let step = this.#blockStep(this.#inverseS, direction.ds);
		this.rowSlack.forEach((s, j) => {
			const ds = direction.rowSlack[j] ?? 0;
			if (ds < 0) step = Math.min(step, -s / ds);
		});
		return step;
	}

	complementarityAfter(direction: BlockDirection, primalStep: number, dualStep: number): number {
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
		return sum / this.#rank;
	}

	/** Returns the step taken; 0 leaves everything as it was. */
	moveMultiplier(direction: BlockDirection, wanted: number): number {
		const before = this.x.slice();
		const rowsBefore = this.rowMultipliers.slice();
		for (let step = wanted; step > SMALLEST_STEP; step *= BACKTRACK) {
			this.x.set(before);
			addScaled(this.x, step, direction.dx);
			this.rowMultipliers.set(rowsBefore);
			addScaled(this.rowMultipliers, step, direction.rowMultipliers);
			const unprojected = this.x.slice();
			projectBlocks(this.#programme, this.#dualResiduals(), this.x);
			if (this.#factorInto(this.x, this.#inverseX)) return step;
			this.x.set(unprojected);
			if (this.#factorInto(this.x, this.#inverseX)) return step;
		}
		this.x.set(before);
		this.rowMultipliers.set(rowsBefore);
		return 0;
	}

	/** c + <B, X + dX> + rows: what a full step would leave of the dual's equalities. */
	residualsAfter(direction: BlockDirection): Float64Array {
		const residuals = this.#dualResiduals();
		addBlockProducts(this.#programme, direction.dx, 1, residuals);
		addRows(this.#programme.rows, direction.rowMultipliers, 1, residuals);
		return residuals;
	}

	/**
	 * Takes the rest of the rounding errors of the linear solve out of dX, so that a full step would
	 * meet the equalities.
	 */
	projectDirection(direction: BlockDirection): void {
		projectBlocks(this.#programme, this.residualsAfter(direction), direction.dx);
	}

	moveMoments(direction: BlockDirection, wanted: number): number {
		const before = this.y.slice();
		for (let step = wanted; step > SMALLEST_STEP; step *= BACKTRACK) {
			this.y.set(before);
			addScaled(this.y, step, direction.dy);
			fillBlocks(this.#programme, this.y, this.#s);
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
		fillBlocks(this.#programme, this.y, this.#s);
		this.#factorSlack();
		return 0;
	}
}

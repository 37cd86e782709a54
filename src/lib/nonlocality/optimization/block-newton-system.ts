import { addScaled, multiply, symmetrise } from '../linalg/dense';
import { addBlockProducts, blocksOf, fillBlocks, type BlockProgramme } from './block-programme';
import { BlockSchurComplement } from './block-schur-complement';
import { addRows, evaluateRow } from './moment-programme';
import { RegularisedSystem } from './regularised-system';

/** Where the method stands; W = S^-1. */
export interface BlockState {
	readonly x: Float64Array;
	readonly w: Float64Array;
	readonly rowSlack: Float64Array;
	/** rows(y) - rowSlack. */
	readonly rowResidual: Float64Array;
	readonly rowMultipliers: Float64Array;
}

export interface BlockDirection {
	/** Entry 0 is 0. */
	readonly dy: Float64Array;
	readonly dx: Float64Array;
	readonly ds: Float64Array;
	readonly rowSlack: Float64Array;
	readonly rowMultipliers: Float64Array;
}

/** The linear system of one iteration, as in newton-system.ts, block by block; no equalities. */
export class BlockNewtonSystem {
	readonly #programme: BlockProgramme;
	readonly #schur: BlockSchurComplement;
	readonly #system: RegularisedSystem;
	readonly #first: Float64Array;
	readonly #second: Float64Array;
	readonly #poll: () => void;

	/** @param poll called at least every few milliseconds of work. */
	constructor(programme: BlockProgramme, poll: () => void) {
		const length = programme.offsets.at(-1) ?? 0;
		this.#programme = programme;
		this.#poll = poll;
		this.#schur = new BlockSchurComplement(programme);
		this.#system = new RegularisedSystem(programme.unknowns, poll);
		this.#first = new Float64Array(length);
		this.#second = new Float64Array(length);
	}

	/** Builds and factorises; false when the matrix is singular to working precision. */
	prepare(state: BlockState): boolean {
		const weights = state.rowMultipliers.map((z, j) => z / (state.rowSlack[j] ?? 1));
		this.#schur.build(state.x, state.w, weights, this.#system.matrix, this.#poll);
		return this.#system.factorise();
	}

	regularise(): boolean {
		return this.#system.regularise();
	}

	/** #second = sym(a b W). */
	#scaledProduct(a: Float64Array, b: Float64Array, w: Float64Array): Float64Array {
		const [as, bs, ws] = [a, b, w].map((array) => blocksOf(this.#programme, array));
		const firsts = blocksOf(this.#programme, this.#first);
		const seconds = blocksOf(this.#programme, this.#second);
		this.#programme.sizes.forEach((size, k) => {
			const [left, right, inverse] = [as?.[k], bs?.[k], ws?.[k]];
			const [first, second] = [firsts[k], seconds[k]];
			if (!left || !right || !inverse || !first || !second) return;
			multiply(left, right, first, size);
			multiply(first, inverse, second, size);
			symmetrise(second, size);
		});
		return this.#second;
	}

	/** @param target sigma mu; @param predictor adds Mehrotra's second-order correction. */
	solve(state: BlockState, target: number, predictor: BlockDirection | null): BlockDirection {
		const { objective, rows } = this.#programme;
		const dx = state.w.map((value) => target * value);
		if (predictor) addScaled(dx, -1, this.#scaledProduct(predictor.dx, predictor.ds, state.w));
		const rowFixed = state.rowSlack.map((s, j) => {
			const z = state.rowMultipliers[j] ?? 0;
			const correction = predictor
				? (predictor.rowSlack[j] ?? 0) * (predictor.rowMultipliers[j] ?? 0)
				: 0;
			return (target - correction - z * (state.rowResidual[j] ?? 0)) / s;
		});
		const rhs = objective.slice();
		addBlockProducts(this.#programme, dx, 1, rhs);
		addRows(rows, rowFixed, 1, rhs);
		const { dy, ds } = this.#solveLinear(rhs);
		const moved = this.#scaledProduct(state.x, ds, state.w);
		addScaled(dx, -1, state.x);
		addScaled(dx, -1, moved);
		const linear = Float64Array.from(rows, (row) => evaluateRow(row, dy));
		return {
			dy,
			dx,
			ds,
			rowSlack: linear.map((value, j) => value + (state.rowResidual[j] ?? 0)),
			rowMultipliers: rowFixed.map((value, j) => {
				const z = state.rowMultipliers[j] ?? 0;
				return value - z - (z / (state.rowSlack[j] ?? 1)) * (linear[j] ?? 0);
			})
		};
	}

	/**
	 * One step of iterative refinement on the linear equalities of the multiplier.
	 * @param residuals c + <B, X + dX> + ..., what a full step along `direction` would leave.
	 */
	correct(state: BlockState, direction: BlockDirection, residuals: Float64Array): void {
		const { dy, ds } = this.#solveLinear(residuals);
		addScaled(direction.dx, -1, this.#scaledProduct(state.x, ds, state.w));
		addScaled(direction.dy, 1, dy);
		addScaled(direction.ds, 1, ds);
		this.#programme.rows.forEach((row, j) => {
			const weight = (state.rowMultipliers[j] ?? 0) / (state.rowSlack[j] ?? 1);
			const change = evaluateRow(row, dy);
			direction.rowMultipliers[j] = (direction.rowMultipliers[j] ?? 0) - weight * change;
			direction.rowSlack[j] = (direction.rowSlack[j] ?? 0) + change;
		});
	}

	#solveLinear(rhs: Float64Array): { dy: Float64Array; ds: Float64Array } {
		const { order } = this.#schur;
		const solution = this.#system.solve(Float64Array.from(order, (j) => rhs[j] ?? 0));
		const dy = new Float64Array(this.#programme.unknowns + 1);
		order.forEach((j, rank) => (dy[j] = solution[rank] ?? 0));
		const ds = new Float64Array(this.#first.length);
		fillBlocks(this.#programme, dy, ds);
		return { dy, ds };
	}
}

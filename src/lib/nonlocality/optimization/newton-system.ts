import { factorCholesky, solveFactored } from '../linalg/cholesky';
import { addScaled, dot } from '../linalg/dense';
import type { LinearRows, RowDirection } from './linear-rows';
import type { MatrixCone } from './matrix-cone';
import { addRows, evaluateRow, type SparseRow } from './moment-programme';
import { RegularisedSystem } from './regularised-system';

/** Where the solver stands; W = S^-1. */
export interface NewtonState {
	readonly y: Float64Array;
	readonly x: Float64Array;
	readonly w: Float64Array;
	readonly rows: LinearRows;
	readonly equalityMultipliers: Float64Array;
}

export interface Direction extends RowDirection {
	/** Entry 0 is 0. */
	readonly dy: Float64Array;
	readonly dx: Float64Array;
	readonly ds: Float64Array;
	readonly equalityMultipliers: Float64Array;
}

export function makeDirection(cone: MatrixCone): Direction {
	const { rows, equalities } = cone;
	return {
		dy: cone.kernels.doubles(cone.unknowns + 1),
		dx: cone.matrix(),
		ds: cone.matrix(),
		rowSlack: new Float64Array(rows.length),
		rowMultipliers: new Float64Array(rows.length),
		equalityMultipliers: new Float64Array(equalities.length)
	};
}

const BORDER_REGULARISATIONS = [0, 1e-14, 1e-12, 1e-10];

/**
 * The linear system of one iteration. HKM: dX = -X + sigma mu W - sym(X dS W) [- sym(dXp dSp W)],
 * and <F_i, X + dX> + ... = -c_i gives M dy = c + ... with M_ij = <F_i, X F_j W>.
 * Equalities border it: M dy - A^T dw = rhs + A^T w, A dy = -residual.
 */
export class NewtonSystem {
	readonly #cone: MatrixCone;
	readonly #system: RegularisedSystem;
	readonly #poll: () => void;
	#border: Border | null = null;

	/** @param poll called at least every few milliseconds of work. */
	constructor(cone: MatrixCone, poll: () => void) {
		this.#cone = cone;
		this.#system = new RegularisedSystem(cone.unknowns, cone.kernels, poll);
		this.#poll = poll;
	}

	/** Builds and factorises; false when the matrix is singular to working precision. */
	prepare({ x, w, rows }: NewtonState): boolean {
		const { matrix } = this.#system;
		this.#cone.buildSchur(x, w, matrix, this.#poll);
		rows.addToSchur(this.#cone.rankOf, matrix, this.#cone.unknowns);
		return this.#system.factorise() && this.#makeBorder();
	}

	/** Factorises again, with a larger addition to the diagonal; false when there is none left. */
	regularise(): boolean {
		return this.#system.regularise() && this.#makeBorder();
	}

	/** False when the equalities leave it singular. */
	#makeBorder(): boolean {
		const { equalities } = this.#cone;
		const ranked = equalities.map((row) => this.#ranked(row));
		const solved = ranked.map((vector) => this.#system.solveOnce(vector).slice());
		const k = equalities.length;
		const matrix = new Float64Array(k * k);
		ranked.forEach((vector, a) =>
			solved.forEach((other, b) => (matrix[a * k + b] = dot(vector, other)))
		);
		// Equalities that say the same twice make it singular.
		for (const relative of BORDER_REGULARISATIONS) {
			const factor = matrix.slice();
			for (let a = 0; a < k; a++) factor[a * k + a] = (factor[a * k + a] ?? 0) * (1 + relative);
			if (!factorCholesky(factor, k)) continue;
			this.#border = { ranked, solved, matrix: factor };
			return true;
		}
		this.#border = null;
		return false;
	}

	#ranked(row: SparseRow): Float64Array {
		const vector = new Float64Array(this.#cone.unknowns);
		row.columns.forEach((column, at) => {
			if (column > 0) vector[this.#cone.rankOf[column] ?? 0] = row.values[at] ?? 0;
		});
		return vector;
	}

	/**
	 * @param target sigma mu
	 * @param predictor adds Mehrotra's second-order correction
	 * @param into another direction, which the result is written to
	 */
	solve(state: NewtonState, target: number, predictor: Direction | null, into: Direction): void {
		const cone = this.#cone;
		const { dx, dy, ds } = into;
		dx.set(state.w);
		for (let cell = 0; cell < dx.length; cell++) dx[cell] = target * (dx[cell] ?? 0);
		if (predictor) cone.subtractProduct(dx, predictor.dx, predictor.ds, state.w);
		const rowFixed = state.rows.fixedMultipliers(target, predictor);
		const rhs = cone.objective.slice();
		cone.addInnerProducts(dx, rhs);
		addRows(cone.rows, rowFixed, rhs);
		addRows(cone.equalities, state.equalityMultipliers, rhs);
		this.#solveLinear(rhs, state.y, into);
		cone.kernels.addScaled(dx, -1, state.x);
		cone.subtractProduct(dx, state.x, ds, state.w);
		state.rows.fillDirection(dy, rowFixed, into);
	}

	/**
	 * One step of iterative refinement on the linear equalities of the multiplier.
	 * @param residuals c + <F, X + dX> + ..., what a full step along `direction` would leave.
	 * @param scratch another direction
	 */
	correct(
		state: NewtonState,
		direction: Direction,
		residuals: Float64Array,
		scratch: Direction
	): void {
		const { kernels, unknowns } = this.#cone;
		const { dy, ds, equalityMultipliers } = scratch;
		this.#solveLinear(residuals, new Float64Array(unknowns + 1), scratch);
		this.#cone.subtractProduct(direction.dx, state.x, ds, state.w);
		addScaled(direction.equalityMultipliers, 1, equalityMultipliers);
		addScaled(direction.dy, 1, dy);
		kernels.addScaled(direction.ds, 1, ds);
		state.rows.correctDirection(dy, direction);
	}

	/** Solves the bordered system; writes dy, dS and the equalities' multipliers. */
	#solveLinear(
		rhs: Float64Array,
		y: Float64Array,
		{ dy, ds, equalityMultipliers }: Direction
	): void {
		const { equalities, unknownAt } = this.#cone;
		const solution = this.#system.solve(Float64Array.from(unknownAt, (i) => rhs[i] ?? 0));
		const border = this.#border;
		if (border && equalities.length > 0) {
			equalities.forEach((row, a) => {
				const product = dot(border.ranked[a] ?? solution, solution);
				equalityMultipliers[a] = -evaluateRow(row, y) - product;
			});
			solveFactored(border.matrix, equalities.length, equalityMultipliers);
			border.solved.forEach((vector, a) => {
				addScaled(solution, equalityMultipliers[a] ?? 0, vector);
			});
		}
		unknownAt.forEach((unknown, rank) => (dy[unknown] = solution[rank] ?? 0));
		this.#cone.fillDirection(dy, ds);
	}
}

interface Border {
	/** The equalities a_k, by rank. */
	readonly ranked: readonly Float64Array[];
	/** M^-1 a_k, by rank. */
	readonly solved: readonly Float64Array[];
	/** Factor of A M^-1 A^T. */
	readonly matrix: Float64Array;
}

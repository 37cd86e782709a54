import { factorCholesky, solveFactored } from '../linalg/cholesky';
import { addScaled, dot } from '../linalg/dense';
import type { Kernels } from '../linalg/kernels/kernels';
import {
	addInnerProducts,
	addRows,
	evaluateRow,
	fillDirection,
	type MomentProgramme,
	type SparseRow
} from './moment-programme';
import { SchurComplement } from './schur-complement';

/** Where the solver stands; W = S^-1. */
export interface NewtonState {
	readonly y: Float64Array;
	readonly x: Float64Array;
	readonly w: Float64Array;
	readonly rowSlack: Float64Array;
	/** rows(y) - rowSlack. */
	readonly rowResidual: Float64Array;
	readonly rowMultipliers: Float64Array;
	readonly equalityMultipliers: Float64Array;
}

export interface Direction {
	/** Entry 0 is 0. */
	readonly dy: Float64Array;
	readonly dx: Float64Array;
	readonly ds: Float64Array;
	readonly rowSlack: Float64Array;
	readonly rowMultipliers: Float64Array;
	readonly equalityMultipliers: Float64Array;
}

export function makeDirection(programme: MomentProgramme, kernels: Kernels): Direction {
	const { size: n, unknowns: m, rows, equalities } = programme;
	return {
		dy: kernels.doubles(m + 1),
		dx: kernels.doubles(n * n),
		ds: kernels.doubles(n * n),
		rowSlack: new Float64Array(rows.length),
		rowMultipliers: new Float64Array(rows.length),
		equalityMultipliers: new Float64Array(equalities.length)
	};
}

/**
 * Additions to the diagonal of the Schur complement, tried when it is not positive: relative to each
 * entry, then to the largest. The latter is the size of the rounding errors, under which entries
 * that belong to moments free at the optimum vanish.
 */
const NO_ADDITION = { own: 0, largest: 0 };
const ADDITIONS = [
	NO_ADDITION,
	{ own: 1e-15, largest: 0 },
	{ own: 1e-14, largest: 0 },
	{ own: 1e-13, largest: 0 },
	{ own: 0, largest: 1e-16 },
	{ own: 0, largest: 1e-15 },
	{ own: 0, largest: 1e-14 },
	{ own: 0, largest: 1e-13 }
];
const BORDER_REGULARISATIONS = [0, 1e-14, 1e-12, 1e-10];

/**
 * The linear system of one iteration. HKM: dX = -X + sigma mu W - sym(X dS W) [- sym(dXp dSp W)],
 * and <F_i, X + dX> + ... = -c_i gives M dy = c + ... with M_ij = <F_i, X F_j W>.
 * Equalities border it: M dy - A^T dw = rhs + A^T w, A dy = -residual.
 */
export class NewtonSystem {
	readonly #programme: MomentProgramme;
	readonly #kernels: Kernels;
	readonly #schur: SchurComplement;
	/** Lower triangle: the factor; strict upper: the matrix itself, its diagonal in `#diagonal`. */
	readonly #matrix: Float64Array;
	readonly #diagonal: Float64Array;
	readonly #first: Float64Array;
	readonly #second: Float64Array;
	readonly #solution: Float64Array;
	readonly #rest: Float64Array;
	readonly #poll: () => void;
	#border: Border | null = null;
	/** Place in ADDITIONS. */
	#addition = 0;
	#altered = false;

	/** @param poll called at least every few milliseconds of work. */
	constructor(programme: MomentProgramme, kernels: Kernels, poll: () => void) {
		const { size: n, unknowns: m } = programme;
		this.#poll = poll;
		this.#programme = programme;
		this.#kernels = kernels;
		this.#schur = new SchurComplement(programme, kernels);
		this.#matrix = kernels.doubles(m * m);
		this.#diagonal = kernels.doubles(m);
		this.#first = kernels.doubles(n * n);
		this.#second = kernels.doubles(n * n);
		this.#solution = kernels.doubles(m);
		this.#rest = kernels.doubles(m);
	}

	/** Builds and factorises; false when the matrix is singular to working precision. */
	prepare(state: NewtonState): boolean {
		const poll = this.#poll;
		const weights = state.rowMultipliers.map((z, j) => z / (state.rowSlack[j] ?? 1));
		this.#schur.build(state.x, state.w, weights, this.#matrix, poll);
		this.#keepCopy();
		this.#altered = false;
		return this.#factorise();
	}

	/** Factorises again, with a larger addition to the diagonal; false when there is none left. */
	regularise(): boolean {
		this.#addition++;
		return this.#factorise();
	}

	/** Tries the additions from the one in use: the conditioning only worsens towards the optimum. */
	#factorise(): boolean {
		for (; this.#addition < ADDITIONS.length; this.#addition++) {
			const { own, largest } = ADDITIONS[this.#addition] ?? NO_ADDITION;
			if (this.#altered || this.#addition > 0) this.#restore(own, largest);
			this.#altered = true;
			if (this.#kernels.factorCholesky(this.#matrix, this.#programme.unknowns, this.#poll)) {
				this.#border = this.#makeBorder();
				return this.#border !== null;
			}
		}
		this.#addition = ADDITIONS.length - 1;
		return false;
	}

	#keepCopy(): void {
		const m = this.#programme.unknowns;
		this.#kernels.mirror(this.#matrix, m, 'upper');
		for (let i = 0; i < m; i++) this.#diagonal[i] = this.#matrix[i * m + i] ?? 0;
	}

	#restore(own: number, largest: number): void {
		const m = this.#programme.unknowns;
		const added = largest * this.#diagonal.reduce((a, value) => Math.max(a, value), 0);
		this.#kernels.mirror(this.#matrix, m, 'lower');
		for (let i = 0; i < m; i++)
			this.#matrix[i * m + i] = (this.#diagonal[i] ?? 0) * (1 + own) + added;
	}

	#makeBorder(): Border | null {
		const { equalities, unknowns: m } = this.#programme;
		const solved = equalities.map((row) => {
			this.#solution.set(this.#ranked(row));
			this.#kernels.solveFactored(this.#matrix, m, this.#solution);
			return this.#solution.slice();
		});
		const k = equalities.length;
		const matrix = new Float64Array(k * k);
		equalities.forEach((row, a) => {
			const vector = this.#ranked(row);
			solved.forEach((other, b) => (matrix[a * k + b] = dot(vector, other)));
		});
		// Equalities that say the same twice make it singular.
		for (const relative of BORDER_REGULARISATIONS) {
			const factor = matrix.slice();
			for (let a = 0; a < k; a++) factor[a * k + a] = (factor[a * k + a] ?? 0) * (1 + relative);
			if (factorCholesky(factor, k)) return { solved, matrix: factor };
		}
		return null;
	}

	#ranked(row: SparseRow): Float64Array {
		const vector = new Float64Array(this.#programme.unknowns);
		row.columns.forEach((column, at) => {
			if (column > 0) vector[this.#schur.supports.rank[column] ?? 0] = row.values[at] ?? 0;
		});
		return vector;
	}

	/**
	 * @param target sigma mu
	 * @param predictor adds Mehrotra's second-order correction
	 * @param into another direction, which the result is written to
	 */
	solve(state: NewtonState, target: number, predictor: Direction | null, into: Direction): void {
		const { objective, rows, equalities } = this.#programme;
		const fixed = into.dx;
		fixed.set(state.w);
		for (let cell = 0; cell < fixed.length; cell++) fixed[cell] = target * (fixed[cell] ?? 0);
		if (predictor) this.#addProduct(fixed, predictor.dx, predictor.ds, state.w);
		const rowFixed = state.rowSlack.map((s, j) => {
			const z = state.rowMultipliers[j] ?? 0;
			const correction = predictor
				? (predictor.rowSlack[j] ?? 0) * (predictor.rowMultipliers[j] ?? 0)
				: 0;
			return (target - correction - z * (state.rowResidual[j] ?? 0)) / s;
		});
		const rhs = objective.slice();
		addInnerProducts(this.#programme, fixed, 1, rhs);
		addRows(rows, rowFixed, 1, rhs);
		addRows(equalities, state.equalityMultipliers, 1, rhs);
		this.#solveLinear(rhs, state.y, into.dy, into.equalityMultipliers);

		fillDirection(this.#programme, into.dy, into.ds);
		this.#kernels.addScaled(fixed, -1, state.x);
		this.#addProduct(fixed, state.x, into.ds, state.w);
		rows.forEach((row, j) => {
			const z = state.rowMultipliers[j] ?? 0;
			const linear = evaluateRow(row, into.dy);
			into.rowSlack[j] = linear + (state.rowResidual[j] ?? 0);
			into.rowMultipliers[j] = (rowFixed[j] ?? 0) - z - (z / (state.rowSlack[j] ?? 1)) * linear;
		});
	}

	/** out -= sym(a b c). */
	#addProduct(out: Float64Array, a: Float64Array, b: Float64Array, c: Float64Array): void {
		const { size: n } = this.#programme;
		this.#kernels.multiply(a, b, this.#first, n);
		this.#kernels.multiply(this.#first, c, this.#second, n);
		this.#kernels.symmetrise(this.#second, n);
		this.#kernels.addScaled(out, -1, this.#second);
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
		const { rows, unknowns: m } = this.#programme;
		const { dy, ds, equalityMultipliers } = scratch;
		this.#solveLinear(residuals, new Float64Array(m + 1), dy, equalityMultipliers);
		fillDirection(this.#programme, dy, ds);
		this.#addProduct(direction.dx, state.x, ds, state.w);
		addScaled(direction.equalityMultipliers, 1, equalityMultipliers);
		addScaled(direction.dy, 1, dy);
		this.#kernels.addScaled(direction.ds, 1, ds);
		rows.forEach((row, j) => {
			const weight = (state.rowMultipliers[j] ?? 0) / (state.rowSlack[j] ?? 1);
			const change = evaluateRow(row, dy);
			direction.rowMultipliers[j] = (direction.rowMultipliers[j] ?? 0) - weight * change;
			direction.rowSlack[j] = (direction.rowSlack[j] ?? 0) + change;
		});
	}

	/** Solves the bordered system; writes `dy` and `equalityMultipliers`. */
	#solveLinear(
		rhs: Float64Array,
		y: Float64Array,
		dy: Float64Array,
		equalityMultipliers: Float64Array
	): void {
		const { equalities } = this.#programme;
		const { order } = this.#schur.supports;
		const solution = this.#refined(rhs);
		const k = equalities.length;
		if (this.#border && k > 0) {
			equalities.forEach((row, a) => {
				equalityMultipliers[a] = -evaluateRow(row, y) - dot(this.#ranked(row), solution);
			});
			solveFactored(this.#border.matrix, k, equalityMultipliers);
			this.#border.solved.forEach((vector, a) => {
				addScaled(solution, equalityMultipliers[a] ?? 0, vector);
			});
		}
		for (let rank = 0; rank < order.length; rank++) dy[order[rank] ?? 0] = solution[rank] ?? 0;
	}

	/** M^-1 rhs, with one step of iterative refinement; by rank. */
	#refined(rhs: Float64Array): Float64Array {
		const { order } = this.#schur.supports;
		const m = order.length;
		const matrix = this.#matrix;
		const solution = this.#solution;
		const rest = this.#rest;
		for (let rank = 0; rank < m; rank++) rest[rank] = rhs[order[rank] ?? 0] ?? 0;
		solution.set(rest);
		this.#kernels.solveFactored(matrix, m, solution);
		this.#poll();
		this.#kernels.subtractProduct(matrix, this.#diagonal, solution, rest, m);
		this.#poll();
		this.#kernels.solveFactored(matrix, m, rest);
		this.#kernels.addScaled(solution, 1, rest);
		return solution;
	}
}

interface Border {
	/** M^-1 a_k, by rank. */
	readonly solved: readonly Float64Array[];
	/** Factor of A M^-1 A^T. */
	readonly matrix: Float64Array;
}

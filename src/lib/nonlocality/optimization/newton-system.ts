import { factorCholesky, solveFactored } from '../linalg/cholesky';
import { addScaled, dot, multiply, symmetrise } from '../linalg/dense';
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
	readonly #schur: SchurComplement;
	/** Lower triangle: the factor; strict upper: the matrix itself, its diagonal in `#diagonal`. */
	readonly #matrix: Float64Array;
	readonly #diagonal: Float64Array;
	readonly #first: Float64Array;
	readonly #second: Float64Array;
	readonly #poll: () => void;
	#border: Border | null = null;
	/** Place in ADDITIONS. */
	#addition = 0;
	#altered = false;

	/** @param poll called at least every few milliseconds of work. */
	constructor(programme: MomentProgramme, poll: () => void) {
		const { size: n, unknowns: m } = programme;
		this.#poll = poll;
		this.#programme = programme;
		this.#schur = new SchurComplement(programme);
		this.#matrix = new Float64Array(m * m);
		this.#diagonal = new Float64Array(m);
		this.#first = new Float64Array(n * n);
		this.#second = new Float64Array(n * n);
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
			if (factorCholesky(this.#matrix, this.#programme.unknowns, this.#poll)) {
				this.#border = this.#makeBorder();
				return this.#border !== null;
			}
		}
		this.#addition = ADDITIONS.length - 1;
		return false;
	}

	#keepCopy(): void {
		const m = this.#programme.unknowns;
		const tile = 32; // both triangles of a tile stay in the cache
		for (let i0 = 0; i0 < m; i0 += tile) {
			this.#poll();
			for (let j0 = 0; j0 <= i0; j0 += tile)
				for (let i = i0; i < Math.min(i0 + tile, m); i++)
					for (let j = j0; j < Math.min(j0 + tile, i); j++)
						this.#matrix[j * m + i] = this.#matrix[i * m + j] ?? 0;
		}
		for (let i = 0; i < m; i++) this.#diagonal[i] = this.#matrix[i * m + i] ?? 0;
	}

	#restore(own: number, largest: number): void {
		const m = this.#programme.unknowns;
		const added = largest * this.#diagonal.reduce((a, value) => Math.max(a, value), 0);
		for (let i = 0; i < m; i++) {
			for (let j = 0; j < i; j++) this.#matrix[i * m + j] = this.#matrix[j * m + i] ?? 0;
			this.#matrix[i * m + i] = (this.#diagonal[i] ?? 0) * (1 + own) + added;
		}
	}

	#makeBorder(): Border | null {
		const { equalities, unknowns: m } = this.#programme;
		const solved = equalities.map((row) => {
			const vector = this.#ranked(row);
			solveFactored(this.#matrix, m, vector);
			return vector;
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
			if (column > 0) vector[this.#schur.rank[column] ?? 0] = row.values[at] ?? 0;
		});
		return vector;
	}

	/** @param target sigma mu; @param predictor adds Mehrotra's second-order correction. */
	solve(state: NewtonState, target: number, predictor: Direction | null): Direction {
		const { size: n, objective, rows, equalities, unknowns: m } = this.#programme;
		const fixed = new Float64Array(n * n);
		for (let cell = 0; cell < fixed.length; cell++) fixed[cell] = target * (state.w[cell] ?? 0);
		if (predictor) {
			multiply(predictor.dx, predictor.ds, this.#first, n);
			multiply(this.#first, state.w, this.#second, n);
			symmetrise(this.#second, n);
			for (let cell = 0; cell < fixed.length; cell++)
				fixed[cell] = (fixed[cell] ?? 0) - (this.#second[cell] ?? 0);
		}
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
		const { dy, equalityMultipliers } = this.#solveLinear(rhs, state.y, m);

		const ds = new Float64Array(n * n);
		fillDirection(this.#programme, dy, ds);
		multiply(state.x, ds, this.#first, n);
		multiply(this.#first, state.w, this.#second, n);
		symmetrise(this.#second, n);
		const dx = fixed;
		for (let cell = 0; cell < dx.length; cell++)
			dx[cell] = (dx[cell] ?? 0) - (state.x[cell] ?? 0) - (this.#second[cell] ?? 0);
		const linear = Float64Array.from(rows, (row) => evaluateRow(row, dy));
		return {
			dy,
			dx,
			ds,
			rowSlack: linear.map((value, j) => value + (state.rowResidual[j] ?? 0)),
			rowMultipliers: rowFixed.map((value, j) => {
				const z = state.rowMultipliers[j] ?? 0;
				return value - z - (z / (state.rowSlack[j] ?? 1)) * (linear[j] ?? 0);
			}),
			equalityMultipliers
		};
	}

	/**
	 * One step of iterative refinement on the linear equalities of the multiplier.
	 * @param residuals c + <F, X + dX> + ..., what a full step along `direction` would leave.
	 */
	correct(state: NewtonState, direction: Direction, residuals: Float64Array): void {
		const { size: n, rows, unknowns: m } = this.#programme;
		const { dy, equalityMultipliers } = this.#solveLinear(residuals, new Float64Array(m + 1), m);
		const ds = new Float64Array(n * n);
		fillDirection(this.#programme, dy, ds);
		multiply(state.x, ds, this.#first, n);
		multiply(this.#first, state.w, this.#second, n);
		symmetrise(this.#second, n);
		addScaled(direction.dx, -1, this.#second);
		addScaled(direction.equalityMultipliers, 1, equalityMultipliers);
		addScaled(direction.dy, 1, dy);
		addScaled(direction.ds, 1, ds);
		rows.forEach((row, j) => {
			const weight = (state.rowMultipliers[j] ?? 0) / (state.rowSlack[j] ?? 1);
			const change = evaluateRow(row, dy);
			direction.rowMultipliers[j] = (direction.rowMultipliers[j] ?? 0) - weight * change;
			direction.rowSlack[j] = (direction.rowSlack[j] ?? 0) + change;
		});
	}

	/** Solves the bordered system, with one step of iterative refinement on M. */
	#solveLinear(rhs: Float64Array, y: Float64Array, m: number) {
		const { equalities } = this.#programme;
		const ordered = new Float64Array(m);
		this.#schur.support.order.forEach((moment, rank) => (ordered[rank] = rhs[moment] ?? 0));
		const solution = this.#refined(ordered);
		const k = equalities.length;
		const equalityMultipliers = new Float64Array(k);
		if (this.#border && k > 0) {
			equalities.forEach((row, a) => {
				equalityMultipliers[a] = -evaluateRow(row, y) - dot(this.#ranked(row), solution);
			});
			solveFactored(this.#border.matrix, k, equalityMultipliers);
			this.#border.solved.forEach((vector, a) => {
				const weight = equalityMultipliers[a] ?? 0;
				for (let i = 0; i < m; i++) solution[i] = (solution[i] ?? 0) + weight * (vector[i] ?? 0);
			});
		}
		const dy = new Float64Array(m + 1);
		this.#schur.support.order.forEach((moment, rank) => (dy[moment] = solution[rank] ?? 0));
		return { dy, equalityMultipliers };
	}

	#refined(rhs: Float64Array): Float64Array {
		const m = rhs.length;
		const matrix = this.#matrix;
		const solution = rhs.slice();
		solveFactored(matrix, m, solution);
		this.#poll();
		const rest = rhs.slice();
		for (let i = 0; i < m; i++) {
			const row = i * m;
			const value = solution[i] ?? 0;
			let sum = (this.#diagonal[i] ?? 0) * value;
			for (let j = i + 1; j < m; j++) {
				const entry = matrix[row + j] ?? 0;
				sum += entry * (solution[j] ?? 0);
				rest[j] = (rest[j] ?? 0) - entry * value;
			}
			rest[i] = (rest[i] ?? 0) - sum;
		}
		this.#poll();
		solveFactored(matrix, m, rest);
		for (let i = 0; i < m; i++) solution[i] = (solution[i] ?? 0) + (rest[i] ?? 0);
		return solution;
	}
}

interface Border {
	/** M^-1 a_k, by rank. */
	readonly solved: readonly Float64Array[];
	/** Factor of A M^-1 A^T. */
	readonly matrix: Float64Array;
}

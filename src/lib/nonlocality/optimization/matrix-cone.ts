import type { Kernels } from '../linalg/kernels/kernels';
import type { SparseRow } from './moment-programme';

/**
 * Maximise c_0 + sum_i c_i y_i subject to F(y) = F_0 + sum_i y_i F_i >= 0 (positive semidefinite),
 * rows(y) >= 0 and equalities(y) = 0, and how to calculate with the symmetric matrices in it, which
 * may be blocks one after another. All arrays that hold one come from `matrix`.
 */
export interface MatrixCone {
	readonly kernels: Kernels;
	/** Order of the matrices. */
	readonly order: number;
	readonly unknowns: number;
	/** Unknowns in the order of the Schur complement's rows, and the row of each unknown. */
	readonly unknownAt: Int32Array;
	readonly rankOf: Int32Array;
	readonly objective: Float64Array;
	readonly rows: readonly SparseRow[];
	readonly equalities: readonly SparseRow[];
	/** Fraction of the way to the boundary, as `largestStep` estimates it, that a step takes. */
	readonly stepFraction: StepFraction;
	/** Zeroed. */
	matrix(): Float64Array;
	/** Writes F(y), y_0 = 1. */
	fill(y: Float64Array, out: Float64Array): void;
	/** Writes sum_i dy_i F_i, dy_0 = 0. */
	fillDirection(dy: Float64Array, out: Float64Array): void;
	/** out_i += <F_i, matrix>, F_0 included. */
	addInnerProducts(matrix: Float64Array, out: Float64Array): void;
	/** Moves a matrix to the nearest one whose products with the F_i are smaller by `residuals`. */
	project(residuals: Float64Array, matrix: Float64Array): void;
	/** Writes the inverse Cholesky factor; false, with nothing written, where it is not positive. */
	invertFactor(matrix: Float64Array, inverse: Float64Array): boolean;
	/** Writes the inverse matrix, from its inverse Cholesky factor. */
	invert(inverseFactor: Float64Array, out: Float64Array): void;
	/** Largest t with P + t D positive semidefinite, given P's inverse Cholesky factor: an estimate. */
	largestStep(inverseFactor: Float64Array, direction: Float64Array): number;
	/** out -= sym(a b c). */
	subtractProduct(out: Float64Array, a: Float64Array, b: Float64Array, c: Float64Array): void;
	/** Writes M_ij = <F_i, X F_j W>: lower triangle, unknowns by rank. */
	buildSchur(x: Float64Array, w: Float64Array, matrix: Float64Array, poll: () => void): void;
}

/** `least` where the predictor is stopped early, `more` added where it gets all the way. */
export interface StepFraction {
	readonly least: number;
	readonly more: number;
}

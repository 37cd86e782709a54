import { factorCholesky, solveFactored } from '../linalg/cholesky';
import type { SparseRow } from './moment-programme';

/**
 * Maximise c_0 + sum_j c_j y_j subject to B(y) = B_0 + sum_j y_j B_j >= 0 and rows(y) >= 0, where
 * the B_j are symmetric and block-diagonal with few entries. Symmetric matrices are arrays of the
 * blocks one after another, each row-major. Arrays over the unknowns have `unknowns + 1` entries,
 * number 0 standing for the constant.
 */
export interface BlockProgramme {
	/** Rows of each block, and where it begins in an array; the last entry is the arrays' length. */
	readonly sizes: readonly number[];
	readonly offsets: readonly number[];
	readonly unknowns: number;
	readonly objective: Float64Array;
	readonly rows: readonly SparseRow[];
	/** The entries of B_j, j = 0 .. unknowns: from start[j], lower triangle and its mirror image. */
	readonly start: Int32Array;
	readonly cells: Int32Array;
	readonly mirrors: Int32Array;
	readonly values: Float64Array;
	/** How often each block counts in the inner product of the projection. */
	readonly weights: readonly number[];
	/** Of the matrix <B_j, B_k> in that product, j, k >= 1. */
	readonly gram: GramFactor;
}

/** Cholesky factor of a Gram matrix, or just its diagonal where that is all. */
export type GramFactor =
	| { readonly diagonal: Float64Array; readonly factor: null }
	| { readonly diagonal: null; readonly factor: Float64Array };

/** Writes B(y), with y_0 = 1; with y_0 = 0 a direction. */
export function fillBlocks(programme: BlockProgramme, y: Float64Array, out: Float64Array): void {
	const { start, cells, mirrors, values } = programme;
	out.fill(0);
	for (let j = 0; j <= programme.unknowns; j++) {
		const factor = y[j] ?? 0;
		if (factor === 0) continue;
		const end = start[j + 1] ?? 0;
		for (let at = start[j] ?? 0; at < end; at++) {
			const cell = cells[at] ?? 0;
			const mirror = mirrors[at] ?? 0;
			const amount = factor * (values[at] ?? 0);
			out[cell] = (out[cell] ?? 0) + amount;
			if (mirror !== cell) out[mirror] = (out[mirror] ?? 0) + amount;
		}
	}
}

/** out_j += <B_j, matrix>, B_0 included. */
export function addBlockProducts(
	programme: BlockProgramme,
	matrix: Float64Array,
	out: Float64Array
): void {
	const { start, cells, mirrors, values } = programme;
	for (let j = 0; j <= programme.unknowns; j++) {
		const end = start[j + 1] ?? 0;
		let sum = 0;
		for (let at = start[j] ?? 0; at < end; at++) {
			const cell = cells[at] ?? 0;
			const mirror = mirrors[at] ?? 0;
			const value = values[at] ?? 0;
			sum += value * (matrix[cell] ?? 0);
			if (mirror !== cell) sum += value * (matrix[mirror] ?? 0);
		}
		out[j] = (out[j] ?? 0) + sum;
	}
}

/** Moves a matrix to the nearest one whose products with the B_j are smaller by `residuals`. */
export function projectBlocks(
	programme: BlockProgramme,
	residuals: Float64Array,
	matrix: Float64Array
): void {
	const { unknowns, gram, weights, offsets } = programme;
	const shares = residuals.slice(1);
	if (gram.factor) solveFactored(gram.factor, unknowns, shares);
	else for (let j = 0; j < unknowns; j++) shares[j] = (shares[j] ?? 0) / (gram.diagonal[j] ?? 1);
	const combination = new Float64Array(unknowns + 1);
	combination.set(shares, 1);
	const change = new Float64Array(matrix.length);
	fillBlocks(programme, combination, change);
	weights.forEach((weight, b) => {
		const end = offsets[b + 1] ?? 0;
		for (let cell = offsets[b] ?? 0; cell < end; cell++)
			matrix[cell] = (matrix[cell] ?? 0) - weight * (change[cell] ?? 0);
	});
}

/** Off-diagonal entries of a Gram matrix this small, relative to its diagonal, are rounding errors. */
const ORTHOGONAL = 1e-14;

/** @param matrix lower triangle, overwritten. Null when the B_j are not independent. */
export function factorGram(matrix: Float64Array, n: number): GramFactor | null {
	let orthogonal = true;
	for (let i = 0; i < n && orthogonal; i++) {
		const own = Math.abs(matrix[i * n + i] ?? 0);
		for (let j = 0; j < i; j++)
			if (Math.abs(matrix[i * n + j] ?? 0) > ORTHOGONAL * own) orthogonal = false;
	}
	if (!orthogonal) return factorCholesky(matrix, n) ? { diagonal: null, factor: matrix } : null;
	const diagonal = Float64Array.from({ length: n }, (_, i) => matrix[i * n + i] ?? 0);
	return diagonal.every((value) => value > 0) ? { diagonal, factor: null } : null;
}

/** Making views takes as long as a small block's arithmetic: each array's are made once. */
const views = new WeakMap<Float64Array, Float64Array[]>();

/** The blocks of an array, without copying. An array belongs to one programme. */
export function blocksOf(programme: BlockProgramme, array: Float64Array): Float64Array[] {
	const known = views.get(array);
	if (known) return known;
	const blocks = programme.sizes.map((size, b) => {
		const offset = programme.offsets[b] ?? 0;
		return array.subarray(offset, offset + size * size);
	});
	views.set(array, blocks);
	return blocks;
}

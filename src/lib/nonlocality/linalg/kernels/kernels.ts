import { PlainKernels } from './plain-kernels';
import type { Supports } from './supports';
import { takeWasmKernels } from './wasm-kernels';

export type KernelKind = 'wasm' | 'plain';

/**
 * Dense kernels on row-major matrices. All arrays handed to a method come from `doubles` and
 * `integers` of the same object (or are subarrays of such); both are valid until `release`.
 * `poll` is called at least every few milliseconds of work.
 */
export interface Kernels {
	readonly kind: KernelKind;
	/** Zeroed. */
	doubles(length: number): Float64Array;
	/** Zeroed. */
	integers(length: number): Int32Array;
	/** Gives the memory back: no array of it may be touched afterwards. */
	release(): void;
	dot(a: Float64Array, b: Float64Array): number;
	/** a += factor * b. */
	addScaled(a: Float64Array, factor: number, b: Float64Array): void;
	/** c = a b, n x n. */
	multiply(a: Float64Array, b: Float64Array, c: Float64Array, n: number): void;
	/** Replaces a by (a + a^T) / 2. */
	symmetrise(a: Float64Array, n: number): void;
	/** Copies the strict lower triangle to the upper one, or back. */
	mirror(a: Float64Array, n: number, to: 'upper' | 'lower'): void;
	/**
	 * Replaces the lower triangle of `a` by its Cholesky factor L, leaving the strict upper one alone;
	 * false as soon as a pivot is not positive.
	 */
	factorCholesky(a: Float64Array, n: number, poll?: () => void): boolean;
	/** Solves L L^T x = b in place, L in the lower triangle of `l`. */
	solveFactored(l: Float64Array, n: number, b: Float64Array): void;
	/** L^-1 (strict upper triangle zero). */
	invertFactor(l: Float64Array, n: number, inverse: Float64Array): void;
	/** L^-T L^-1 (both triangles) from L^-1. */
	inverseFromFactor(inverse: Float64Array, n: number, result: Float64Array): void;
	/** rest -= M x: M's strict upper triangle in `matrix`, its diagonal apart. */
	subtractProduct(
		matrix: Float64Array,
		diagonal: Float64Array,
		x: Float64Array,
		rest: Float64Array,
		n: number
	): void;
	/**
	 * Largest step t with P + t D positive semidefinite, P = L L^T, Infinity when D itself is:
	 * estimated to a few per cent by Lanczos' method on L^-1 D L^-T (Toh, SIAM J. Optim. 13, 2002), so that
	 * the caller still verifies the step.
	 * @param inverse L^-1, lower triangle; @param scratch has stepScratch(n) entries
	 */
	largestStep(
		inverse: Float64Array,
		direction: Float64Array,
		scratch: Float64Array,
		n: number
	): number;
	/**
	 * M_ij = <F_i, X F_j W>, lower triangle, by rank.
	 * After Fujisawa, Kojima, Nakata, Math. Program. 79, 235 (1997), specialised to disjoint supports:
	 * one short product a row, n^4 + m n^2 operations in all instead of m n^3 + m^2 n^2.
	 */
	buildSchur(
		supports: Supports,
		x: Float64Array,
		w: Float64Array,
		matrix: Float64Array,
		poll: () => void
	): void;
}

/** What a user of the kernels will ask for, so that the memory need not grow. */
export interface KernelDemand {
	/** Doubles in all, two integers counting as one; pages that stay untouched cost nothing. */
	readonly doubles: number;
	/** Number of arrays, each of which may lose a few bytes to its alignment. */
	readonly arrays: number;
	/** Largest order of a matrix to be factorised. */
	readonly order: number;
}

let forced: KernelKind | null = null;

/** Forces one kind on every solver of this thread (tests, benchmarks), or with null no longer does. */
export function forceKernels(kind: KernelKind | null): void {
	forced = kind;
}

/**
 * Kernels in WebAssembly where its vector instructions are there, otherwise in plain TypeScript.
 * @param kind forces one of them.
 * @throws Error when WebAssembly is asked for and not there.
 */
export function makeKernels(demand: KernelDemand, kind = forced): Kernels {
	if (kind === 'plain') return new PlainKernels();
	const kernels = takeWasmKernels(demand);
	if (kernels) return kernels;
	if (kind === 'wasm')
		throw new Error('WebAssembly with vector instructions is not available here');
	return new PlainKernels();
}

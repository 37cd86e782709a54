import { factorCholesky, invertFactor, inverseFromFactor } from '../linalg/cholesky';
import { addScaled, multiply, symmetrise } from '../linalg/dense';
import { PlainKernels } from '../linalg/kernels/plain-kernels';
import {
	addBlockProducts,
	blocksOf,
	fillBlocks,
	projectBlocks,
	type BlockProgramme
} from './block-programme';
import { BlockSchurComplement } from './block-schur-complement';
import { largestBlockStep } from './block-step-length';
import type { MatrixCone, StepFraction } from './matrix-cone';
import type { SparseRow } from './moment-programme';

/** Stands for the part of a block that there is not. */
const NO_BLOCK = new Float64Array(0);

/**
 * The matrices of a block programme, block by block: too small for a call of other kernels than the
 * plain ones to pay. The projection on the multiplier's equalities is by the Gram matrix of the B_j.
 */
export class BlockCone implements MatrixCone {
	readonly kernels = new PlainKernels();
	readonly order: number;
	readonly unknowns: number;
	readonly unknownAt: Int32Array;
	readonly rankOf: Int32Array;
	readonly objective: Float64Array;
	readonly rows: readonly SparseRow[];
	readonly equalities = [];
	readonly stepFraction: StepFraction = { least: 0.97, more: 0 };
	readonly #programme: BlockProgramme;
	readonly #schur: BlockSchurComplement;
	readonly #factor: Float64Array;
	readonly #first: Float64Array;
	readonly #second: Float64Array;

	constructor(programme: BlockProgramme) {
		this.order = programme.sizes.reduce((a, b) => a + b, 0);
		this.unknowns = programme.unknowns;
		this.objective = programme.objective;
		this.rows = programme.rows;
		this.#programme = programme;
		this.#schur = new BlockSchurComplement(programme);
		this.unknownAt = this.#schur.order;
		this.rankOf = this.#schur.rank;
		this.#factor = this.matrix();
		this.#first = this.matrix();
		this.#second = this.matrix();
	}

	matrix(): Float64Array {
		return new Float64Array(this.#programme.offsets.at(-1) ?? 0);
	}

	fill(y: Float64Array, out: Float64Array): void {
		fillBlocks(this.#programme, y, out);
	}

	fillDirection(dy: Float64Array, out: Float64Array): void {
		fillBlocks(this.#programme, dy, out);
	}

	addInnerProducts(matrix: Float64Array, out: Float64Array): void {
		addBlockProducts(this.#programme, matrix, out);
	}

	project(residuals: Float64Array, matrix: Float64Array): void {
		projectBlocks(this.#programme, residuals, matrix);
	}

	invertFactor(matrix: Float64Array, inverse: Float64Array): boolean {
		const { sizes } = this.#programme;
		this.#factor.set(matrix);
		const factors = blocksOf(this.#programme, this.#factor);
		const inverses = blocksOf(this.#programme, inverse);
		if (!sizes.every((size, b) => factorCholesky(factors[b] ?? NO_BLOCK, size))) return false;
		sizes.forEach((size, b) => {
			invertFactor(factors[b] ?? NO_BLOCK, size, inverses[b] ?? NO_BLOCK);
		});
		return true;
	}

	invert(inverseFactor: Float64Array, out: Float64Array): void {
		const inverses = blocksOf(this.#programme, inverseFactor);
		const outs = blocksOf(this.#programme, out);
		this.#programme.sizes.forEach((size, b) => {
			inverseFromFactor(inverses[b] ?? NO_BLOCK, size, outs[b] ?? NO_BLOCK);
		});
	}

	largestStep(inverseFactor: Float64Array, direction: Float64Array): number {
		const inverses = blocksOf(this.#programme, inverseFactor);
		const directions = blocksOf(this.#programme, direction);
		return this.#programme.sizes.reduce((step, size, b) => {
			const own = largestBlockStep(inverses[b] ?? NO_BLOCK, directions[b] ?? NO_BLOCK, size);
			return Math.min(step, own);
		}, Infinity);
	}

	subtractProduct(out: Float64Array, a: Float64Array, b: Float64Array, c: Float64Array): void {
		const lefts = blocksOf(this.#programme, a);
		const middles = blocksOf(this.#programme, b);
		const rights = blocksOf(this.#programme, c);
		const firsts = blocksOf(this.#programme, this.#first);
		const seconds = blocksOf(this.#programme, this.#second);
		this.#programme.sizes.forEach((size, k) => {
			const first = firsts[k] ?? NO_BLOCK;
			const second = seconds[k] ?? NO_BLOCK;
			multiply(lefts[k] ?? NO_BLOCK, middles[k] ?? NO_BLOCK, first, size);
			multiply(first, rights[k] ?? NO_BLOCK, second, size);
			symmetrise(second, size);
		});
		addScaled(out, -1, this.#second);
	}

	buildSchur(x: Float64Array, w: Float64Array, matrix: Float64Array, poll: () => void): void {
		this.#schur.build(x, w, matrix, poll);
	}
}

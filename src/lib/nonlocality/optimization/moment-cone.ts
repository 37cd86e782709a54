import { makeKernels, type KernelDemand, type Kernels } from '../linalg/kernels/kernels';
import { stepScratch } from '../linalg/kernels/plain-step';
import { layOutSupports, type Supports } from '../linalg/kernels/supports';
import type { MatrixCone, StepFraction } from './matrix-cone';
import {
	addInnerProducts,
	countCells,
	fillDirection,
	fillMoments,
	subtractAverages,
	type MomentProgramme,
	type SparseRow
} from './moment-programme';

/** What a solver takes of the kernels' memory, generously: n x n matrices, Lanczos' basis, lists. */
function demandOf({ size: n, unknowns: m }: MomentProgramme): KernelDemand {
	const square = (n + 3) ** 2;
	return {
		doubles: m * m + 30 * m + 30 * square + stepScratch(n),
		arrays: 200,
		order: Math.max(n, m)
	};
}

/**
 * The moment matrices of a programme, dense, by the kernels. The projection on the multiplier's
 * equalities is an average over cells, as the supports are disjoint.
 */
export class MomentCone implements MatrixCone {
	readonly kernels: Kernels;
	readonly order: number;
	readonly unknowns: number;
	readonly unknownAt: Int32Array;
	readonly rankOf: Int32Array;
	readonly objective: Float64Array;
	readonly rows: readonly SparseRow[];
	readonly equalities: readonly SparseRow[];
	/** Toh, Todd, Tutuncu, Optim. Methods Softw. 11, 545 (1999). */
	readonly stepFraction: StepFraction = { least: 0.9, more: 0.09 };
	readonly #programme: MomentProgramme;
	readonly #supports: Supports;
	readonly #cells: Int32Array;
	readonly #stepScratch: Float64Array;
	readonly #factor: Float64Array;
	readonly #first: Float64Array;
	readonly #second: Float64Array;

	constructor(programme: MomentProgramme) {
		const { index, size, unknowns } = programme;
		const kernels = makeKernels(demandOf(programme));
		this.kernels = kernels;
		this.order = size;
		this.unknowns = unknowns;
		this.objective = programme.objective;
		this.rows = programme.rows;
		this.equalities = programme.equalities;
		this.#programme = programme;
		this.#supports = layOutSupports(index, size, unknowns, (length) => kernels.integers(length));
		this.unknownAt = this.#supports.order;
		this.rankOf = this.#supports.rank;
		this.#cells = countCells(programme);
		this.#stepScratch = kernels.doubles(stepScratch(size));
		this.#factor = this.matrix();
		this.#first = this.matrix();
		this.#second = this.matrix();
	}

	matrix(): Float64Array {
		return this.kernels.doubles(this.order * this.order);
	}

	fill(y: Float64Array, out: Float64Array): void {
		fillMoments(this.#programme, y, out);
	}

	fillDirection(dy: Float64Array, out: Float64Array): void {
		fillDirection(this.#programme, dy, out);
	}

	addInnerProducts(matrix: Float64Array, out: Float64Array): void {
		addInnerProducts(this.#programme, matrix, out);
	}

	project(residuals: Float64Array, matrix: Float64Array): void {
		subtractAverages(this.#programme, this.#cells, residuals, matrix);
	}

	invertFactor(matrix: Float64Array, inverse: Float64Array): boolean {
		this.#factor.set(matrix);
		if (!this.kernels.factorCholesky(this.#factor, this.order)) return false;
		this.kernels.invertFactor(this.#factor, this.order, inverse);
		return true;
	}

	invert(inverseFactor: Float64Array, out: Float64Array): void {
		this.kernels.inverseFromFactor(inverseFactor, this.order, out);
	}

	largestStep(inverseFactor: Float64Array, direction: Float64Array): number {
		return this.kernels.largestStep(inverseFactor, direction, this.#stepScratch, this.order);
	}

	subtractProduct(out: Float64Array, a: Float64Array, b: Float64Array, c: Float64Array): void {
		this.kernels.multiply(a, b, this.#first, this.order);
		this.kernels.multiply(this.#first, c, this.#second, this.order);
		this.kernels.symmetrise(this.#second, this.order);
		this.kernels.addScaled(out, -1, this.#second);
	}

	buildSchur(x: Float64Array, w: Float64Array, matrix: Float64Array, poll: () => void): void {
		this.kernels.buildSchur(this.#supports, x, w, matrix, poll);
	}
}

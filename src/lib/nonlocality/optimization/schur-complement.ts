import type { Kernels } from '../linalg/kernels/kernels';
import { layOutSupports, type Supports } from '../linalg/kernels/supports';
import type { MomentProgramme } from './moment-programme';

/** Builds M_ij = <F_i, X F_j W> + the linear block's rows: lower triangle, moments by rank. */
export class SchurComplement {
	readonly supports: Supports;
	readonly #programme: MomentProgramme;
	readonly #kernels: Kernels;

	constructor(programme: MomentProgramme, kernels: Kernels) {
		const { index, size, unknowns } = programme;
		this.#programme = programme;
		this.#kernels = kernels;
		this.supports = layOutSupports(index, size, unknowns, (length) => kernels.integers(length));
	}

	/** @param weights z_j / s_j of the linear rows. */
	build(
		x: Float64Array,
		w: Float64Array,
		weights: Float64Array,
		matrix: Float64Array,
		poll: () => void
	): void {
		this.#kernels.buildSchur(this.supports, x, w, matrix, poll);
		this.#addLinearRows(weights, matrix);
	}

	#addLinearRows(weights: Float64Array, matrix: Float64Array): void {
		const { rows, unknowns: m } = this.#programme;
		const { rank } = this.supports;
		for (const [j, { columns, values }] of rows.entries()) {
			const weight = weights[j] ?? 0;
			for (let atA = 0; atA < columns.length; atA++) {
				const a = columns[atA] ?? 0;
				if (a === 0) continue;
				const rankA = rank[a] ?? 0;
				const scaled = weight * (values[atA] ?? 0);
				for (let atB = 0; atB < columns.length; atB++) {
					const b = columns[atB] ?? 0;
					const rankB = rank[b] ?? 0;
					if (b === 0 || rankB > rankA) continue;
					const at = rankA * m + rankB;
					matrix[at] = (matrix[at] ?? 0) + scaled * (values[atB] ?? 0);
				}
			}
		}
	}
}

/** A sparse linear form on the moments; column 0 is the constant. */
export interface SparseRow {
	readonly columns: readonly number[];
	readonly values: readonly number[];
}

/**
 * Maximise c_0 + sum_i c_i y_i subject to Gamma(y) >= 0 (positive semidefinite), rows(y) >= 0 and
 * equalities(y) = 0. Gamma(y) has 1 where `index` is 0, y_i where it is i > 0 and 0 where it is -1:
 * the matrices F_i have disjoint supports, which everything below lives on. Every array over the
 * moments has `unknowns + 1` entries, number 0 standing for the constant.
 */
export interface MomentProgramme {
	readonly size: number;
	/** Symmetric, row-major. */
	readonly index: Int32Array;
	readonly unknowns: number;
	readonly objective: Float64Array;
	readonly rows: readonly SparseRow[];
	readonly equalities: readonly SparseRow[];
}

export function evaluateRow(row: SparseRow, y: Float64Array): number {
	const { columns, values } = row;
	let sum = 0;
	for (let at = 0; at < columns.length; at++) sum += (values[at] ?? 0) * (y[columns[at] ?? 0] ?? 0);
	return sum;
}

/** Writes Gamma(y). */
export function fillMoments(programme: MomentProgramme, y: Float64Array, gamma: Float64Array) {
	const { index } = programme;
	for (let cell = 0; cell < index.length; cell++) {
		const moment = index[cell] ?? -1;
		gamma[cell] = moment < 0 ? 0 : (y[moment] ?? 0);
	}
}

/** Writes sum_i dy_i F_i (no constant part). */
export function fillDirection(programme: MomentProgramme, dy: Float64Array, out: Float64Array) {
	const { index } = programme;
	for (let cell = 0; cell < index.length; cell++) {
		const moment = index[cell] ?? -1;
		out[cell] = moment <= 0 ? 0 : (dy[moment] ?? 0);
	}
}

/** out_i += <F_i, matrix>, F_0 included. */
export function addInnerProducts(
	programme: MomentProgramme,
	matrix: Float64Array,
	out: Float64Array
): void {
	const { index } = programme;
	for (let cell = 0; cell < index.length; cell++) {
		const moment = index[cell] ?? -1;
		if (moment >= 0) out[moment] = (out[moment] ?? 0) + (matrix[cell] ?? 0);
	}
}

/** out += sum_j weights_j row_j. */
export function addRows(
	rows: readonly SparseRow[],
	weights: Float64Array,
	out: Float64Array
): void {
	rows.forEach((row, j) => {
		const weight = weights[j] ?? 0;
		const { columns, values } = row;
		for (let at = 0; at < columns.length; at++) {
			const column = columns[at] ?? 0;
			out[column] = (out[column] ?? 0) + weight * (values[at] ?? 0);
		}
	});
}

/** How many cells of the matrix hold each moment. */
export function countCells(programme: MomentProgramme): Int32Array {
	const counts = new Int32Array(programme.unknowns + 1);
	for (const moment of programme.index) if (moment >= 0) counts[moment] = (counts[moment] ?? 0) + 1;
	return counts;
}

/** Moves a matrix to the nearest one whose <F_i, matrix> are smaller by `residuals`, i > 0. */
export function subtractAverages(
	{ index }: MomentProgramme,
	cells: Int32Array,
	residuals: Float64Array,
	matrix: Float64Array
): void {
	for (let cell = 0; cell < index.length; cell++) {
		const moment = index[cell] ?? -1;
		if (moment > 0)
			matrix[cell] = (matrix[cell] ?? 0) - (residuals[moment] ?? 0) / (cells[moment] ?? 1);
	}
}

/**
 * Symmetric 0-1 matrices F_1 .. F_m with disjoint supports, laid out for the Schur complement.
 * They come in the order of `order`, those with the most cells first; a place in it is a rank.
 */
export interface Supports {
	readonly size: number;
	/** `size` rounded up to a multiple of 4: row length of the products. */
	readonly stride: number;
	readonly order: Int32Array;
	/** `rank[i]` of F_i; entry 0 stands for no matrix. */
	readonly rank: Int32Array;
	/** Cells row * stride + column with row >= column, of the rank's matrix from `cellStart[rank]`. */
	readonly cells: Int32Array;
	readonly cellStart: Int32Array;
	/** Distinct rows of each rank's matrix, and of each of those the columns. */
	readonly rows: Int32Array;
	readonly rowStart: Int32Array;
	readonly columns: Int32Array;
	readonly columnStart: Int32Array;
	readonly mostRows: number;
}

/**
 * @param index symmetric row-major n x n: the number of the matrix that has a one in the cell, or
 *   anything below 1. Every number 1 .. count occurs.
 * @param integers where the lists are kept
 */
export function layOutSupports(
	index: Int32Array,
	size: number,
	count: number,
	integers: (length: number) => Int32Array
): Supports {
	const stride = (size + 3) & ~3;
	const cellsOf: number[][] = Array.from({ length: count + 1 }, () => []);
	for (let cell = 0; cell < size * size; cell++) {
		const matrix = index[cell] ?? 0;
		if (matrix > 0) cellsOf[matrix]?.push(cell);
	}
	const sizes = cellsOf.map((cells) => cells.length);
	const order = Array.from({ length: count }, (_, i) => i + 1);
	order.sort((a, b) => (sizes[b] ?? 0) - (sizes[a] ?? 0) || a - b);
	const lower: number[] = [];
	const cellStart = [0];
	const rows: number[] = [];
	const rowStart = [0];
	const columns: number[] = [];
	const columnStart: number[] = [];
	let mostRows = 0;
	for (const matrix of order) {
		let previous = -1;
		for (const cell of cellsOf[matrix] ?? []) {
			const row = Math.floor(cell / size);
			const column = cell - row * size;
			if (row !== previous) {
				rows.push(row);
				columnStart.push(columns.length);
				previous = row;
			}
			columns.push(column);
			if (column <= row) lower.push(row * stride + column);
		}
		mostRows = Math.max(mostRows, rows.length - (rowStart.at(-1) ?? 0));
		cellStart.push(lower.length);
		rowStart.push(rows.length);
	}
	columnStart.push(columns.length);
	const keep = (values: readonly number[]) => {
		const kept = integers(values.length);
		kept.set(values);
		return kept;
	};
	const rank = integers(count + 1);
	order.forEach((matrix, at) => (rank[matrix] = at));
	return {
		size,
		stride,
		order: keep(order),
		rank,
		cells: keep(lower),
		cellStart: keep(cellStart),
		rows: keep(rows),
		rowStart: keep(rowStart),
		columns: keep(columns),
		columnStart: keep(columnStart),
		mostRows
	};
}

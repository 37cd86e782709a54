import type { BlockProgramme } from './block-programme';

/** One block's part of B_j: the distinct rows, and the entries of each. */
interface BlockPart {
	readonly block: number;
	readonly rowFrom: number;
	readonly rowTo: number;
}

/**
 * Builds M_jk = <B_j, X B_k W>, lower triangle. Per unknown and block one
 * short product over the distinct rows of B_k, read off at the entries of the others; those with
 * most rows come first and so serve for all others (as in linalg/kernels/plain-schur.ts, where each cell
 * belongs to one moment alone).
 */
export class BlockSchurComplement {
	/** Unknowns in the order of M's rows, and the place of each unknown there. */
	readonly order: Int32Array;
	readonly rank: Int32Array;
	readonly #programme: BlockProgramme;
	/** By rank. */
	readonly #parts: readonly (readonly BlockPart[])[];
	readonly #rows: Int32Array;
	readonly #entryStart: Int32Array;
	readonly #columns: Int32Array;
	readonly #columnValues: Float64Array;
	/** Lower cells by rank, off-diagonal values doubled: for products with symmetrised matrices. */
	readonly #cellStart: Int32Array;
	readonly #cells: Int32Array;
	readonly #cellValues: Float64Array;
	readonly #left: Float64Array;
	readonly #right: Float64Array;
	readonly #product: Float64Array;

	constructor(programme: BlockProgramme) {
		const { unknowns: m, start, cells, mirrors, values, sizes, offsets } = programme;
		this.#programme = programme;
		const length = (j: number) => (start[j + 1] ?? 0) - (start[j] ?? 0);
		this.order = Int32Array.from({ length: m }, (_, i) => i + 1);
		this.order.sort((a, b) => length(b) - length(a) || a - b);
		this.rank = new Int32Array(m + 1);
		this.order.forEach((j, rank) => (this.rank[j] = rank));

		const blockOf = (cell: number) => {
			let b = 0;
			while ((offsets[b + 1] ?? Infinity) <= cell) b++;
			return b;
		};
		const rows: number[] = [];
		const entryStart: number[] = [];
		const columns: number[] = [];
		const columnValues: number[] = [];
		const cellStart = [0];
		const ownCells: number[] = [];
		const ownValues: number[] = [];
		this.#parts = [...this.order].map((j) => {
			const entries: { block: number; row: number; column: number; value: number }[] = [];
			for (let at = start[j] ?? 0; at < (start[j + 1] ?? 0); at++) {
				const cell = cells[at] ?? 0;
				const mirror = mirrors[at] ?? 0;
				const value = values[at] ?? 0;
				const block = blockOf(cell);
				const size = sizes[block] ?? 1;
				const place = cell - (offsets[block] ?? 0);
				const row = Math.floor(place / size);
				const column = place - row * size;
				entries.push({ block, row, column, value });
				if (mirror !== cell) entries.push({ block, row: column, column: row, value });
				ownCells.push(cell);
				ownValues.push(mirror === cell ? 0.5 * value : value);
			}
			cellStart.push(ownCells.length);
			entries.sort((a, b) => a.block - b.block || a.row - b.row || a.column - b.column);
			const parts: { block: number; rowFrom: number; rowTo: number }[] = [];
			let previous = -1;
			for (const { block, row, column, value } of entries) {
				let part = parts.at(-1);
				if (part?.block !== block) {
					part = { block, rowFrom: rows.length, rowTo: rows.length };
					parts.push(part);
					previous = -1;
				}
				if (row !== previous) {
					rows.push(row);
					entryStart.push(columns.length);
					part.rowTo = rows.length;
					previous = row;
				}
				columns.push(column);
				columnValues.push(value);
			}
			return parts;
		});
		entryStart.push(columns.length);
		this.#rows = Int32Array.from(rows);
		this.#entryStart = Int32Array.from(entryStart);
		this.#columns = Int32Array.from(columns);
		this.#columnValues = Float64Array.from(columnValues);
		this.#cellStart = Int32Array.from(cellStart);
		this.#cells = Int32Array.from(ownCells);
		this.#cellValues = Float64Array.from(ownValues);
		const largest = Math.max(1, ...sizes);
		this.#left = new Float64Array((largest + 3) * largest);
		this.#right = new Float64Array((largest + 3) * largest);
		this.#product = new Float64Array(offsets.at(-1) ?? 0);
	}

	build(x: Float64Array, w: Float64Array, matrix: Float64Array, poll: () => void): void {
		const m = this.#programme.unknowns;
		const product = this.#product;
		const cells = this.#cells;
		const values = this.#cellValues;
		let sinceLastPoll = 0;
		for (let rank = 0; rank < m; rank++) {
			product.fill(0);
			for (const part of this.#parts[rank] ?? []) {
				const size = this.#programme.sizes[part.block] ?? 0;
				const offset = this.#programme.offsets[part.block] ?? 0;
				const depth = this.#gather(part, x, w, size, offset);
				shortProduct(this.#left, this.#right, product, offset, size, depth);
				addTranspose(product, offset, size);
				sinceLastPoll += depth * size * size;
			}
			const row = rank * m;
			let at = 0;
			for (let other = 0; other <= rank; other++) {
				const end = this.#cellStart[other + 1] ?? 0;
				let sum = 0;
				for (; at < end; at++) sum += (values[at] ?? 0) * (product[cells[at] ?? 0] ?? 0);
				matrix[row + other] = sum;
			}
			sinceLastPoll += at;
			if (sinceLastPoll > 4e6) {
				poll();
				sinceLastPoll = 0;
			}
		}
	}

	/** Rows of X and of B_j W for the distinct rows of B_j, padded with zeros to a multiple of 4. */
	#gather(part: BlockPart, x: Float64Array, w: Float64Array, size: number, offset: number): number {
		const left = this.#left;
		const right = this.#right;
		let to = 0;
		for (let at = part.rowFrom; at < part.rowTo; at++) {
			const from = offset + (this.#rows[at] ?? 0) * size;
			const last = this.#entryStart[at + 1] ?? 0;
			for (let j = 0; j < size; j++) left[to + j] = x[from + j] ?? 0;
			let entry = this.#entryStart[at] ?? 0;
			const first = offset + (this.#columns[entry] ?? 0) * size;
			const value = this.#columnValues[entry] ?? 0;
			for (let j = 0; j < size; j++) right[to + j] = value * (w[first + j] ?? 0);
			for (entry++; entry < last; entry++) {
				const add = offset + (this.#columns[entry] ?? 0) * size;
				const factor = this.#columnValues[entry] ?? 0;
				for (let j = 0; j < size; j++)
					right[to + j] = (right[to + j] ?? 0) + factor * (w[add + j] ?? 0);
			}
			to += size;
		}
		const depth = part.rowTo - part.rowFrom;
		const padded = (depth + 3) & ~3;
		left.fill(0, to, padded * size);
		right.fill(0, to, padded * size);
		return padded;
	}
}

/** product += left^T right from `offset`, both `depth x n`, depth a multiple of 4. */
function shortProduct(
	left: Float64Array,
	right: Float64Array,
	product: Float64Array,
	offset: number,
	n: number,
	depth: number
): void {
	for (let k = 0; k < depth; k += 4) {
		const k0 = k * n;
		const k1 = k0 + n;
		const k2 = k1 + n;
		const k3 = k2 + n;
		for (let p = 0; p < n; p++) {
			const a0 = left[k0 + p] ?? 0;
			const a1 = left[k1 + p] ?? 0;
			const a2 = left[k2 + p] ?? 0;
			const a3 = left[k3 + p] ?? 0;
			const row = offset + p * n;
			for (let q = 0; q < n; q++)
				product[row + q] =
					(product[row + q] ?? 0) +
					a0 * (right[k0 + q] ?? 0) +
					a1 * (right[k1 + q] ?? 0) +
					a2 * (right[k2 + q] ?? 0) +
					a3 * (right[k3 + q] ?? 0);
		}
	}
}

/** Lower triangle: P + P^T. */
function addTranspose(product: Float64Array, offset: number, n: number): void {
	for (let i = 0; i < n; i++)
		for (let j = 0; j <= i; j++) {
			const cell = offset + i * n + j;
			product[cell] = (product[cell] ?? 0) + (product[offset + j * n + i] ?? 0);
		}
}

import type { Supports } from './supports';

/** Multiplications between two polls. */
const WORK_PER_POLL = 4e6;

/** The Schur complement of Kernels.buildSchur in plain TypeScript. */
export class PlainSchur {
	readonly supports: Supports;
	readonly #left: Float64Array;
	readonly #right: Float64Array;
	readonly #product: Float64Array;

	constructor(supports: Supports) {
		const { stride, mostRows } = supports;
		this.supports = supports;
		this.#left = new Float64Array((mostRows + 3) * stride);
		this.#right = new Float64Array((mostRows + 3) * stride);
		this.#product = new Float64Array(stride * stride);
	}

	build(x: Float64Array, w: Float64Array, matrix: Float64Array, poll: () => void): void {
		const { cells, cellStart, stride, order } = this.supports;
		const m = order.length;
		const product = this.#product;
		const pollEvery = Math.max(1, Math.ceil(WORK_PER_POLL / (stride * stride)));
		for (let rank = 0; rank < m; rank++) {
			const depth = this.#gather(rank, x, w);
			shortProduct(this.#left, this.#right, product, stride, depth);
			addTranspose(product, stride);
			const row = rank * m;
			for (let other = 0; other <= rank; other++) {
				const end = cellStart[other + 1] ?? 0;
				let sum = 0;
				for (let at = cellStart[other] ?? 0; at < end; at++) sum += product[cells[at] ?? 0] ?? 0;
				matrix[row + other] = sum;
			}
			if (rank % pollEvery === 0) poll();
		}
	}

	/** Rows of X and of F_i W for the distinct rows of F_i, padded with zeros to a multiple of 4. */
	#gather(rank: number, x: Float64Array, w: Float64Array): number {
		const { rowStart, rows, columnStart, columns, size: n, stride } = this.supports;
		const left = this.#left;
		const right = this.#right;
		const begin = rowStart[rank] ?? 0;
		const end = rowStart[rank + 1] ?? 0;
		let to = 0;
		for (let at = begin; at < end; at++) {
			const from = (rows[at] ?? 0) * n;
			for (let j = 0; j < n; j++) left[to + j] = x[from + j] ?? 0;
			let column = columnStart[at] ?? 0;
			const last = columnStart[at + 1] ?? 0;
			const first = (columns[column] ?? 0) * n;
			for (let j = 0; j < n; j++) right[to + j] = w[first + j] ?? 0;
			for (column++; column < last; column++) {
				const add = (columns[column] ?? 0) * n;
				for (let j = 0; j < n; j++) right[to + j] = (right[to + j] ?? 0) + (w[add + j] ?? 0);
			}
			to += stride;
		}
		const depth = end - begin;
		const padded = (depth + 3) & ~3;
		left.fill(0, to, padded * stride);
		right.fill(0, to, padded * stride);
		return padded;
	}
}

/** Lower triangle: product + product^T, the diagonal halved. */
function addTranspose(product: Float64Array, n: number): void {
	for (let i = 0; i < n; i++) {
		const row = i * n;
		for (let j = 0; j < i; j++)
			product[row + j] = (product[row + j] ?? 0) + (product[j * n + i] ?? 0);
	}
}

/** product = left^T right, both `depth x n`; depth and n multiples of 4. */
function shortProduct(
	left: Float64Array,
	right: Float64Array,
	product: Float64Array,
	n: number,
	depth: number
): void {
	product.fill(0);
	for (let k = 0; k < depth; k += 4) {
		const k0 = k * n;
		const k1 = k0 + n;
		const k2 = k1 + n;
		const k3 = k2 + n;
		for (let p = 0; p < n; p += 2) {
			const a0 = left[k0 + p] ?? 0;
			const a1 = left[k1 + p] ?? 0;
			const a2 = left[k2 + p] ?? 0;
			const a3 = left[k3 + p] ?? 0;
			const b0 = left[k0 + p + 1] ?? 0;
			const b1 = left[k1 + p + 1] ?? 0;
			const b2 = left[k2 + p + 1] ?? 0;
			const b3 = left[k3 + p + 1] ?? 0;
			const top = p * n;
			const bottom = top + n;
			for (let q = 0; q < n; q++) {
				const r0 = right[k0 + q] ?? 0;
				const r1 = right[k1 + q] ?? 0;
				const r2 = right[k2 + q] ?? 0;
				const r3 = right[k3 + q] ?? 0;
				product[top + q] = (product[top + q] ?? 0) + a0 * r0 + a1 * r1 + a2 * r2 + a3 * r3;
				product[bottom + q] = (product[bottom + q] ?? 0) + b0 * r0 + b1 * r1 + b2 * r2 + b3 * r3;
			}
		}
	}
}

/**
 * Rows of the Schur complement M_ij = <F_i, X F_j W>, j <= i. With d distinct rows in F_i,
 * X F_i W = left^T right, `left` the rows of X and `right` those of F_i W. As the F_j are
 * symmetric, only the lower triangle of S = left^T right + right^T left is needed, its diagonal
 * halved.
 */

import { copy } from './layout';

/**
 * @param ld n rounded up to a multiple of 4: the row length of left, right and product
 * @param cells row ld + column, row >= column, by rank; cellStart: rank -> cell
 * @param rowStart rank -> first of its distinct rows; columnStart: distinct row -> first column
 */
export function buildRows(
	x: usize,
	w: usize,
	n: i32,
	ld: i32,
	fromRank: i32,
	toRank: i32,
	rowStart: usize,
	rows: usize,
	columnStart: usize,
	columns: usize,
	cellStart: usize,
	cells: usize,
	left: usize,
	right: usize,
	product: usize,
	matrix: usize,
	m: i32
): void {
	for (let rank = fromRank; rank < toRank; rank++) {
		const begin = load<i32>(rowStart + ((<usize>rank) << 2));
		const depth = load<i32>(rowStart + ((<usize>rank) << 2), 4) - begin;
		gatherRows(x, w, n, ld, begin, depth, rows, columnStart, columns, left, right);
		symmetricProduct(left, right, product, ld, depth);
		let cell = cells;
		let to = matrix + ((<usize>(rank * m)) << 3);
		let at = load<i32>(cellStart);
		for (let other = 0; other <= rank; other++) {
			const end = load<i32>(cellStart + ((<usize>other) << 2), 4);
			let sum = load<f64>(product + ((<usize>load<u32>(cell)) << 3));
			cell += 4;
			for (at++; at < end; at++) {
				sum += load<f64>(product + ((<usize>load<u32>(cell)) << 3));
				cell += 4;
			}
			store<f64>(to, sum);
			to += 8;
		}
	}
}

function gatherRows(
	x: usize,
	w: usize,
	n: i32,
	ld: i32,
	begin: i32,
	depth: i32,
	rows: usize,
	columnStart: usize,
	columns: usize,
	left: usize,
	right: usize
): void {
	const bytes = (<usize>n) << 3;
	const stride = (<usize>ld) << 3;
	for (let d = begin; d < begin + depth; d++) {
		copy(left, x + <usize>load<i32>(rows + ((<usize>d) << 2)) * bytes, n);
		let column = load<i32>(columnStart + ((<usize>d) << 2));
		const last = load<i32>(columnStart + ((<usize>d) << 2), 4);
		copy(right, w + <usize>load<i32>(columns + ((<usize>column) << 2)) * bytes, n);
		for (column++; column < last; column++) {
			let from = w + <usize>load<i32>(columns + ((<usize>column) << 2)) * bytes;
			let to = right;
			const end = to + ((<usize>(n & ~1)) << 3);
			while (to < end) {
				v128.store(to, f64x2.add(v128.load(to), v128.load(from)));
				to += 16;
				from += 16;
			}
			if (n & 1) store<f64>(to, load<f64>(to) + load<f64>(from));
		}
		left += stride;
		right += stride;
	}
}

function symmetricProduct(left: usize, right: usize, product: usize, ld: i32, depth: i32): void {
	const stride = (<usize>ld) << 3;
	const depthBytes = <usize>depth * stride;
	for (let p: usize = 0; p < stride; p += 32) {
		const row = product + (p >> 3) * stride;
		for (let q: usize = 0; q <= p; q += 32)
			symmetricTile(left, right, p, q, depthBytes, stride, row + q);
		for (let r: usize = 0; r < 4; r++) {
			const diagonal = row + r * (stride + 8) + p;
			store<f64>(diagonal, 0.5 * load<f64>(diagonal));
		}
	}
}

function symmetricTile(
	left: usize,
	right: usize,
	p: usize,
	q: usize,
	depthBytes: usize,
	stride: usize,
	to: usize
): void {
	let a0 = f64x2.splat(0);
	let a1 = a0;
	let b0 = a0;
	let b1 = a0;
	let c0 = a0;
	let c1 = a0;
	let d0 = a0;
	let d1 = a0;
	const end = left + depthBytes;
	while (left < end) {
		const lp = left + p;
		const lq = left + q;
		const rp = right + p;
		const rq = right + q;
		let q0 = v128.load(rq, 0);
		let q1 = v128.load(rq, 16);
		let x = v128.load64_splat(lp, 0);
		a0 = f64x2.add(a0, f64x2.mul(x, q0));
		a1 = f64x2.add(a1, f64x2.mul(x, q1));
		x = v128.load64_splat(lp, 8);
		b0 = f64x2.add(b0, f64x2.mul(x, q0));
		b1 = f64x2.add(b1, f64x2.mul(x, q1));
		x = v128.load64_splat(lp, 16);
		c0 = f64x2.add(c0, f64x2.mul(x, q0));
		c1 = f64x2.add(c1, f64x2.mul(x, q1));
		x = v128.load64_splat(lp, 24);
		d0 = f64x2.add(d0, f64x2.mul(x, q0));
		d1 = f64x2.add(d1, f64x2.mul(x, q1));
		q0 = v128.load(lq, 0);
		q1 = v128.load(lq, 16);
		x = v128.load64_splat(rp, 0);
		a0 = f64x2.add(a0, f64x2.mul(x, q0));
		a1 = f64x2.add(a1, f64x2.mul(x, q1));
		x = v128.load64_splat(rp, 8);
		b0 = f64x2.add(b0, f64x2.mul(x, q0));
		b1 = f64x2.add(b1, f64x2.mul(x, q1));
		x = v128.load64_splat(rp, 16);
		c0 = f64x2.add(c0, f64x2.mul(x, q0));
		c1 = f64x2.add(c1, f64x2.mul(x, q1));
		x = v128.load64_splat(rp, 24);
		d0 = f64x2.add(d0, f64x2.mul(x, q0));
		d1 = f64x2.add(d1, f64x2.mul(x, q1));
		left += stride;
		right += stride;
	}
	v128.store(to, a0, 0);
	v128.store(to, a1, 16);
	to += stride;
	v128.store(to, b0, 0);
	v128.store(to, b1, 16);
	to += stride;
	v128.store(to, c0, 0);
	v128.store(to, c1, 16);
	to += stride;
	v128.store(to, d0, 0);
	v128.store(to, d1, 16);
}

/**
 * Blocked Cholesky factorisation, row-major, lower triangle only. Rows below a block of columns are
 * packed in groups of four, `pack[(group * width + k) * 4 + row]`: the triangular solve and the
 * update of what is left then run on contiguous vectors.
 */
import { BLOCK, SCRATCH, TRANSPOSED, clear } from './layout';

/**
 * Eliminates columns start .. end of the rows from `start` on, reading and writing no other columns.
 * False when a pivot is not positive.
 */
export function factorPanel(a: usize, n: i32, start: i32, end: i32, pack: usize): bool {
	for (let s = start; s < end; s += BLOCK) {
		const e = min(s + BLOCK, end);
		if (!factorBlock(a, n, s, e)) return false;
		if (e == n) break;
		packColumns(a, n, s, e, e, pack);
		solveRows(n, s, e, pack);
		unpackColumns(a, n, s, e, pack);
		if (e < end) updateColumns(a, n, e, e - s, 0, (end - e + 3) >> 2, pack);
	}
	return true;
}

/**
 * The diagonal block, transposed so that the rows of one column are contiguous; its factor stays
 * at TRANSPOSED for solveRows.
 */
function factorBlock(a: usize, n: i32, start: i32, end: i32): bool {
	const width = end - start;
	clear(TRANSPOSED, width * BLOCK);
	for (let i = 0; i < width; i++) {
		const row = a + ((<usize>((start + i) * n + start)) << 3);
		for (let j = 0; j <= i; j++)
			store<f64>(TRANSPOSED + ((<usize>(j * BLOCK + i)) << 3), load<f64>(row + ((<usize>j) << 3)));
	}
	for (let j = 0; j < width; j++) {
		const column = TRANSPOSED + ((<usize>(j * BLOCK)) << 3);
		for (let i = j & ~7; i < width; i += 8) {
			const to = column + ((<usize>i) << 3);
			let c0 = v128.load(to, 0);
			let c1 = v128.load(to, 16);
			let c2 = v128.load(to, 32);
			let c3 = v128.load(to, 48);
			let from = TRANSPOSED + ((<usize>i) << 3);
			let factor = TRANSPOSED + ((<usize>j) << 3);
			for (let k = 0; k < j; k++) {
				const l = v128.load64_splat(factor);
				c0 = f64x2.sub(c0, f64x2.mul(l, v128.load(from, 0)));
				c1 = f64x2.sub(c1, f64x2.mul(l, v128.load(from, 16)));
				c2 = f64x2.sub(c2, f64x2.mul(l, v128.load(from, 32)));
				c3 = f64x2.sub(c3, f64x2.mul(l, v128.load(from, 48)));
				from += BLOCK * 8;
				factor += BLOCK * 8;
			}
			v128.store(to, c0, 0);
			v128.store(to, c1, 16);
			v128.store(to, c2, 32);
			v128.store(to, c3, 48);
		}
		const pivot = load<f64>(column + ((<usize>j) << 3));
		if (!(pivot > 0) || pivot == Infinity) return false;
		const root = sqrt(pivot);
		store<f64>(column + ((<usize>j) << 3), root);
		for (let i = j + 1; i < width; i++) {
			const at = column + ((<usize>i) << 3);
			store<f64>(at, load<f64>(at) / root);
		}
	}
	for (let i = 0; i < width; i++) {
		const row = a + ((<usize>((start + i) * n + start)) << 3);
		for (let j = 0; j <= i; j++)
			store<f64>(row + ((<usize>j) << 3), load<f64>(TRANSPOSED + ((<usize>(j * BLOCK + i)) << 3)));
	}
	return true;
}

/** Packs columns start .. end of the rows from `first` on, the last group filled up with zeros. */
export function packColumns(a: usize, n: i32, start: i32, end: i32, first: i32, pack: usize): void {
	const width = end - start;
	const stride = (<usize>n) << 3;
	let to = pack;
	let i = first;
	for (; i + 3 < n; i += 4) {
		let r0 = a + ((<usize>(i * n + start)) << 3);
		let r1 = r0 + stride;
		let r2 = r1 + stride;
		let r3 = r2 + stride;
		for (let k = 0; k < width; k++) {
			store<f64>(to, load<f64>(r0), 0);
			store<f64>(to, load<f64>(r1), 8);
			store<f64>(to, load<f64>(r2), 16);
			store<f64>(to, load<f64>(r3), 24);
			r0 += 8;
			r1 += 8;
			r2 += 8;
			r3 += 8;
			to += 32;
		}
	}
	if (i == n) return;
	clear(to, width << 2);
	for (let r = 0; i + r < n; r++) {
		const row = a + ((<usize>((i + r) * n + start)) << 3);
		for (let k = 0; k < width; k++)
			store<f64>(to + ((<usize>(4 * k + r)) << 3), load<f64>(row + ((<usize>k) << 3)));
	}
}

function unpackColumns(a: usize, n: i32, start: i32, end: i32, pack: usize): void {
	const width = end - start;
	const stride = (<usize>n) << 3;
	let from = pack;
	let i = end;
	for (; i + 3 < n; i += 4) {
		let r0 = a + ((<usize>(i * n + start)) << 3);
		let r1 = r0 + stride;
		let r2 = r1 + stride;
		let r3 = r2 + stride;
		for (let k = 0; k < width; k++) {
			store<f64>(r0, load<f64>(from, 0));
			store<f64>(r1, load<f64>(from, 8));
			store<f64>(r2, load<f64>(from, 16));
			store<f64>(r3, load<f64>(from, 24));
			r0 += 8;
			r1 += 8;
			r2 += 8;
			r3 += 8;
			from += 32;
		}
	}
	for (let r = 0; i + r < n; r++) {
		const row = a + ((<usize>((i + r) * n + start)) << 3);
		for (let k = 0; k < width; k++)
			store<f64>(row + ((<usize>k) << 3), load<f64>(from + ((<usize>(4 * k + r)) << 3)));
	}
}

/** L21 = A21 L11^-T on the packed rows by substitution, eight rows at a time. */
function solveRows(n: i32, start: i32, end: i32, pack: usize): void {
	const width = end - start;
	const groups = (n - end + 3) >> 2;
	const groupBytes = (<usize>width) << 5;
	for (let group = 0; group < groups; group += 2) {
		const top = pack + <usize>group * groupBytes;
		// An odd last group is done twice, which costs less than a loop of its own.
		const bottom = group + 1 < groups ? top + groupBytes : top;
		for (let j = 0; j < width; j++) {
			const at = (<usize>j) << 5;
			let c0 = v128.load(top + at, 0);
			let c1 = v128.load(top + at, 16);
			let c2 = v128.load(bottom + at, 0);
			let c3 = v128.load(bottom + at, 16);
			let factor = TRANSPOSED + ((<usize>j) << 3);
			let p = top;
			let q = bottom;
			for (let k = 0; k < j; k++) {
				const l = v128.load64_splat(factor);
				c0 = f64x2.sub(c0, f64x2.mul(l, v128.load(p, 0)));
				c1 = f64x2.sub(c1, f64x2.mul(l, v128.load(p, 16)));
				c2 = f64x2.sub(c2, f64x2.mul(l, v128.load(q, 0)));
				c3 = f64x2.sub(c3, f64x2.mul(l, v128.load(q, 16)));
				factor += BLOCK * 8;
				p += 32;
				q += 32;
			}
			const pivot = v128.load64_splat(factor);
			v128.store(top + at, f64x2.div(c0, pivot), 0);
			v128.store(top + at, f64x2.div(c1, pivot), 16);
			v128.store(bottom + at, f64x2.div(c2, pivot), 0);
			v128.store(bottom + at, f64x2.div(c3, pivot), 16);
		}
	}
}

/**
 * A -= P P^T on the lower triangle from row and column `first` on, for column groups fromGroup ..
 * toGroup; P is packed from row `first`.
 */
export function updateColumns(
	a: usize,
	n: i32,
	first: i32,
	width: i32,
	fromGroup: i32,
	toGroup: i32,
	pack: usize
): void {
	const groups = (n - first + 3) >> 2;
	const groupBytes = (<usize>width) << 5;
	const whole = (n - first) >> 2;
	for (let i = fromGroup; i < groups; i++) {
		const p = pack + <usize>i * groupBytes;
		const row = first + (i << 2);
		const last = min(i + 1, toGroup);
		for (let j = fromGroup; j < last; j++) {
			const q = pack + <usize>j * groupBytes;
			const column = first + (j << 2);
			const to = a + ((<usize>(row * n + column)) << 3);
			if (i < whole && j < i) subtractTile(to, (<usize>n) << 3, p, q, width);
			else subtractEdge(to, n, p, q, width, min(4, n - row), i == j);
		}
	}
}

function subtractEdge(
	to: usize,
	n: i32,
	p: usize,
	q: usize,
	width: i32,
	rows: i32,
	diagonal: bool
): void {
	clear(SCRATCH, 16);
	subtractTile(SCRATCH, 32, p, q, width);
	for (let r = 0; r < rows; r++) {
		const columns = diagonal ? r + 1 : 4;
		for (let c = 0; c < columns; c++) {
			const at = to + ((<usize>(r * n + c)) << 3);
			store<f64>(at, load<f64>(at) + load<f64>(SCRATCH + ((<usize>(4 * r + c)) << 3)));
		}
	}
}

/** Four rows by four columns: sixteen sums live in registers. */
function subtractTile(to: usize, stride: usize, p: usize, q: usize, width: i32): void {
	let a0 = f64x2.splat(0);
	let a1 = a0;
	let b0 = a0;
	let b1 = a0;
	let c0 = a0;
	let c1 = a0;
	let d0 = a0;
	let d1 = a0;
	const end = p + ((<usize>width) << 5);
	for (; p < end; p += 32) {
		const q0 = v128.load(q, 0);
		const q1 = v128.load(q, 16);
		let x = v128.load64_splat(p, 0);
		a0 = f64x2.add(a0, f64x2.mul(x, q0));
		a1 = f64x2.add(a1, f64x2.mul(x, q1));
		x = v128.load64_splat(p, 8);
		b0 = f64x2.add(b0, f64x2.mul(x, q0));
		b1 = f64x2.add(b1, f64x2.mul(x, q1));
		x = v128.load64_splat(p, 16);
		c0 = f64x2.add(c0, f64x2.mul(x, q0));
		c1 = f64x2.add(c1, f64x2.mul(x, q1));
		x = v128.load64_splat(p, 24);
		d0 = f64x2.add(d0, f64x2.mul(x, q0));
		d1 = f64x2.add(d1, f64x2.mul(x, q1));
		q += 32;
	}
	v128.store(to, f64x2.sub(v128.load(to, 0), a0), 0);
	v128.store(to, f64x2.sub(v128.load(to, 16), a1), 16);
	to += stride;
	v128.store(to, f64x2.sub(v128.load(to, 0), b0), 0);
	v128.store(to, f64x2.sub(v128.load(to, 16), b1), 16);
	to += stride;
	v128.store(to, f64x2.sub(v128.load(to, 0), c0), 0);
	v128.store(to, f64x2.sub(v128.load(to, 16), c1), 16);
	to += stride;
	v128.store(to, f64x2.sub(v128.load(to, 0), d0), 0);
	v128.store(to, f64x2.sub(v128.load(to, 16), d1), 16);
}

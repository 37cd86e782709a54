/** What follows from a Cholesky factor: solutions, the factor's inverse, the matrix's inverse. */

import { clear } from './layout';

/** to[0 .. length) += factor * from. */
export function addRow(to: usize, from: usize, factor: f64, length: i32): void {
	const f = f64x2.splat(factor);
	const vectors = to + ((<usize>(length & ~3)) << 3);
	while (to < vectors) {
		v128.store(to, f64x2.add(v128.load(to, 0), f64x2.mul(f, v128.load(from, 0))), 0);
		v128.store(to, f64x2.add(v128.load(to, 16), f64x2.mul(f, v128.load(from, 16))), 16);
		to += 32;
		from += 32;
	}
	for (let left = length & 3; left > 0; left--) {
		store<f64>(to, load<f64>(to) + factor * load<f64>(from));
		to += 8;
		from += 8;
	}
}

/** to += f0 r0 + f1 r1 + f2 r2 + f3 r3, rows `stride` bytes apart. */
function addFourRows(
	to: usize,
	from: usize,
	stride: usize,
	f0: f64,
	f1: f64,
	f2: f64,
	f3: f64,
	length: i32
): void {
	let r1 = from + stride;
	let r2 = r1 + stride;
	let r3 = r2 + stride;
	const v0 = f64x2.splat(f0);
	const v1 = f64x2.splat(f1);
	const v2 = f64x2.splat(f2);
	const v3 = f64x2.splat(f3);
	const vectors = to + ((<usize>(length & ~1)) << 3);
	while (to < vectors) {
		const front = f64x2.add(f64x2.mul(v0, v128.load(from)), f64x2.mul(v1, v128.load(r1)));
		const back = f64x2.add(f64x2.mul(v2, v128.load(r2)), f64x2.mul(v3, v128.load(r3)));
		v128.store(to, f64x2.add(v128.load(to), f64x2.add(front, back)));
		to += 16;
		from += 16;
		r1 += 16;
		r2 += 16;
		r3 += 16;
	}
	if (length & 1)
		store<f64>(
			to,
			load<f64>(to) +
				(f0 * load<f64>(from) + f1 * load<f64>(r1) + (f2 * load<f64>(r2) + f3 * load<f64>(r3)))
		);
}

export function dot(a: usize, b: usize, length: i32): f64 {
	let s0 = f64x2.splat(0);
	let s1 = s0;
	let s2 = s0;
	let s3 = s0;
	const vectors = a + ((<usize>(length & ~7)) << 3);
	while (a < vectors) {
		s0 = f64x2.add(s0, f64x2.mul(v128.load(a, 0), v128.load(b, 0)));
		s1 = f64x2.add(s1, f64x2.mul(v128.load(a, 16), v128.load(b, 16)));
		s2 = f64x2.add(s2, f64x2.mul(v128.load(a, 32), v128.load(b, 32)));
		s3 = f64x2.add(s3, f64x2.mul(v128.load(a, 48), v128.load(b, 48)));
		a += 64;
		b += 64;
	}
	s0 = f64x2.add(f64x2.add(s0, s1), f64x2.add(s2, s3));
	let sum = f64x2.extract_lane(s0, 0) + f64x2.extract_lane(s0, 1);
	for (let left = length & 7; left > 0; left--) {
		sum += load<f64>(a) * load<f64>(b);
		a += 8;
		b += 8;
	}
	return sum;
}

/** a += factor * b. */
export function addScaled(a: usize, factor: f64, b: usize, length: i32): void {
	addRow(a, b, factor, length);
}

/** Solves L L^T x = b in place. */
export function solveFactored(l: usize, n: i32, b: usize): void {
	for (let i = 0; i < n; i++) {
		const row = l + ((<usize>(i * n)) << 3);
		const at = (<usize>i) << 3;
		store<f64>(b + at, (load<f64>(b + at) - dot(row, b, i)) / load<f64>(row + at));
	}
	for (let i = n - 1; i >= 0; i--) {
		const row = l + ((<usize>(i * n)) << 3);
		const at = (<usize>i) << 3;
		const x = load<f64>(b + at) / load<f64>(row + at);
		store<f64>(b + at, x);
		addRow(b, row, -x, i);
	}
}

/** L^-1, its strict upper triangle zero. */
export function invertFactor(l: usize, n: i32, inverse: usize): void {
	const stride = (<usize>n) << 3;
	clear(inverse, n * n);
	for (let i = 0; i < n; i++) {
		const row = l + <usize>i * stride;
		const to = inverse + <usize>i * stride;
		const pivot = -1 / load<f64>(row + ((<usize>i) << 3));
		let k = 0;
		for (; k + 3 < i; k += 4) {
			const at = row + ((<usize>k) << 3);
			addFourRows(
				to,
				inverse + <usize>k * stride,
				stride,
				load<f64>(at, 0),
				load<f64>(at, 8),
				load<f64>(at, 16),
				load<f64>(at, 24),
				k + 4
			);
		}
		for (; k < i; k++)
			addRow(to, inverse + <usize>k * stride, load<f64>(row + ((<usize>k) << 3)), k + 1);
		for (let j = 0; j < i; j++) {
			const at = to + ((<usize>j) << 3);
			store<f64>(at, load<f64>(at) * pivot);
		}
		store<f64>(to + ((<usize>i) << 3), -pivot);
	}
}

/** L^-T L^-1, both triangles. */
export function inverseFromFactor(inverse: usize, n: i32, result: usize): void {
	const stride = (<usize>n) << 3;
	clear(result, n * n);
	let k = 0;
	for (; k + 3 < n; k += 4) {
		const row = inverse + <usize>k * stride;
		for (let i = 0; i < k + 4; i++) {
			const at = row + ((<usize>i) << 3);
			addFourRows(
				result + <usize>i * stride,
				row,
				stride,
				load<f64>(at),
				load<f64>(at + stride),
				load<f64>(at + 2 * stride),
				load<f64>(at + 3 * stride),
				i + 1
			);
		}
	}
	for (; k < n; k++) {
		const row = inverse + <usize>k * stride;
		for (let i = 0; i <= k; i++)
			addRow(result + <usize>i * stride, row, load<f64>(row + ((<usize>i) << 3)), i + 1);
	}
	for (let i = 0; i < n; i++)
		for (let j = 0; j < i; j++)
			store<f64>(
				result + ((<usize>(j * n + i)) << 3),
				load<f64>(result + ((<usize>(i * n + j)) << 3))
			);
}

/**
 * rest -= M x, with the strict upper triangle of M in `matrix` and its diagonal apart.
 * Two rows of the triangle at a time would save little: memory is what it waits for.
 */
export function subtractProduct(
	matrix: usize,
	diagonal: usize,
	x: usize,
	rest: usize,
	n: i32
): void {
	for (let i = 0; i < n; i++) {
		const at = (<usize>i) << 3;
		const row = matrix + ((<usize>(i * n + i + 1)) << 3);
		const value = load<f64>(x + at);
		const length = n - i - 1;
		const sum = load<f64>(diagonal + at) * value + dot(row, x + at + 8, length);
		addRow(rest + at + 8, row, -value, length);
		store<f64>(rest + at, load<f64>(rest + at) - sum);
	}
}

/** out = L^-1 D L^-T v, given L^-1 and symmetric D; `first` and `second` are scratch. */
export function conjugate(
	inverse: usize,
	direction: usize,
	v: usize,
	first: usize,
	second: usize,
	out: usize,
	n: i32
): void {
	const stride = (<usize>n) << 3;
	clear(first, n);
	for (let i = 0; i < n; i++)
		addRow(first, inverse + <usize>i * stride, load<f64>(v + ((<usize>i) << 3)), i + 1);
	for (let i = 0; i < n; i++)
		store<f64>(second + ((<usize>i) << 3), dot(direction + <usize>i * stride, first, n));
	for (let i = 0; i < n; i++)
		store<f64>(out + ((<usize>i) << 3), dot(inverse + <usize>i * stride, second, i + 1));
}

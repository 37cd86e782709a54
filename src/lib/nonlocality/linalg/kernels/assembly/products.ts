/** Dense products of row-major n x n matrices. */

/** c = a b. */
export function multiply(a: usize, b: usize, c: usize, n: i32): void {
	const stride = (<usize>n) << 3;
	let i = 0;
	for (; i + 3 < n; i += 4) {
		const row = a + <usize>i * stride;
		const to = c + <usize>i * stride;
		let j = 0;
		for (; j + 3 < n; j += 4)
			productTile(row, b + ((<usize>j) << 3), to + ((<usize>j) << 3), stride, n);
		for (; j < n; j++)
			for (let r: usize = 0; r < 4; r++)
				store<f64>(
					to + r * stride + ((<usize>j) << 3),
					columnDot(row + r * stride, b + ((<usize>j) << 3), stride, n)
				);
	}
	for (; i < n; i++) {
		const row = a + <usize>i * stride;
		const to = c + <usize>i * stride;
		for (let j = 0; j < n; j++)
			store<f64>(to + ((<usize>j) << 3), columnDot(row, b + ((<usize>j) << 3), stride, n));
	}
}

function columnDot(row: usize, column: usize, stride: usize, n: i32): f64 {
	let sum: f64 = 0;
	for (let k = 0; k < n; k++) {
		sum += load<f64>(row) * load<f64>(column);
		row += 8;
		column += stride;
	}
	return sum;
}

function productTile(a: usize, b: usize, to: usize, stride: usize, n: i32): void {
	let a0 = f64x2.splat(0);
	let a1 = a0;
	let b0 = a0;
	let b1 = a0;
	let c0 = a0;
	let c1 = a0;
	let d0 = a0;
	let d1 = a0;
	let r1 = a + stride;
	let r2 = r1 + stride;
	let r3 = r2 + stride;
	const end = a + ((<usize>n) << 3);
	for (; a < end; a += 8) {
		const q0 = v128.load(b, 0);
		const q1 = v128.load(b, 16);
		let x = v128.load64_splat(a);
		a0 = f64x2.add(a0, f64x2.mul(x, q0));
		a1 = f64x2.add(a1, f64x2.mul(x, q1));
		x = v128.load64_splat(r1);
		b0 = f64x2.add(b0, f64x2.mul(x, q0));
		b1 = f64x2.add(b1, f64x2.mul(x, q1));
		x = v128.load64_splat(r2);
		c0 = f64x2.add(c0, f64x2.mul(x, q0));
		c1 = f64x2.add(c1, f64x2.mul(x, q1));
		x = v128.load64_splat(r3);
		d0 = f64x2.add(d0, f64x2.mul(x, q0));
		d1 = f64x2.add(d1, f64x2.mul(x, q1));
		r1 += 8;
		r2 += 8;
		r3 += 8;
		b += stride;
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

/** a = (a + a^T) / 2. */
export function symmetrise(a: usize, n: i32): void {
	for (let i = 0; i < n; i++) {
		let row = a + ((<usize>(i * n)) << 3);
		let column = a + ((<usize>i) << 3);
		for (let j = 0; j < i; j++) {
			const mean = 0.5 * (load<f64>(row) + load<f64>(column));
			store<f64>(row, mean);
			store<f64>(column, mean);
			row += 8;
			column += (<usize>n) << 3;
		}
	}
}

/** Copies the strict lower triangle to the upper one (or back), tile by tile, and the diagonal. */
export function mirror(a: usize, n: i32, upwards: bool): void {
	const tile = 32; // both triangles of a tile stay in the cache
	for (let i0 = 0; i0 < n; i0 += tile) {
		const i1 = min(i0 + tile, n);
		for (let j0 = 0; j0 <= i0; j0 += tile) {
			for (let i = i0; i < i1; i++) {
				const j1 = min(j0 + tile, i);
				for (let j = j0; j < j1; j++) {
					const below = a + ((<usize>(i * n + j)) << 3);
					const above = a + ((<usize>(j * n + i)) << 3);
					if (upwards) store<f64>(above, load<f64>(below));
					else store<f64>(below, load<f64>(above));
				}
			}
		}
	}
}

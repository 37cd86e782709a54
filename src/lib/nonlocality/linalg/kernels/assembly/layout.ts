/** The first bytes of the memory, which no array is given; and how to clear and copy. */

/** Columns eliminated at a time. */
export const BLOCK: i32 = 32;
/** 4 x 4 doubles. */
export const SCRATCH: usize = 1024;
/** BLOCK x BLOCK doubles: the transposed factor of the diagonal block at hand. */
export const TRANSPOSED: usize = 2048;
// TRANSPOSED + 8 * BLOCK^2 = 10240 is where the arrays begin: FIRST_BYTE in ../wasm-kernels.ts.

/** Zeroes `doubles` doubles; a loop, since the built-in fill is a slow call for short lengths. */
export function clear(to: usize, doubles: i32): void {
	const zero = f64x2.splat(0);
	const vectors = to + ((<usize>(doubles & ~1)) << 3);
	while (to < vectors) {
		v128.store(to, zero);
		to += 16;
	}
	if (doubles & 1) store<f64>(to, 0);
}

export function copy(to: usize, from: usize, doubles: i32): void {
	const vectors = to + ((<usize>(doubles & ~1)) << 3);
	while (to < vectors) {
		v128.store(to, v128.load(from));
		to += 16;
		from += 16;
	}
	if (doubles & 1) store<f64>(to, load<f64>(from));
}

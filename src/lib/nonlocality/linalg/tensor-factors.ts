import { complexZeros, fillZero, type ComplexArray } from './complex-dense';

/**
 * One factor of a tensor product: a vector on it is an array of shape left x size x right
 * (row-major), where left and right are the products of the sizes before and after.
 */
export interface TensorFactor {
	readonly left: number;
	readonly size: number;
	readonly right: number;
}

/** The factors of the tensor product of spaces of the given sizes, the first most significant. */
export function tensorFactors(sizes: readonly number[]): TensorFactor[] {
	return sizes.map((size, at) => ({
		left: sizes.slice(0, at).reduce((product, d) => product * d, 1),
		size,
		right: sizes.slice(at + 1).reduce((product, d) => product * d, 1)
	}));
}

/** out = (1 (x) matrix (x) 1) vector; `matrix` is size x size, and all three are real or complex. */
export function applyToFactor(
	matrix: ComplexArray,
	factor: TensorFactor,
	vector: ComplexArray,
	out: ComplexArray
): void {
	fillZero(out);
	multiplyAdd(matrix.re, factor, vector.re, out.re, 1);
	if (!matrix.im || !vector.im || !out.im) return;
	multiplyAdd(matrix.im, factor, vector.im, out.re, -1);
	multiplyAdd(matrix.re, factor, vector.im, out.im, 1);
	multiplyAdd(matrix.im, factor, vector.re, out.im, 1);
}

function multiplyAdd(
	matrix: Float64Array,
	{ left, size, right }: TensorFactor,
	vector: Float64Array,
	out: Float64Array,
	sign: number
) {
	for (let l = 0; l < left; l++) {
		const block = l * size * right;
		for (let i = 0; i < size; i++) {
			if (right === 1) {
				let sum = 0;
				for (let j = 0; j < size; j++)
					sum += (matrix[i * size + j] ?? 0) * (vector[block + j] ?? 0);
				out[block + i] = (out[block + i] ?? 0) + sign * sum;
				continue;
			}
			const target = block + i * right;
			for (let j = 0; j < size; j++) {
				const entry = sign * (matrix[i * size + j] ?? 0);
				if (entry === 0) continue;
				const source = block + j * right;
				for (let r = 0; r < right; r++)
					out[target + r] = (out[target + r] ?? 0) + entry * (vector[source + r] ?? 0);
			}
		}
	}
}

/**
 * The operator R on one factor with tr(E R) = <b| 1 (x) E (x) 1 |a>, that is the partial trace of
 * |a><b| over the other factors: a size x size matrix, row-major.
 */
export function partialOuter(a: ComplexArray, b: ComplexArray, factor: TensorFactor): ComplexArray {
	const out = complexZeros(factor.size * factor.size, a.im === null);
	outerAdd(a.re, b.re, factor, out.re, 1);
	if (!a.im || !b.im || !out.im) return out;
	outerAdd(a.im, b.im, factor, out.re, 1);
	outerAdd(a.im, b.re, factor, out.im, 1);
	outerAdd(a.re, b.im, factor, out.im, -1);
	return out;
}

function outerAdd(
	a: Float64Array,
	b: Float64Array,
	{ left, size, right }: TensorFactor,
	out: Float64Array,
	sign: number
) {
	for (let l = 0; l < left; l++) {
		const block = l * size * right;
		for (let i = 0; i < size; i++) {
			for (let j = 0; j < size; j++) {
				let sum = 0;
				for (let r = 0; r < right; r++)
					sum += (a[block + i * right + r] ?? 0) * (b[block + j * right + r] ?? 0);
				out[i * size + j] = (out[i * size + j] ?? 0) + sign * sum;
			}
		}
	}
}

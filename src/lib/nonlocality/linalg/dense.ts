/** Dense kernels for row-major `n x n` matrices held in Float64Arrays. */

/** c = a b. */
export function multiply(a: Float64Array, b: Float64Array, c: Float64Array, n: number): void {
	c.fill(0, 0, n * n);
	for (let i = 0; i < n; i++) {
		const row = i * n;
		let k = 0;
		for (; k + 3 < n; k += 4) {
			const a0 = a[row + k] ?? 0;
			const a1 = a[row + k + 1] ?? 0;
			const a2 = a[row + k + 2] ?? 0;
			const a3 = a[row + k + 3] ?? 0;
			const b0 = k * n;
			const b1 = b0 + n;
			const b2 = b1 + n;
			const b3 = b2 + n;
			for (let j = 0; j < n; j++)
				c[row + j] =
					(c[row + j] ?? 0) +
					a0 * (b[b0 + j] ?? 0) +
					a1 * (b[b1 + j] ?? 0) +
					a2 * (b[b2 + j] ?? 0) +
					a3 * (b[b3 + j] ?? 0);
		}
		for (; k < n; k++) {
			const a0 = a[row + k] ?? 0;
			const b0 = k * n;
			for (let j = 0; j < n; j++) c[row + j] = (c[row + j] ?? 0) + a0 * (b[b0 + j] ?? 0);
		}
	}
}

/** Replaces a by (a + a^T) / 2. */
export function symmetrise(a: Float64Array, n: number): void {
	for (let i = 0; i < n; i++) {
		for (let j = 0; j < i; j++) {
			const mean = 0.5 * ((a[i * n + j] ?? 0) + (a[j * n + i] ?? 0));
			a[i * n + j] = mean;
			a[j * n + i] = mean;
		}
	}
}

export function dot(a: Float64Array, b: Float64Array, length = a.length): number {
	let sum = 0;
	for (let i = 0; i < length; i++) sum += (a[i] ?? 0) * (b[i] ?? 0);
	return sum;
}

/** a += factor * b. */
export function addScaled(a: Float64Array, factor: number, b: Float64Array): void {
	for (let i = 0; i < a.length; i++) a[i] = (a[i] ?? 0) + factor * (b[i] ?? 0);
}

export function largestMagnitude(a: Float64Array): number {
	let largest = 0;
	for (const value of a) largest = Math.max(largest, Math.abs(value));
	return largest;
}

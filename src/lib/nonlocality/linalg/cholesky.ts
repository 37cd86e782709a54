/**
 * Cholesky factorisation and what is built on it, for row-major `n x n` matrices. Only the lower
 * triangle is read and written; the strict upper triangle is left alone.
 */

/** Columns eliminated together: a panel of this width stays in the cache. */
const PANEL = 32;

/** Even; at 6000 columns so many rows of an update take some milliseconds. */
const ROWS_PER_POLL = 64;

/**
 * Replaces the lower triangle of `a` by its Cholesky factor L (a = L L^T). Returns false, with `a`
 * half overwritten, as soon as a pivot is not positive. `poll` is called every few milliseconds.
 */
export function factorCholesky(a: Float64Array, n: number, poll?: () => void): boolean {
	const panel = n > 2 * PANEL ? new Float64Array(n * PANEL) : null;
	for (let start = 0; start < n; start += PANEL) {
		const end = Math.min(start + PANEL, n);
		if (!factorDiagonalBlock(a, n, start, end)) return false;
		if (end === n) break;
		solvePanel(a, n, start, end);
		if (panel) updateTrailing(a, n, start, end, panel, poll);
		else updateTrailingPlain(a, n, start, end);
	}
	return true;
}

function factorDiagonalBlock(a: Float64Array, n: number, start: number, end: number): boolean {
	for (let i = start; i < end; i++) {
		const rowI = i * n;
		for (let j = start; j < i; j++) {
			const rowJ = j * n;
			let sum = a[rowI + j] ?? 0;
			for (let k = start; k < j; k++) sum -= (a[rowI + k] ?? 0) * (a[rowJ + k] ?? 0);
			a[rowI + j] = sum / (a[rowJ + j] ?? 0);
		}
		let pivot = a[rowI + i] ?? 0;
		for (let k = start; k < i; k++) pivot -= (a[rowI + k] ?? 0) * (a[rowI + k] ?? 0);
		if (!(pivot > 0) || pivot === Infinity) return false;
		a[rowI + i] = Math.sqrt(pivot);
	}
	return true;
}

/** Rows below the diagonal block: L21 = A21 L11^-T. */
function solvePanel(a: Float64Array, n: number, start: number, end: number): void {
	for (let i = end; i < n; i++) {
		const rowI = i * n;
		for (let j = start; j < end; j++) {
			const rowJ = j * n;
			let even = 0;
			let odd = 0;
			let k = start;
			for (; k + 1 < j; k += 2) {
				even += (a[rowI + k] ?? 0) * (a[rowJ + k] ?? 0);
				odd += (a[rowI + k + 1] ?? 0) * (a[rowJ + k + 1] ?? 0);
			}
			if (k < j) even += (a[rowI + k] ?? 0) * (a[rowJ + k] ?? 0);
			a[rowI + j] = ((a[rowI + j] ?? 0) - even - odd) / (a[rowJ + j] ?? 0);
		}
	}
}

/** A22 -= L21 L21^T (lower triangle), with L21 copied so that its rows are contiguous. */
function updateTrailing(
	a: Float64Array,
	n: number,
	start: number,
	end: number,
	panel: Float64Array,
	poll?: () => void
): void {
	const width = end - start;
	for (let i = end; i < n; i++) {
		const from = i * n + start;
		const to = (i - end) * width;
		for (let k = 0; k < width; k++) panel[to + k] = a[from + k] ?? 0;
	}
	let i = end;
	for (; i + 1 < n; i += 2) {
		if ((i - end) % ROWS_PER_POLL === 0) poll?.();
		const p0 = (i - end) * width;
		let j = end;
		for (; j + 3 <= i; j += 4) updateTile(a, n, panel, width, i, j, p0, (j - end) * width);
		for (; j <= i + 1; j++) {
			const q = (j - end) * width;
			if (j <= i) subtractDot(a, i * n + j, panel, p0, q, width);
			subtractDot(a, (i + 1) * n + j, panel, p0 + width, q, width);
		}
	}
	if (i < n) {
		const p = (i - end) * width;
		for (let j = end; j <= i; j++) subtractDot(a, i * n + j, panel, p, (j - end) * width, width);
	}
}

/** Rows i, i+1 by columns j .. j+3: eight sums live in registers. */
function updateTile(
	a: Float64Array,
	n: number,
	panel: Float64Array,
	width: number,
	i: number,
	j: number,
	p0: number,
	q0: number
): void {
	const p1 = p0 + width;
	const q1 = q0 + width;
	const q2 = q1 + width;
	const q3 = q2 + width;
	let s00 = 0;
	let s01 = 0;
	let s02 = 0;
	let s03 = 0;
	let s10 = 0;
	let s11 = 0;
	let s12 = 0;
	let s13 = 0;
	for (let k = 0; k < width; k++) {
		const x0 = panel[p0 + k] ?? 0;
		const x1 = panel[p1 + k] ?? 0;
		const y0 = panel[q0 + k] ?? 0;
		const y1 = panel[q1 + k] ?? 0;
		const y2 = panel[q2 + k] ?? 0;
		const y3 = panel[q3 + k] ?? 0;
		s00 += x0 * y0;
		s01 += x0 * y1;
		s02 += x0 * y2;
		s03 += x0 * y3;
		s10 += x1 * y0;
		s11 += x1 * y1;
		s12 += x1 * y2;
		s13 += x1 * y3;
	}
	const top = i * n + j;
	const bottom = top + n;
	a[top] = (a[top] ?? 0) - s00;
	a[top + 1] = (a[top + 1] ?? 0) - s01;
	a[top + 2] = (a[top + 2] ?? 0) - s02;
	a[top + 3] = (a[top + 3] ?? 0) - s03;
	a[bottom] = (a[bottom] ?? 0) - s10;
	a[bottom + 1] = (a[bottom + 1] ?? 0) - s11;
	a[bottom + 2] = (a[bottom + 2] ?? 0) - s12;
	a[bottom + 3] = (a[bottom + 3] ?? 0) - s13;
}

function subtractDot(
	a: Float64Array,
	at: number,
	panel: Float64Array,
	p: number,
	q: number,
	width: number
): void {
	let sum = 0;
	for (let k = 0; k < width; k++) sum += (panel[p + k] ?? 0) * (panel[q + k] ?? 0);
	a[at] = (a[at] ?? 0) - sum;
}

function updateTrailingPlain(a: Float64Array, n: number, start: number, end: number): void {
	for (let i = end; i < n; i++) {
		for (let j = end; j <= i; j++) {
			let sum = 0;
			for (let k = start; k < end; k++) sum += (a[i * n + k] ?? 0) * (a[j * n + k] ?? 0);
			a[i * n + j] = (a[i * n + j] ?? 0) - sum;
		}
	}
}

/** Solves L L^T x = b in place, given the factor in the lower triangle of `l`. */
export function solveFactored(l: Float64Array, n: number, b: Float64Array): void {
	for (let i = 0; i < n; i++) {
		const row = i * n;
		let sum = b[i] ?? 0;
		for (let k = 0; k < i; k++) sum -= (l[row + k] ?? 0) * (b[k] ?? 0);
		b[i] = sum / (l[row + i] ?? 0);
	}
	for (let i = n - 1; i >= 0; i--) {
		const row = i * n;
		const x = (b[i] ?? 0) / (l[row + i] ?? 0);
		b[i] = x;
		for (let k = 0; k < i; k++) b[k] = (b[k] ?? 0) - x * (l[row + k] ?? 0);
	}
}

/** Writes L^-1 (lower triangle; the strict upper one zero) into `inverse`. */
export function invertFactor(l: Float64Array, n: number, inverse: Float64Array): void {
	inverse.fill(0, 0, n * n);
	for (let i = 0; i < n; i++) {
		const row = i * n;
		const pivot = 1 / (l[row + i] ?? 0);
		for (let k = 0; k < i; k++) {
			const factor = -(l[row + k] ?? 0) * pivot;
			if (factor === 0) continue;
			const from = k * n;
			for (let j = 0; j <= k; j++)
				inverse[row + j] = (inverse[row + j] ?? 0) + factor * (inverse[from + j] ?? 0);
		}
		inverse[row + i] = pivot;
	}
}

/** Writes A^-1 = L^-T L^-1 (both triangles) into `result`, from `inverse` = L^-1. */
export function inverseFromFactor(inverse: Float64Array, n: number, result: Float64Array): void {
	result.fill(0, 0, n * n);
	for (let k = 0; k < n; k++) {
		const row = k * n;
		for (let i = 0; i <= k; i++) {
			const factor = inverse[row + i] ?? 0;
			if (factor === 0) continue;
			const to = i * n;
			for (let j = 0; j <= i; j++)
				result[to + j] = (result[to + j] ?? 0) + factor * (inverse[row + j] ?? 0);
		}
	}
	for (let i = 0; i < n; i++)
		for (let j = 0; j < i; j++) result[j * n + i] = result[i * n + j] ?? 0;
}

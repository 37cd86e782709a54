import { complexZeros, type ComplexArray } from './complex-dense';

/** Eigenvalues in no particular order; row k of `vectors` is the unit eigenvector of `values[k]`. */
export interface HermitianEigen {
	readonly values: Float64Array;
	/** n x n, row-major, real (im null) when the matrix was. */
	readonly vectors: ComplexArray;
}

/** QL takes two or three steps an eigenvalue; far past that the matrix holds NaN. */
const MAX_STEPS = 60;

/**
 * All eigenvalues and eigenvectors of an n x n Hermitian (or real symmetric) matrix: Householder
 * reduction to a real tridiagonal matrix, then implicit QL.
 * Method: Golub and Van Loan, Matrix Computations (4th ed.), sections 8.3.1 and 8.3.3.
 *
 * @param matrix row-major, overwritten; only the lower triangle is read
 * @throws RangeError when it does not converge (only for entries that are not finite)
 */
export function hermitianEigen(matrix: ComplexArray, n: number): HermitianEigen {
	const diagonal = new Float64Array(n);
	const off = new Float64Array(n);
	const vectors = complexZeros(n * n, matrix.im === null);
	if (n === 0) return { values: diagonal, vectors };
	reduce(matrix, n, diagonal, off);
	accumulate(matrix, n, vectors);
	implicitQl(diagonal, off, n, vectors);
	return { values: diagonal, vectors };
}

/**
 * A = Q T Q^H with Q = H_0 H_1 ..., H_k = 1 - tau_k v_k v_k^H. v_k is left in column k below the
 * diagonal (its first entry, 1, is replaced by tau_k).
 */
function reduce({ re, im }: ComplexArray, n: number, diagonal: Float64Array, off: Float64Array) {
	const xRe = new Float64Array(n);
	const xIm = new Float64Array(n);
	for (let k = 0; k < n - 1; k++) {
		const head = (k + 1) * n + k;
		const alphaRe = re[head] ?? 0;
		const alphaIm = im ? (im[head] ?? 0) : 0;
		let tail = 0;
		for (let i = k + 2; i < n; i++) {
			tail += (re[i * n + k] ?? 0) ** 2;
			if (im) tail += (im[i * n + k] ?? 0) ** 2;
		}
		diagonal[k] = re[k * n + k] ?? 0;
		if (tail === 0 && alphaIm === 0) {
			off[k] = alphaRe;
			re[head] = 0;
			continue;
		}
		const norm = Math.sqrt(alphaRe * alphaRe + alphaIm * alphaIm + tail);
		const beta = alphaRe > 0 ? -norm : norm;
		off[k] = beta;
		const tauRe = (beta - alphaRe) / beta;
		const tauIm = -alphaIm / beta;
		// v = x / (alpha - beta), v_0 = 1
		const shift = alphaRe - beta;
		const square = shift * shift + alphaIm * alphaIm;
		const sRe = shift / square;
		const sIm = -alphaIm / square;
		re[head] = 1;
		if (im) im[head] = 0;
		for (let i = k + 2; i < n; i++) {
			const at = i * n + k;
			const a = re[at] ?? 0;
			const b = im ? (im[at] ?? 0) : 0;
			re[at] = a * sRe - b * sIm;
			if (im) im[at] = a * sIm + b * sRe;
		}
		rankTwoUpdate({ re, im }, n, k, tauRe, tauIm, xRe, xIm);
		re[head] = tauRe;
		if (im) im[head] = tauIm;
	}
	diagonal[n - 1] = re[n * n - 1] ?? 0;
}

/** Trailing block <- H^H A H = A - v w^H - w v^H, w = x - (tau <x, v> / 2) v, x = tau A v. */
function rankTwoUpdate(
	{ re, im }: ComplexArray,
	n: number,
	k: number,
	tauRe: number,
	tauIm: number,
	xRe: Float64Array,
	xIm: Float64Array
) {
	const first = k + 1;
	xRe.fill(0, first);
	xIm.fill(0, first);
	for (let i = first; i < n; i++) {
		const vRe = re[i * n + k] ?? 0;
		const vIm = im ? (im[i * n + k] ?? 0) : 0;
		let sumRe = (re[i * n + i] ?? 0) * vRe;
		let sumIm = (re[i * n + i] ?? 0) * vIm;
		for (let j = first; j < i; j++) {
			const a = re[i * n + j] ?? 0;
			const uRe = re[j * n + k] ?? 0;
			sumRe += a * uRe;
			xRe[j] = (xRe[j] ?? 0) + a * vRe;
			if (!im) continue;
			const b = im[i * n + j] ?? 0;
			const uIm = im[j * n + k] ?? 0;
			sumRe -= b * uIm;
			sumIm += a * uIm + b * uRe;
			xRe[j] = (xRe[j] ?? 0) + b * vIm;
			xIm[j] = (xIm[j] ?? 0) + a * vIm - b * vRe;
		}
		xRe[i] = (xRe[i] ?? 0) + sumRe;
		xIm[i] = (xIm[i] ?? 0) + sumIm;
	}
	let dotRe = 0; // <x, v>
	let dotIm = 0;
	for (let i = first; i < n; i++) {
		const a = xRe[i] ?? 0;
		const b = xIm[i] ?? 0;
		const pRe = a * tauRe - b * tauIm;
		const pIm = a * tauIm + b * tauRe;
		xRe[i] = pRe;
		xIm[i] = pIm;
		const vRe = re[i * n + k] ?? 0;
		const vIm = im ? (im[i * n + k] ?? 0) : 0;
		dotRe += pRe * vRe + pIm * vIm;
		dotIm += pRe * vIm - pIm * vRe;
	}
	const halfRe = -(tauRe * dotRe - tauIm * dotIm) / 2;
	const halfIm = -(tauRe * dotIm + tauIm * dotRe) / 2;
	for (let i = first; i < n; i++) {
		const vRe = re[i * n + k] ?? 0;
		const vIm = im ? (im[i * n + k] ?? 0) : 0;
		xRe[i] = (xRe[i] ?? 0) + halfRe * vRe - halfIm * vIm;
		xIm[i] = (xIm[i] ?? 0) + halfRe * vIm + halfIm * vRe;
	}
	for (let i = first; i < n; i++) {
		const vRe = re[i * n + k] ?? 0;
		const vIm = im ? (im[i * n + k] ?? 0) : 0;
		const wRe = xRe[i] ?? 0;
		const wIm = xIm[i] ?? 0;
		for (let j = first; j <= i; j++) {
			const at = i * n + j;
			const uRe = re[j * n + k] ?? 0;
			const yRe = xRe[j] ?? 0;
			let change = vRe * yRe + wRe * uRe;
			if (im) {
				const uIm = im[j * n + k] ?? 0;
				const yIm = xIm[j] ?? 0;
				change += vIm * yIm + wIm * uIm;
				im[at] = (im[at] ?? 0) - (vIm * yRe - vRe * yIm) - (wIm * uRe - wRe * uIm);
			}
			re[at] = (re[at] ?? 0) - change;
		}
	}
}

/** Row j of `vectors` becomes column j of Q: vectors = Q^T, built from the last reflection on. */
function accumulate(matrix: ComplexArray, n: number, vectors: ComplexArray) {
	for (let i = 0; i < n; i++) vectors.re[i * n + i] = 1;
	for (let k = n - 2; k >= 0; k--) {
		const head = (k + 1) * n + k;
		const tauRe = matrix.re[head] ?? 0;
		const tauIm = matrix.im ? (matrix.im[head] ?? 0) : 0;
		if (tauRe === 0 && tauIm === 0) continue;
		matrix.re[head] = 1;
		if (matrix.im) matrix.im[head] = 0;
		for (let j = k + 1; j < n; j++) reflect(matrix, n, k, tauRe, tauIm, vectors, j * n);
	}
}

/** Column q of Q (a row of `vectors` at `offset`) <- q - tau v <v, q>. */
function reflect(
	{ re, im }: ComplexArray,
	n: number,
	k: number,
	tauRe: number,
	tauIm: number,
	vectors: ComplexArray,
	offset: number
) {
	const qRe = vectors.re;
	const qIm = vectors.im;
	let sumRe = 0;
	let sumIm = 0;
	for (let i = k + 1; i < n; i++) {
		const vRe = re[i * n + k] ?? 0;
		const a = qRe[offset + i] ?? 0;
		sumRe += vRe * a;
		if (!im || !qIm) continue;
		const vIm = im[i * n + k] ?? 0;
		const b = qIm[offset + i] ?? 0;
		sumRe += vIm * b;
		sumIm += vRe * b - vIm * a;
	}
	const fRe = tauRe * sumRe - tauIm * sumIm;
	const fIm = tauRe * sumIm + tauIm * sumRe;
	for (let i = k + 1; i < n; i++) {
		const vRe = re[i * n + k] ?? 0;
		const vIm = im ? (im[i * n + k] ?? 0) : 0;
		qRe[offset + i] = (qRe[offset + i] ?? 0) - (fRe * vRe - fIm * vIm);
		if (qIm) qIm[offset + i] = (qIm[offset + i] ?? 0) - (fRe * vIm + fIm * vRe);
	}
}

/** Implicit QL with Wilkinson's shift on the tridiagonal (d, e); rotates the rows of `vectors`. */
function implicitQl(d: Float64Array, e: Float64Array, n: number, vectors: ComplexArray) {
	for (let l = 0; l < n; l++) {
		for (let step = 0; ; step++) {
			let m = l;
			for (; m < n - 1; m++) {
				const scale = Math.abs(d[m] ?? 0) + Math.abs(d[m + 1] ?? 0);
				if (Math.abs(e[m] ?? 0) <= Number.EPSILON * 0.5 * scale) break;
			}
			if (m === l) break;
			if (step === MAX_STEPS) throw new RangeError('the eigenvalues of a matrix did not converge');
			let g = ((d[l + 1] ?? 0) - (d[l] ?? 0)) / (2 * (e[l] ?? 0));
			let r = Math.hypot(g, 1);
			g = (d[m] ?? 0) - (d[l] ?? 0) + (e[l] ?? 0) / (g + (g >= 0 ? r : -r));
			let sine = 1;
			let cosine = 1;
			let p = 0;
			let i = m - 1;
			for (; i >= l; i--) {
				const f = sine * (e[i] ?? 0);
				const b = cosine * (e[i] ?? 0);
				r = Math.sqrt(f * f + g * g);
				e[i + 1] = r;
				if (r === 0) {
					d[i + 1] = (d[i + 1] ?? 0) - p;
					e[m] = 0;
					break;
				}
				sine = f / r;
				cosine = g / r;
				g = (d[i + 1] ?? 0) - p;
				r = ((d[i] ?? 0) - g) * sine + 2 * cosine * b;
				p = sine * r;
				d[i + 1] = g + p;
				g = cosine * r - b;
				rotateRows(vectors.re, n, i, cosine, sine);
				if (vectors.im) rotateRows(vectors.im, n, i, cosine, sine);
			}
			if (r === 0 && i >= l) continue;
			d[l] = (d[l] ?? 0) - p;
			e[l] = g;
			e[m] = 0;
		}
	}
}

function rotateRows(z: Float64Array, n: number, i: number, cosine: number, sine: number) {
	const upper = i * n;
	const lower = upper + n;
	for (let k = 0; k < n; k++) {
		const f = z[lower + k] ?? 0;
		const h = z[upper + k] ?? 0;
		z[lower + k] = sine * h + cosine * f;
		z[upper + k] = cosine * h - sine * f;
	}
}

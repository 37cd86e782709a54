/** How far given matrices are from an exact measurement, with a proof. */
import type { Entries, ReadMeasurement } from './strategy-shape';

const UNIT_ROUNDOFF = 2 ** -53;

/** gamma_k of Higham, Accuracy and Stability of Numerical Algorithms (2nd ed.), section 3.1. */
export function gamma(k: number): number {
	return (k * UNIT_ROUNDOFF) / (1 - k * UNIT_ROUNDOFF);
}

/** What is shown and what is proved are the same measurement when no entry differs by more. */
const SAME_ELEMENT = 1e-9;

/**
 * A bound on ||V^H V - 1|| (spectral norm), V the matrix whose columns are the basis vectors: the
 * Frobenius norm as computed, and the rounding of the dot products of 2d real terms.
 */
export function basisDefect({ re, im }: Entries, size: number): number {
	let deviation = 0;
	let square = 0;
	for (let k = 0; k < size; k++) {
		for (let l = 0; l <= k; l++) {
			let dotRe = 0;
			let dotIm = 0;
			for (let i = 0; i < size; i++) {
				const [a, b] = [re[k * size + i] ?? 0, im[k * size + i] ?? 0];
				const [c, d] = [re[l * size + i] ?? 0, im[l * size + i] ?? 0];
				dotRe += a * c + b * d;
				dotIm += a * d - b * c;
			}
			if (k === l) square += dotRe;
			const off = k === l ? (dotRe - 1) ** 2 : 2 * (dotRe ** 2 + dotIm ** 2);
			deviation += off;
		}
	}
	return 1.001 * (Math.sqrt(deviation) + gamma(2 * size + 4) * square);
}

/** Whether the elements shown are the projectors of the basis. */
export function showsItsBasis({ elements, basis, labels }: ReadMeasurement, size: number): boolean {
	if (!basis) return false;
	return elements.every((element, output) => {
		const own = labels.flatMap((label, k) => (label === output ? [k] : []));
		for (let i = 0; i < size; i++) {
			for (let j = 0; j < size; j++) {
				let re = -(element.re[i * size + j] ?? 0);
				let im = -(element.im[i * size + j] ?? 0);
				for (const k of own) {
					const [a, b] = [basis.re[k * size + i] ?? 0, basis.im[k * size + i] ?? 0];
					const [c, d] = [basis.re[k * size + j] ?? 0, basis.im[k * size + j] ?? 0];
					re += a * c + b * d;
					im += b * c - a * d;
				}
				if (!(Math.hypot(re, im) <= SAME_ELEMENT)) return false;
			}
		}
		return true;
	});
}

export interface HermitianElements {
	/** Hermitian exactly; the last one is 1 minus the others, as computed. */
	readonly elements: readonly Entries[];
	/** Every element of the exact family (the last 1 minus the others) is >= -defect. */
	readonly defect: number;
}

/**
 * General measurements: all elements but the last are defined by their lower triangles, the last is
 * 1 minus the others; each is proved >= -defect. Null when they do not match what is shown or are
 * not positive.
 */
export function provePositive(
	measurement: ReadMeasurement,
	size: number
): HermitianElements | null {
	const last = {
		re: Float64Array.from({ length: size * size }, (_, i) => (i % (size + 1) === 0 ? 1 : 0)),
		im: new Float64Array(size * size)
	};
	const elements = measurement.elements.map((given, output) => {
		if (output === measurement.outputs - 1) return last;
		const element = hermitianOfLower(given, size);
		for (let i = 0; i < size * size; i++) {
			last.re[i] = (last.re[i] ?? 0) - (element.re[i] ?? 0);
			last.im[i] = (last.im[i] ?? 0) - (element.im[i] ?? 0);
		}
		return element;
	});
	let defect = 0;
	for (const [output, element] of elements.entries()) {
		const given = measurement.elements[output];
		if (!given || differ(element, given)) return null;
		const own = proveAbove(element, size);
		if (own === null) return null;
		defect = Math.max(defect, own);
	}
	// Entries stay below 2 (SAME_ELEMENT and positivity), so forming the last one rounds by this:
	return { elements, defect: defect + 4 * size * measurement.outputs * UNIT_ROUNDOFF };
}

function hermitianOfLower(given: Entries, size: number): Entries {
	const out = { re: new Float64Array(size * size), im: new Float64Array(size * size) };
	for (let i = 0; i < size; i++) {
		for (let j = 0; j <= i; j++) {
			const re = given.re[i * size + j] ?? 0;
			const im = i === j ? 0 : (given.im[i * size + j] ?? 0);
			out.re[i * size + j] = re;
			out.re[j * size + i] = re;
			out.im[i * size + j] = im;
			out.im[j * size + i] = -im;
		}
	}
	return out;
}

function differ(a: Entries, b: Entries): boolean {
	return a.re.some(
		(_, i) =>
			!(Math.abs((a.re[i] ?? 0) - (b.re[i] ?? 0)) <= SAME_ELEMENT) ||
			!(Math.abs((a.im[i] ?? 0) - (b.im[i] ?? 0)) <= SAME_ELEMENT)
	);
}

/** Shifts tried, the smallest first: singular elements need one of the size of the roundings. */
const SHIFTS = [1e-15, 1e-14, 1e-13, 1e-12, 1e-11, 1e-10];

/**
 * s with E >= -s, or null. As the real symmetric matrix [[Re, -Im], [Im, Re]] of size n = 2d: a
 * Cholesky factorisation of A that runs to its end in floating point proves
 * A >= -gamma_{n+1}/(1 - gamma_{n+1}) tr A (Rump, BIT 46, 433 (2006)).
 */
function proveAbove({ re, im }: Entries, size: number): number | null {
	const n = 2 * size;
	for (const unit of SHIFTS) {
		const shift = unit * n;
		const matrix = new Float64Array(n * n);
		let trace = 0;
		for (let i = 0; i < n; i++) {
			for (let j = 0; j <= i; j++) {
				const at = (i % size) * size + (j % size);
				const same = i < size === j < size;
				const entry = same ? (re[at] ?? 0) : (im[at] ?? 0);
				matrix[i * n + j] = entry + (i === j ? shift : 0);
			}
			trace += matrix[i * n + i] ?? 0;
		}
		const bound = gamma(n + 1) / (1 - gamma(n + 1));
		// the last term covers the rounding of adding the shift to the diagonal
		if (choleskyRuns(matrix, n)) return shift + 1.01 * bound * trace + 4 * UNIT_ROUNDOFF;
	}
	return null;
}

function choleskyRuns(a: Float64Array, n: number): boolean {
	for (let j = 0; j < n; j++) {
		let pivot = a[j * n + j] ?? 0;
		for (let k = 0; k < j; k++) pivot -= (a[j * n + k] ?? 0) ** 2;
		if (!(pivot > 0)) return false;
		const root = Math.sqrt(pivot);
		a[j * n + j] = root;
		for (let i = j + 1; i < n; i++) {
			let sum = a[i * n + j] ?? 0;
			for (let k = 0; k < j; k++) sum -= (a[i * n + k] ?? 0) * (a[j * n + k] ?? 0);
			a[i * n + j] = sum / root;
		}
	}
	return true;
}

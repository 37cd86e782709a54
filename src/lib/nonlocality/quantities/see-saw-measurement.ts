import {
	addScaled,
	complexZeros,
	copyComplex,
	fillZero,
	squaredNorm,
	type ComplexArray
} from '../linalg/complex-dense';
import { hermitianEigen } from '../linalg/hermitian-eigen';
import { partialOuter } from '../linalg/tensor-factors';
import type { SeeSawFunctional } from './see-saw-functional';
import { applyLetter } from './see-saw-state';
import { rowOf, updateElements, type Measurement, type SeeSawStrategy } from './see-saw-strategy';

/** Pairs of outputs are re-split until a whole sweep gains less than this share of the scale. */
const SWEEP_GAIN = 1e-13;
const MAX_SWEEPS = 6;

/**
 * Improves every measurement of one party, the rest held fixed. With F_a the operators for which
 * the functional is sum_a tr(E_a F_a) + constant, two outputs get the positive and the negative
 * part of F_0 - F_1 (the optimum over all measurements); for more outputs the support of
 * E_a + E_b is split again by the sign of F_a - F_b on it, pair after pair: each split is the
 * optimum for its pair, so the value never falls, and ranks may change down to 0.
 */
export function improveMeasurements(
	functional: SeeSawFunctional,
	strategy: SeeSawStrategy,
	party: number,
	poll: () => void
): void {
	const size = strategy.dimensions[party] ?? 1;
	const operators = partyOperators(functional, strategy, party, poll);
	strategy.measurements[party]?.forEach((measurement, input) => {
		const forces = operators[input];
		if (!forces) return;
		poll();
		if (measurement.outputs === 2) resplit(measurement, forces, size, 0, 1);
		else sweepPairs(measurement, forces, size, functional.scale);
		updateElements(measurement, size);
	});
}

/** `result[input][output]`, the last output's operator being 0; null where nothing depends on it. */
export function partyOperators(
	functional: SeeSawFunctional,
	strategy: SeeSawStrategy,
	party: number,
	poll: () => void
): (ComplexArray[] | null)[] {
	const { state, real } = strategy;
	const size = strategy.dimensions[party] ?? 1;
	const factor = strategy.factors[party];
	const result: (ComplexArray[] | null)[] = (functional.outputs[party] ?? []).map(() => null);
	if (!factor) return result;
	for (const { letters, uses } of functional.contexts[party] ?? []) {
		poll();
		let vector = state;
		for (const letter of letters) {
			const moved = complexZeros(state.re.length, real);
			applyLetter(strategy, letter, vector, moved);
			vector = moved;
		}
		const operator = partialOuter(vector, state, factor);
		for (const { input, output, weight } of uses) {
			const forces = (result[input] ??= Array.from(
				{ length: functional.outputs[party]?.[input] ?? 0 },
				() => complexZeros(size * size, real)
			));
			const force = forces[output];
			if (force) addScaled(force, weight, operator);
		}
	}
	return result;
}

function sweepPairs(
	measurement: Measurement,
	forces: readonly ComplexArray[],
	size: number,
	scale: number
) {
	for (let sweep = 0; sweep < MAX_SWEEPS; sweep++) {
		let gain = 0;
		for (let a = 0; a < measurement.outputs; a++)
			for (let b = a + 1; b < measurement.outputs; b++)
				gain += resplit(measurement, forces, size, a, b);
		if (gain <= SWEEP_GAIN * scale) return;
	}
}

/** Squared norm at which a vector of a frame is dropped: far below what the sum of all can feel. */
const SPENT = 1e-26;

/** More vectors than dimensions: a split leaves some of them at 0, where they are kept exactly. */
function isSpent(vector: ComplexArray): boolean {
	if (squaredNorm(vector) > SPENT) return false;
	fillZero(vector);
	return true;
}

/** Splits the vectors of outputs a and b anew; returns by how much the value rose. */
function resplit(
	{ basis, labels }: Measurement,
	forces: readonly ComplexArray[],
	size: number,
	a: number,
	b: number
): number {
	const rows: number[] = [];
	labels.forEach((label, k) => {
		if ((label === a || label === b) && !isSpent(rowOf(basis, size, k))) rows.push(k);
	});
	const forceA = forces[a];
	const forceB = forces[b];
	if (rows.length === 0 || !forceA || !forceB) return 0;
	const difference = copyComplex(forceA);
	addScaled(difference, -1, forceB);
	const compressed = compress(difference, basis, size, rows);
	const rank = rows.length;
	let before = 0;
	rows.forEach((k, at) => {
		if (labels[k] === a) before += compressed.re[at * rank + at] ?? 0;
	});
	const { values, vectors } = hermitianEigen(compressed, rank);
	rotateRows(basis, size, rows, vectors);
	let after = 0;
	rows.forEach((k, at) => {
		const value = values[at] ?? 0;
		labels[k] = value > 0 ? a : b;
		if (value > 0) after += value;
	});
	return after - before;
}

/** M_kl = <v_k| matrix |v_l> over the given basis rows (the lower triangle at least). */
export function compress(
	matrix: ComplexArray,
	basis: ComplexArray,
	size: number,
	rows: readonly number[]
): ComplexArray {
	const rank = rows.length;
	const real = matrix.im === null;
	const out = complexZeros(rank * rank, real);
	const imageRe = new Float64Array(size);
	const imageIm = new Float64Array(size);
	rows.forEach((l, column) => {
		for (let i = 0; i < size; i++) {
			let re = 0;
			let im = 0;
			for (let j = 0; j < size; j++) {
				const m = matrix.re[i * size + j] ?? 0;
				const v = basis.re[l * size + j] ?? 0;
				re += m * v;
				if (!matrix.im || !basis.im) continue;
				const n = matrix.im[i * size + j] ?? 0;
				const w = basis.im[l * size + j] ?? 0;
				re -= n * w;
				im += m * w + n * v;
			}
			imageRe[i] = re;
			imageIm[i] = im;
		}
		for (let row = column; row < rank; row++) {
			const k = rows[row] ?? 0;
			let re = 0;
			let im = 0;
			for (let i = 0; i < size; i++) {
				const v = basis.re[k * size + i] ?? 0;
				re += v * (imageRe[i] ?? 0);
				if (!basis.im) continue;
				const w = basis.im[k * size + i] ?? 0;
				re += w * (imageIm[i] ?? 0);
				im += v * (imageIm[i] ?? 0) - w * (imageRe[i] ?? 0);
			}
			out.re[row * rank + column] = re;
			if (out.im) out.im[row * rank + column] = im;
		}
	});
	return out;
}

/** v_k <- sum_l w_k[l] v_l over the given rows, w_k the rows of `rotation`. */
export function rotateRows(
	basis: ComplexArray,
	size: number,
	rows: readonly number[],
	rotation: ComplexArray
) {
	const rank = rows.length;
	const fresh = complexZeros(rank * size, basis.im === null);
	for (let k = 0; k < rank; k++) {
		rows.forEach((source, l) => {
			const c = rotation.re[k * rank + l] ?? 0;
			const s = rotation.im ? (rotation.im[k * rank + l] ?? 0) : 0;
			for (let i = 0; i < size; i++) {
				const v = basis.re[source * size + i] ?? 0;
				const at = k * size + i;
				fresh.re[at] = (fresh.re[at] ?? 0) + c * v;
				if (!basis.im || !fresh.im) continue;
				const w = basis.im[source * size + i] ?? 0;
				fresh.re[at] = (fresh.re[at] ?? 0) - s * w;
				fresh.im[at] = (fresh.im[at] ?? 0) + c * w + s * v;
			}
		});
	}
	rows.forEach((target, k) => {
		const row = rowOf(basis, size, target);
		row.re.set(fresh.re.subarray(k * size, (k + 1) * size));
		if (row.im && fresh.im) row.im.set(fresh.im.subarray(k * size, (k + 1) * size));
	});
}

import {
	complexZeros,
	fillZero,
	removeComponent,
	scaleComplex,
	squaredNorm,
	type ComplexArray
} from '../linalg/complex-dense';
import type { SeededRandom } from '../linalg/seeded-random';
import { tensorFactors, type TensorFactor } from '../linalg/tensor-factors';

/**
 * A projective measurement: an orthonormal basis whose vectors each belong to one output. An
 * output may own no vector (a projector of rank 0), so deterministic measurements are included.
 */
export interface ProjectiveMeasurement {
	readonly outputs: number;
	/** Row k is the k-th basis vector; size x size. */
	readonly basis: ComplexArray;
	/** Output of each basis vector. */
	readonly labels: Int32Array;
	/** Projectors of all outputs but the last, size x size each. */
	readonly elements: readonly ComplexArray[];
}

/** A pure state (party 0 most significant) with projective measurements, all real or all complex. */
export interface SeeSawStrategy {
	readonly real: boolean;
	readonly dimensions: readonly number[];
	readonly factors: readonly TensorFactor[];
	readonly state: ComplexArray;
	/** `measurements[party][input]`. */
	readonly measurements: readonly (readonly ProjectiveMeasurement[])[];
}

/** Haar-random bases with their vectors shared out evenly at random, and a random state. */
export function randomStrategy(
	outputs: readonly (readonly number[])[],
	dimensions: readonly number[],
	real: boolean,
	random: SeededRandom
): SeeSawStrategy {
	const total = dimensions.reduce((product, d) => product * d, 1);
	const state = randomVector(total, real, random);
	scaleComplex(state, 1 / Math.sqrt(squaredNorm(state)));
	const measurements = outputs.map((counts, party) =>
		counts.map((count) => {
			const size = dimensions[party] ?? 1;
			const measurement: ProjectiveMeasurement = {
				outputs: count,
				basis: randomVector(size * size, real, random),
				labels: randomLabels(size, count, random),
				elements: Array.from({ length: count - 1 }, () => complexZeros(size * size, real))
			};
			orthonormalise(measurement.basis, size);
			updateElements(measurement, size);
			return measurement;
		})
	);
	return { real, dimensions, factors: tensorFactors(dimensions), state, measurements };
}

export function randomVector(length: number, real: boolean, random: SeededRandom): ComplexArray {
	const vector = complexZeros(length, real);
	for (let i = 0; i < length; i++) vector.re[i] = random.normal();
	if (vector.im) for (let i = 0; i < length; i++) vector.im[i] = random.normal();
	return vector;
}

function randomLabels(size: number, count: number, random: SeededRandom): Int32Array {
	const order = Array.from({ length: Math.max(size, count) }, (_, i) => i % count);
	for (let i = order.length - 1; i > 0; i--) {
		const j = random.integer(i + 1);
		[order[i], order[j]] = [order[j] ?? 0, order[i] ?? 0];
	}
	return Int32Array.from(order.slice(0, size));
}

/** Row k of a size x size matrix as a view. */
export function rowOf(matrix: ComplexArray, size: number, k: number): ComplexArray {
	return {
		re: matrix.re.subarray(k * size, (k + 1) * size),
		im: matrix.im ? matrix.im.subarray(k * size, (k + 1) * size) : null
	};
}

/** Gram-Schmidt on the rows, twice: then they are orthonormal to a few roundings. */
export function orthonormalise(basis: ComplexArray, size: number): void {
	for (let pass = 0; pass < 2; pass++) {
		for (let k = 0; k < size; k++) {
			const row = rowOf(basis, size, k);
			for (let l = 0; l < k; l++) removeComponent(row, rowOf(basis, size, l));
			scaleComplex(row, 1 / Math.sqrt(squaredNorm(row)));
		}
	}
}

/** Recomputes the projectors from the basis and its labels. */
export function updateElements(measurement: ProjectiveMeasurement, size: number): void {
	const { basis, labels, elements } = measurement;
	for (const element of elements) fillZero(element);
	for (let k = 0; k < size; k++) {
		const element = elements[labels[k] ?? 0];
		if (element) addProjector(element, rowOf(basis, size, k), size);
	}
}

/** matrix += |v><v|. */
export function addProjector(matrix: ComplexArray, v: ComplexArray, size: number): void {
	for (let i = 0; i < size; i++) {
		const a = v.re[i] ?? 0;
		const b = v.im ? (v.im[i] ?? 0) : 0;
		for (let j = 0; j < size; j++) {
			const at = i * size + j;
			const c = v.re[j] ?? 0;
			const d = v.im ? (v.im[j] ?? 0) : 0;
			matrix.re[at] = (matrix.re[at] ?? 0) + a * c + b * d;
			if (matrix.im) matrix.im[at] = (matrix.im[at] ?? 0) + b * c - a * d;
		}
	}
}

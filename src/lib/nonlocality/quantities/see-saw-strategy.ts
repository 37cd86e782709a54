import {
	complexZeros,
	fillZero,
	removeComponent,
	scaleComplex,
	setComplex,
	squaredNorm,
	type ComplexArray
} from '../linalg/complex-dense';
import type { SeededRandom } from '../linalg/seeded-random';
import { tensorFactors, type TensorFactor } from '../linalg/tensor-factors';

/**
 * A measurement as a frame: vectors v_k with sum_k |v_k><v_k| = 1, each belonging to one output, so
 * that E_a = sum over the vectors of a of |v><v|. As many vectors as dimensions make an orthonormal
 * basis: the measurement is projective. More of them describe general elements (Naimark's
 * dilation). An output may own no vector, so deterministic measurements are included.
 */
export interface Measurement {
	readonly outputs: number;
	/** Row k is the k-th vector; vectors x size, the columns orthonormal. */
	readonly basis: ComplexArray;
	/** Output of each vector. */
	readonly labels: Int32Array;
	/** Elements of all outputs but the last, size x size each. */
	readonly elements: readonly ComplexArray[];
}

/** A pure state (party 0 most significant) with measurements, all real or all complex. */
export interface SeeSawStrategy {
	readonly real: boolean;
	readonly dimensions: readonly number[];
	readonly factors: readonly TensorFactor[];
	readonly state: ComplexArray;
	/** `measurements[party][input]`. */
	readonly measurements: readonly (readonly Measurement[])[];
}

export interface StrategyKind {
	readonly real: boolean;
	/** Whether inputs of more than two outputs get general elements; projectors suffice for two. */
	readonly general: boolean;
}

/** Random frames with their vectors shared out evenly at random, and a random state. */
export function randomStrategy(
	outputs: readonly (readonly number[])[],
	dimensions: readonly number[],
	{ real, general }: StrategyKind,
	random: SeededRandom
): SeeSawStrategy {
	const total = dimensions.reduce((product, d) => product * d, 1);
	const state = randomVector(total, real, random);
	scaleComplex(state, 1 / Math.sqrt(squaredNorm(state)));
	const measurements = outputs.map((counts, party) =>
		counts.map((count) => {
			const size = dimensions[party] ?? 1;
			// an element has rank up to the dimension
			const vectors = general && count > 2 ? count * size : size;
			const measurement = emptyMeasurement(count, vectors, size, real);
			setComplex(measurement.basis, randomVector(vectors * size, real, random));
			measurement.labels.set(randomLabels(vectors, count, random));
			tidyMeasurement(measurement, size);
			return measurement;
		})
	);
	return { real, dimensions, factors: tensorFactors(dimensions), state, measurements };
}

/** A measurement whose vectors are still to be filled in. */
export function emptyMeasurement(
	outputs: number,
	vectors: number,
	size: number,
	real: boolean
): Measurement {
	return {
		outputs,
		basis: complexZeros(vectors * size, real),
		labels: new Int32Array(vectors),
		elements: Array.from({ length: outputs - 1 }, () => complexZeros(size * size, real))
	};
}

export function isProjective({ labels }: Measurement, size: number): boolean {
	return labels.length === size;
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

/** Makes the frame exact to a few roundings, and the elements those of the frame. */
export function tidyMeasurement(measurement: Measurement, size: number): void {
	if (isProjective(measurement, size)) orthonormalise(measurement.basis, size);
	else {
		const columns = transposed(measurement.basis, measurement.labels.length, size);
		orthonormalise(columns, measurement.labels.length);
		setComplex(measurement.basis, transposed(columns, size, measurement.labels.length));
	}
	updateElements(measurement, size);
}

/** Gram-Schmidt on the rows of the given length, twice: then they are orthonormal to a few roundings. */
export function orthonormalise(rows: ComplexArray, length: number): void {
	const count = rows.re.length / length;
	for (let pass = 0; pass < 2; pass++) {
		for (let k = 0; k < count; k++) {
			const row = rowOf(rows, length, k);
			for (let l = 0; l < k; l++) removeComponent(row, rowOf(rows, length, l));
			scaleComplex(row, 1 / Math.sqrt(squaredNorm(row)));
		}
	}
}

function transposed(matrix: ComplexArray, rows: number, columns: number): ComplexArray {
	const out = complexZeros(rows * columns, matrix.im === null);
	for (let i = 0; i < rows; i++) {
		for (let j = 0; j < columns; j++) {
			out.re[j * rows + i] = matrix.re[i * columns + j] ?? 0;
			if (out.im) out.im[j * rows + i] = matrix.im?.[i * columns + j] ?? 0;
		}
	}
	return out;
}

/** Recomputes the elements from the vectors and their labels. */
export function updateElements(measurement: Measurement, size: number): void {
	const { basis, labels, elements } = measurement;
	for (const element of elements) fillZero(element);
	for (let k = 0; k < labels.length; k++) {
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

import { complexZeros, scaleComplex, squaredNorm } from '../linalg/complex-dense';
import type { SeededRandom } from '../linalg/seeded-random';
import {
	orthonormalise,
	randomStrategy,
	updateElements,
	type ProjectiveMeasurement,
	type SeeSawStrategy
} from './see-saw-strategy';

/**
 * A random real strategy of chain form for two parties and two outputs: projectors of 2 x 2 blocks
 * on neighbouring basis vectors, each input's blocks beginning at 0 or 1, and a state of decaying
 * Schmidt coefficients. Two projectors always have such a form in common (Jordan's lemma); the best
 * strategies known for I3322 have it for all three.
 * @see Pal and Vertesi, Phys. Rev. A 82, 022116 (2010)
 */
export function chainStrategy(
	outputs: readonly (readonly number[])[],
	dimension: number,
	random: SeededRandom
): SeeSawStrategy {
	const strategy = randomStrategy(
		outputs,
		outputs.map(() => dimension),
		true,
		random
	);
	const { re } = strategy.state;
	re.fill(0);
	const decay = 0.5 + 0.45 * random.uniform();
	for (let i = 0; i < dimension; i++)
		re[i * dimension + i] = decay ** Math.ceil(i / 2) * (0.8 + 0.4 * random.uniform());
	scaleComplex(strategy.state, 1 / Math.sqrt(squaredNorm(strategy.state)));
	for (const row of strategy.measurements)
		for (const measurement of row) makeChain(measurement, dimension, random);
	return strategy;
}

function makeChain(measurement: ProjectiveMeasurement, size: number, random: SeededRandom) {
	const { re } = measurement.basis;
	re.fill(0);
	for (let i = 0; i < size; i++) {
		re[i * size + i] = 1;
		measurement.labels[i] = random.integer(2);
	}
	for (let i = random.integer(2); i + 1 < size; i += 2) {
		const angle = Math.PI * random.uniform();
		const [upper, lower] = [i * size + i, (i + 1) * size + i];
		re[upper] = Math.cos(angle);
		re[upper + 1] = Math.sin(angle);
		re[lower] = -Math.sin(angle);
		re[lower + 1] = Math.cos(angle);
		measurement.labels.set([0, 1], i);
	}
	updateElements(measurement, size);
}

/**
 * A real strategy in a larger local dimension: the old one on the first basis vectors, random
 * projectors on the new ones, the whole shaken by about `perturbation`.
 */
export function paddedStrategy(
	old: SeeSawStrategy,
	dimension: number,
	perturbation: number,
	random: SeededRandom
): SeeSawStrategy {
	const outputs = old.measurements.map((row) => row.map((measurement) => measurement.outputs));
	const fresh = randomStrategy(
		outputs,
		outputs.map(() => dimension),
		true,
		random
	);
	const before = old.dimensions[0] ?? dimension;
	fresh.state.re.set(embedded(old.state.re, before, dimension));
	shake(fresh.state.re, perturbation / dimension, random);
	scaleComplex(fresh.state, 1 / Math.sqrt(squaredNorm(fresh.state)));
	fresh.measurements.forEach((row, party) => {
		row.forEach((measurement, input) => {
			const source = old.measurements[party]?.[input];
			if (!source) return;
			const { re } = measurement.basis;
			re.set(embedded(source.basis.re, before, dimension));
			measurement.labels.set(source.labels);
			for (let k = before; k < dimension; k++) {
				measurement.labels[k] = random.integer(measurement.outputs);
				for (let i = before; i < dimension; i++) re[k * dimension + i] = random.normal();
			}
			shake(re, perturbation / Math.sqrt(dimension), random);
			orthonormalise(measurement.basis, dimension);
			updateElements(measurement, dimension);
		});
	});
	return fresh;
}

/** A square array in the corner of a larger one of zeros. */
function embedded(square: Float64Array, size: number, larger: number): Float64Array {
	const { re } = complexZeros(larger * larger, true);
	for (let i = 0; i < size; i++) re.set(square.subarray(i * size, (i + 1) * size), i * larger);
	return re;
}

function shake(values: Float64Array, by: number, random: SeededRandom) {
	for (let i = 0; i < values.length; i++) values[i] = (values[i] ?? 0) + by * random.normal();
}

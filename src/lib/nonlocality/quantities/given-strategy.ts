import {
	complexZeros,
	scaleComplex,
	squaredNorm,
	type ComplexArray
} from '../linalg/complex-dense';
import { hermitianEigen } from '../linalg/hermitian-eigen';
import { tensorFactors } from '../linalg/tensor-factors';
import {
	SolverStop,
	type ComplexMatrix,
	type ComplexNumber,
	type QuantumStrategy
} from '../problem';
import type { Scenario } from '../scenario/scenario';
import { strategyDefect } from '../scenario/strategy-behaviour';
import { paddedStrategy } from './grown-strategy';
import { seededRandom } from '../linalg/seeded-random';
import {
	emptyMeasurement,
	tidyMeasurement,
	type Measurement,
	type SeeSawStrategy
} from './see-saw-strategy';

/** Eigenvalues of an element that count as 0. */
const NEGLIGIBLE = 1e-12;

/**
 * A stored strategy as frames: each element is the sum of its eigenvectors, scaled by the roots of
 * their eigenvalues. In larger dimensions it is padded with zeros.
 * @param dimensions of each party, none smaller than the strategy's own
 * @throws SolverStop `failed` when it is no strategy for the scenario
 */
export function givenStrategy(
	scenario: Scenario,
	given: QuantumStrategy,
	dimensions: readonly number[] = given.dimensions
): SeeSawStrategy {
	const defect = strategyDefect(scenario, given);
	if (defect) throw new SolverStop('failed', `start: ${defect}`);
	const { state, measurements } = given;
	const tooLarge = given.dimensions.some((d, party) => d > (dimensions[party] ?? 0));
	if (tooLarge)
		throw new SolverStop(
			'failed',
			`start: its dimensions ${given.dimensions.join(' x ')} exceed ${dimensions.join(' x ')}`
		);
	const isReal = (entries: readonly ComplexNumber[]) => entries.every(([, im]) => im === 0);
	const real = isReal(state) && measurements.flat(3).every((row) => isReal(row));
	const vector = complexOf(state, real);
	scaleComplex(vector, 1 / Math.sqrt(squaredNorm(vector)));
	const strategy: SeeSawStrategy = {
		real,
		dimensions: given.dimensions,
		factors: tensorFactors(given.dimensions),
		state: vector,
		measurements: measurements.map((row, party) =>
			row.map((elements) => frameOf(elements, given.dimensions[party] ?? 1, real))
		)
	};
	if (dimensions.every((d, party) => d === given.dimensions[party])) return strategy;
	return paddedStrategy(strategy, dimensions, 0, seededRandom(0));
}

function frameOf(elements: readonly ComplexMatrix[], size: number, real: boolean): Measurement {
	const vectors: { vector: ComplexArray; label: number }[] = [];
	elements.forEach((element, label) => {
		const { values, vectors: found } = hermitianEigen(complexOf(element.flat(), real), size);
		values.forEach((value, k) => {
			if (value <= NEGLIGIBLE) return;
			const part = (array: Float64Array) => array.slice(k * size, (k + 1) * size);
			const vector = { re: part(found.re), im: found.im ? part(found.im) : null };
			scaleComplex(vector, Math.sqrt(value));
			vectors.push({ vector, label });
		});
	});
	const measurement = emptyMeasurement(elements.length, vectors.length, size, real);
	vectors.forEach(({ vector, label }, k) => {
		measurement.labels[k] = label;
		measurement.basis.re.set(vector.re, k * size);
		if (vector.im) measurement.basis.im?.set(vector.im, k * size);
	});
	tidyMeasurement(measurement, size);
	return measurement;
}

function complexOf(entries: readonly ComplexNumber[], real: boolean): ComplexArray {
	const out = complexZeros(entries.length, real);
	entries.forEach(([re, im], i) => {
		out.re[i] = re;
		if (out.im) out.im[i] = im;
	});
	return out;
}

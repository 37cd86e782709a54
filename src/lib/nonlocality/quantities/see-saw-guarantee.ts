import type { StrategyCertificate } from '../certificates/types';
import {
	complexZeros,
	copyComplex,
	scaleComplex,
	squaredNorm,
	type ComplexArray
} from '../linalg/complex-dense';
import { applyToFactor } from '../linalg/tensor-factors';
import type { ComplexNumber } from '../problem';
import type { Functional, Term } from '../scenario/functional';
import {
	addProjector,
	orthonormalise,
	rowOf,
	type ProjectiveMeasurement,
	type SeeSawStrategy
} from './see-saw-strategy';

const UNIT_ROUNDOFF = 2 ** -53;
/** The check's own allowance comes to about half of the one taken here. */
const SAFETY = 2;

/**
 * The value that a strategy is guaranteed to have, rounded down, with its certificate. Bases are
 * orthonormalised and the state normalised first. P(a|x) is the squared norm of the part of the
 * state, written in the output bases, that belongs to those outputs: a sum of non-negative terms.
 *
 * Allowance: bases V with ||V^H V - 1|| <= eps move a projector by at most 2 eps (1 + eps), so a
 * probability of N parties by less than 4 N eps; computing it with dot products of length d_p and
 * a sum of D squares costs at most gamma_m (2 sqrt(D) + 2) (the Frobenius norm of the transform
 * being sqrt(D)); the coefficients add their own errors.
 * @see Higham, Accuracy and Stability of Numerical Algorithms (2nd ed.), sections 3.1, 3.5, 19.3
 */
export function guaranteedValue(
	functional: Functional,
	strategy: SeeSawStrategy
): StrategyCertificate {
	const { dimensions } = strategy;
	strategy.measurements.forEach((row, party) => {
		for (const { basis } of row) orthonormalise(basis, dimensions[party] ?? 1);
	});
	scaleComplex(strategy.state, 1 / Math.sqrt(squaredNorm(strategy.state)));
	const amplitudes = new Map<string, ComplexArray>();
	let value = 0;
	let weight = 0;
	let errors = 0;
	for (const term of functional.terms) {
		value += term.coefficient.value * probability(strategy, term, amplitudes);
		weight += Math.abs(term.coefficient.value);
		errors += term.coefficient.error;
	}
	const total = strategy.state.re.length;
	const operations = dimensions.reduce((sum, d) => sum + 4 * d + 4, 0) + 4 * total + 16;
	const size = Math.max(...dimensions);
	// Gram-Schmidt done twice leaves the rows orthonormal to a few roundings each.
	const eps = (4 * size * size + 8) * UNIT_ROUNDOFF;
	const rounding = operations * UNIT_ROUNDOFF * (2 * Math.sqrt(total) + 2);
	const sums = (functional.terms.length + 8) * UNIT_ROUNDOFF;
	const allowance = SAFETY * (weight * (4 * dimensions.length * eps + rounding + sums) + errors);
	return {
		kind: 'quantum-strategy',
		strategy: {
			dimensions: [...dimensions],
			state: complexList(strategy.state),
			measurements: strategy.measurements.map((row, party) =>
				row.map((measurement) => elementMatrices(measurement, dimensions[party] ?? 1))
			)
		},
		projective: true,
		bases: strategy.measurements.map((row, party) => {
			const d = dimensions[party] ?? 1;
			return row.map(({ basis, labels }) => ({
				vectors: matrixRows(basis, d),
				outputs: [...labels]
			}));
		}),
		value: value - allowance
	};
}

function probability(
	strategy: SeeSawStrategy,
	{ events }: Term,
	known: Map<string, ComplexArray>
): number {
	if (events.length === 0) return 1;
	const key = events.map(([party, input]) => `${party}.${input}`).join(' ');
	let vector = known.get(key);
	if (!vector) {
		vector = strategy.state;
		for (const [party, input] of events) {
			const factor = strategy.factors[party];
			const measurement = strategy.measurements[party]?.[input];
			if (!factor || !measurement) continue;
			const out = complexZeros(vector.re.length, strategy.real);
			applyToFactor(conjugate(measurement.basis), factor, vector, out);
			vector = out;
		}
		known.set(key, vector);
	}
	let sum = 0;
	for (let i = 0; i < vector.re.length; i++) {
		const belongs = events.every(([party, input, output]) => {
			const factor = strategy.factors[party];
			if (!factor) return false;
			const at = Math.floor(i / factor.right) % factor.size;
			return strategy.measurements[party]?.[input]?.labels[at] === output;
		});
		if (belongs) sum += (vector.re[i] ?? 0) ** 2 + (vector.im ? (vector.im[i] ?? 0) ** 2 : 0);
	}
	return sum;
}

function conjugate(matrix: ComplexArray): ComplexArray {
	const copy = copyComplex(matrix);
	if (copy.im) for (let i = 0; i < copy.im.length; i++) copy.im[i] = -(copy.im[i] ?? 0);
	return copy;
}

function elementMatrices({ outputs, basis, labels }: ProjectiveMeasurement, size: number) {
	return Array.from({ length: outputs }, (_, output) => {
		const element = complexZeros(size * size, basis.im === null);
		for (let k = 0; k < size; k++)
			if (labels[k] === output) addProjector(element, rowOf(basis, size, k), size);
		return matrixRows(element, size);
	});
}

function matrixRows(matrix: ComplexArray, size: number): ComplexNumber[][] {
	return Array.from({ length: size }, (_, k) => complexList(rowOf(matrix, size, k)));
}

function complexList({ re, im }: ComplexArray): ComplexNumber[] {
	return Array.from(re, (a, i) => [a + 0, (im ? (im[i] ?? 0) : 0) + 0]);
}

import type { StrategyCertificate } from '../certificates/types';
import {
	complexZeros,
	scaleComplex,
	squaredNorm,
	type ComplexArray
} from '../linalg/complex-dense';
import type { ComplexNumber } from '../problem';
import type { Functional } from '../scenario/functional';
import {
	addProjector,
	rowOf,
	tidyMeasurement,
	type Measurement,
	type SeeSawStrategy
} from './see-saw-strategy';
import { allElements, evaluateStrategy, type StrategyEvaluation } from './strategy-evaluation';

const UNIT_ROUNDOFF = 2 ** -53;
/** The check's own allowance comes to about half of the one taken here. */
const SAFETY = 2;

/** A functional's value on a strategy, within the allowance. */
export interface FormValue {
	readonly value: number;
	readonly allowance: number;
}

/** Clears the roundings gathered on the way: exact frames, state of norm 1. */
export function tidyStrategy({ state, measurements, dimensions }: SeeSawStrategy): void {
	measurements.forEach((row, party) => {
		for (const measurement of row) tidyMeasurement(measurement, dimensions[party] ?? 1);
	});
	scaleComplex(state, 1 / Math.sqrt(squaredNorm(state)));
}

/** Adds what sums and coefficients cost to the allowance of each probability. */
export function formValue({ terms }: Functional, evaluation: StrategyEvaluation): FormValue {
	let value = 0;
	let weight = 0;
	let errors = 0;
	for (const { coefficient, events } of terms) {
		value += coefficient.value * evaluation.probability(events);
		weight += Math.abs(coefficient.value);
		errors += coefficient.error;
	}
	const sums = (terms.length + 8) * UNIT_ROUNDOFF;
	return { value, allowance: SAFETY * (weight * (evaluation.allowance + sums) + errors) };
}

/** The value that a strategy is guaranteed to have, rounded down, with its certificate. */
export function guaranteedValue(
	functional: Functional,
	strategy: SeeSawStrategy
): StrategyCertificate {
	tidyStrategy(strategy);
	const { dimensions, measurements } = strategy;
	const evaluation = evaluateStrategy(strategy);
	const { value, allowance } = formValue(functional, evaluation);
	const { projective } = evaluation;
	return {
		kind: 'quantum-strategy',
		strategy: {
			dimensions: [...dimensions],
			state: complexList(strategy.state),
			measurements: measurements.map((row, party) =>
				row.map((measurement) => elementMatrices(measurement, dimensions[party] ?? 1, projective))
			)
		},
		projective,
		bases: projective
			? measurements.map((row, party) =>
					row.map(({ basis, labels }) => ({
						vectors: matrixRows(basis, dimensions[party] ?? 1),
						outputs: [...labels]
					}))
				)
			: null,
		value: value - allowance
	};
}

function elementMatrices(measurement: Measurement, size: number, projective: boolean) {
	if (!projective)
		return allElements(measurement.elements, size).map((element) => matrixRows(element, size));
	const { outputs, basis, labels } = measurement;
	return Array.from({ length: outputs }, (_, output) => {
		const element = complexZeros(size * size, basis.im === null);
		labels.forEach((label, k) => {
			if (label === output) addProjector(element, rowOf(basis, size, k), size);
		});
		return matrixRows(element, size);
	});
}

function matrixRows(matrix: ComplexArray, size: number): ComplexNumber[][] {
	return Array.from({ length: size }, (_, k) => complexList(rowOf(matrix, size, k)));
}

function complexList({ re, im }: ComplexArray): ComplexNumber[] {
	return Array.from(re, (a, i) => [a + 0, (im ? (im[i] ?? 0) : 0) + 0]);
}

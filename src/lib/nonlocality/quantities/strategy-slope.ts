import {
	addScaled,
	complexZeros,
	copyComplex,
	realDot,
	scaleComplex,
	squaredNorm,
	type ComplexArray
} from '../linalg/complex-dense';
import type { SeeSawFunctional } from './see-saw-functional';
import { compress, partyOperators, rotateRows } from './see-saw-measurement';
import { applyBellOperator } from './see-saw-state';
import {
	emptyMeasurement,
	orthonormalise,
	tidyMeasurement,
	type Measurement,
	type SeeSawStrategy
} from './see-saw-strategy';

/**
 * Tangent coordinates at a strategy: a change of the state (real, then imaginary parts), then for
 * every measurement an anti-Hermitian matrix K by which its vectors turn, V -> V + K V.
 */
export type StrategyTangent = Float64Array;

/** The values of functionals at a strategy, and B psi for each, B its operator. */
export interface StrategyValues {
	readonly values: readonly number[];
	readonly images: readonly ComplexArray[];
}

export function valuesOf(
	functionals: readonly SeeSawFunctional[],
	strategy: SeeSawStrategy
): StrategyValues {
	const images = functionals.map((f) => applyBellOperator(f, strategy, strategy.state));
	return { values: images.map((image) => realDot(strategy.state, image)), images };
}

/**
 * Gradient of sum_j weight_j functional_j. For the state 2 (B - <B>) psi; for a measurement, with
 * F_a the operators for which the sum is sum_a tr(E_a F_a) and A_kl = <v_k| F_a(k) |v_l>, the
 * anti-Hermitian 2 (conj(A) - A^T) / 2.
 */
export function strategyGradient(
	functionals: readonly SeeSawFunctional[],
	weights: readonly number[],
	strategy: SeeSawStrategy,
	{ values, images }: StrategyValues,
	poll: () => void
): StrategyTangent {
	const { state, real, dimensions } = strategy;
	const slope = complexZeros(state.re.length, real);
	functionals.forEach((_, j) => {
		const image = images[j];
		if (!image) return;
		addScaled(slope, 2 * (weights[j] ?? 0), image);
		addScaled(slope, -2 * (weights[j] ?? 0) * (values[j] ?? 0), state);
	});
	const parts = [slope];
	strategy.measurements.forEach((row, party) => {
		const size = dimensions[party] ?? 1;
		const operators = functionals.map((f) => partyOperators(f, strategy, party, poll));
		row.forEach((measurement, input) => {
			const forces = Array.from({ length: measurement.outputs }, (_, output) => {
				const force = complexZeros(size * size, real);
				operators.forEach((own, j) => {
					const operator = own[input]?.[output];
					if (operator) addScaled(force, weights[j] ?? 0, operator);
				});
				return force;
			});
			parts.push(turningForce(measurement, forces, size));
		});
	});
	return flatten(parts);
}

function turningForce(
	{ basis, labels }: Measurement,
	forces: readonly ComplexArray[],
	size: number
): ComplexArray {
	const count = labels.length;
	const rows = Array.from({ length: count }, (_, k) => k);
	const compressed = forces.map((force) => compress(force, basis, size, rows));
	const out = complexZeros(count * count, basis.im === null);
	for (let k = 0; k < count; k++) {
		for (let l = 0; l < k; l++) {
			const [a, b] = [compressed[labels[k] ?? 0], compressed[labels[l] ?? 0]];
			if (!a || !b || a === b) continue;
			// conj(A_kl) - A_lk, with A_lk = conj(<v_k| F_a(l) |v_l>)
			const at = k * count + l;
			const re = (a.re[at] ?? 0) - (b.re[at] ?? 0);
			out.re[at] = re;
			out.re[l * count + k] = -re;
			if (!out.im) continue;
			const im = -(a.im?.[at] ?? 0) + (b.im?.[at] ?? 0);
			out.im[at] = im;
			out.im[l * count + k] = im;
		}
	}
	return out;
}

/** The strategy reached along a tangent: state and vectors made exact again. */
export function movedStrategy(strategy: SeeSawStrategy, tangent: StrategyTangent): SeeSawStrategy {
	const { real, dimensions } = strategy;
	let at = 0;
	const take = (length: number): ComplexArray => {
		const re = tangent.subarray(at, at + length);
		const im = real ? null : tangent.subarray(at + length, at + 2 * length);
		at += real ? length : 2 * length;
		return { re, im };
	};
	const state = copyComplex(strategy.state);
	addScaled(state, 1, take(state.re.length));
	scaleComplex(state, 1 / Math.sqrt(squaredNorm(state)));
	const measurements = strategy.measurements.map((row, party) => {
		const size = dimensions[party] ?? 1;
		return row.map(({ outputs, basis, labels }) => {
			const count = labels.length;
			const turn = copyComplex(take(count * count));
			for (let k = 0; k < count; k++) turn.re[k * count + k] = (turn.re[k * count + k] ?? 0) + 1;
			orthonormalise(turn, count);
			const moved = emptyMeasurement(outputs, count, size, real);
			moved.basis.re.set(basis.re);
			if (basis.im) moved.basis.im?.set(basis.im);
			moved.labels.set(labels);
			rotateRows(
				moved.basis,
				size,
				Array.from({ length: count }, (_, k) => k),
				turn
			);
			tidyMeasurement(moved, size);
			return moved;
		});
	});
	return { ...strategy, state, measurements };
}

function flatten(parts: readonly ComplexArray[]): Float64Array {
	const arrays = parts.flatMap(({ re, im }) => (im ? [re, im] : [re]));
	const out = new Float64Array(arrays.reduce((sum, array) => sum + array.length, 0));
	let at = 0;
	for (const array of arrays) {
		out.set(array, at);
		at += array.length;
	}
	return out;
}

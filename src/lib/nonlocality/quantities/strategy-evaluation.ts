import { complexZeros, copyComplex, realDot, type ComplexArray } from '../linalg/complex-dense';
import { hermitianEigen } from '../linalg/hermitian-eigen';
import { applyToFactor } from '../linalg/tensor-factors';
import type { Event } from '../scenario/scenario';
import { isProjective, type SeeSawStrategy } from './see-saw-strategy';

const UNIT_ROUNDOFF = 2 ** -53;

export interface StrategyEvaluation {
	probability(events: readonly Event[]): number;
	/** |P as computed - P of an exact strategy nearby| is at most this. */
	readonly allowance: number;
	readonly projective: boolean;
}

/**
 * Probabilities of a tidy strategy (exact frames, state of norm 1) with a bound on their error. With
 * projectors P(a|x) is the squared norm of the part of the state, written in the output bases, that
 * belongs to those outputs; otherwise <psi| E (x) F ... |psi>.
 *
 * Allowance: bases V with ||V^H V - 1|| <= eps move a projector by at most 2 eps (1 + eps), so a
 * probability of N parties by less than 4 N eps. Elements of k outputs proved >= -s only are within
 * k s of an exact measurement: 2 N k s. Computing with dot products of length d_p and a sum of D
 * terms costs at most gamma_m (2 sqrt(D) + 2) (the Frobenius norm of a transform is sqrt(D)).
 * @see Higham, Accuracy and Stability of Numerical Algorithms (2nd ed.), sections 3.1, 3.5, 19.3
 */
export function evaluateStrategy(strategy: SeeSawStrategy): StrategyEvaluation {
	const { dimensions, measurements } = strategy;
	const total = strategy.state.re.length;
	const projective = measurements.every((row, party) =>
		row.every((measurement) => isProjective(measurement, dimensions[party] ?? 1))
	);
	const operations = dimensions.reduce((sum, d) => sum + 4 * d + 4, 0) + 4 * total + 16;
	const rounding = operations * UNIT_ROUNDOFF * (2 * Math.sqrt(total) + 2);
	const parties = dimensions.length;
	const moved = projective
		? 4 * parties * basisDefect(Math.max(...dimensions))
		: 2 * parties * elementDefect(strategy);
	const probability = projective
		? projectiveProbabilities(strategy)
		: elementProbabilities(strategy);
	return { probability, allowance: moved + rounding, projective };
}

/** Gram-Schmidt done twice leaves the rows orthonormal to a few roundings each. */
const basisDefect = (size: number) => (4 * size * size + 8) * UNIT_ROUNDOFF;

/**
 * k s, s the shift that lets a verified factorisation of every element run: a multiple of 1e-15 by a
 * power of ten that covers what is below 0 by rounding and the factorisation's own error.
 */
function elementDefect({ dimensions, measurements }: SeeSawStrategy): number {
	let worst = 0;
	measurements.forEach((row, party) => {
		const size = dimensions[party] ?? 1;
		const doubled = 2 * size; // as a real symmetric matrix
		for (const { outputs, elements } of row) {
			for (const element of allElements(elements, size)) {
				let [least, trace] = [0, 0];
				for (const value of hermitianEigen(element, size).values) {
					least = Math.min(least, value);
					trace += 2 * Math.abs(value);
				}
				const factorised = 1.1 * (doubled + 1) * UNIT_ROUNDOFF * (trace + 1e-9);
				const needed = 8 * size * UNIT_ROUNDOFF - least + factorised;
				let shift = 1e-15 * doubled;
				while (shift < needed) shift *= 10;
				const formed = 4 * size * outputs * UNIT_ROUNDOFF;
				worst = Math.max(worst, outputs * (shift + factorised + formed));
			}
		}
	});
	return worst;
}

function projectiveProbabilities(strategy: SeeSawStrategy): (events: readonly Event[]) => number {
	const { factors, measurements, real } = strategy;
	const known = new Map<string, ComplexArray>();
	const inBases = (events: readonly Event[]): ComplexArray => {
		const key = events.map(([party, input]) => `${party}.${input}`).join(' ');
		const before = known.get(key);
		if (before) return before;
		let vector = strategy.state;
		for (const [party, input] of events) {
			const factor = factors[party];
			const measurement = measurements[party]?.[input];
			if (!factor || !measurement) continue;
			const out = complexZeros(vector.re.length, real);
			applyToFactor(conjugate(measurement.basis), factor, vector, out);
			vector = out;
		}
		known.set(key, vector);
		return vector;
	};
	return (events) => {
		if (events.length === 0) return 1;
		const { re, im } = inBases(events);
		let sum = 0;
		for (let i = 0; i < re.length; i++) {
			const belongs = events.every(([party, input, output]) => {
				const factor = factors[party];
				if (!factor) return false;
				const at = Math.floor(i / factor.right) % factor.size;
				return measurements[party]?.[input]?.labels[at] === output;
			});
			if (belongs) sum += (re[i] ?? 0) ** 2 + (im ? (im[i] ?? 0) ** 2 : 0);
		}
		return sum;
	};
}

function conjugate(matrix: ComplexArray): ComplexArray {
	const copy = copyComplex(matrix);
	if (copy.im) for (let i = 0; i < copy.im.length; i++) copy.im[i] = -(copy.im[i] ?? 0);
	return copy;
}

function elementProbabilities(strategy: SeeSawStrategy): (events: readonly Event[]) => number {
	const { factors, state, real } = strategy;
	const elements = strategy.measurements.map((row, party) =>
		row.map((measurement) => allElements(measurement.elements, strategy.dimensions[party] ?? 1))
	);
	return (events) => {
		let vector = state;
		for (const [party, input, output] of events) {
			const factor = factors[party];
			const element = elements[party]?.[input]?.[output];
			if (!factor || !element) continue;
			const out = complexZeros(state.re.length, real);
			applyToFactor(element, factor, vector, out);
			vector = out;
		}
		return events.length === 0 ? 1 : realDot(state, vector);
	};
}

/** Copies of the elements, with the last one: 1 minus the others. */
export function allElements(elements: readonly ComplexArray[], size: number): ComplexArray[] {
	const real = elements.every(({ im }) => im === null);
	const last = complexZeros(size * size, real);
	for (let i = 0; i < size; i++) last.re[i * size + i] = 1;
	for (const { re, im } of elements) {
		for (let i = 0; i < re.length; i++) {
			last.re[i] = (last.re[i] ?? 0) - (re[i] ?? 0);
			if (last.im && im) last.im[i] = (last.im[i] ?? 0) - (im[i] ?? 0);
		}
	}
	return [...elements.map(copyComplex), last];
}

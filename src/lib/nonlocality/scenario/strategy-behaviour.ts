import { COEFFICIENT_ONE, realCoefficient } from '../exact/coefficient';
import type { ComplexMatrix, ComplexNumber, QuantumStrategy } from '../problem';
import type { Behaviour } from './behaviour';
import type { Event, Scenario } from './scenario';

/** How far elements may be from Hermitian and from summing to 1, and the state from length 1. */
const STRATEGY_TOLERANCE = 1e-9;
/** Entries of the state. */
const STATE_LIMIT = 4096;

/**
 * The behaviour of a pure state and measurements: P(a|x) = <psi| tensor of E_a|x |psi> / <psi|psi>,
 * in doubles. Numerical: positivity of the elements is not proved here.
 * @throws RangeError naming the first part that does not fit.
 */
export function behaviourOfStrategy(scenario: Scenario, strategy: QuantumStrategy): Behaviour {
	const defect = strategyDefect(scenario, strategy);
	if (defect) throw new RangeError(defect);
	const { dimensions, state } = strategy;
	const norm = state.reduce((sum, [re, im]) => sum + re * re + im * im, 0);
	const operations = 8 * state.length * (dimensions.reduce((sum, d) => sum + d, 0) + 4);
	return {
		scenario,
		probability(events) {
			if (events.length === 0) return COEFFICIENT_ONE;
			let vector = state;
			for (const event of events) vector = applyElement(strategy, event, vector);
			const value =
				vector.reduce((sum, [re, im], i) => {
					const [r, s] = state[i] ?? [0, 0];
					return sum + re * r + im * s;
				}, 0) / norm;
			// First-order rounding of all products and sums, each of size at most 1.
			const error = operations * 2 ** -53;
			return realCoefficient(value, error, String(value));
		}
	};
}

function applyElement(
	{ dimensions, measurements }: QuantumStrategy,
	[party, input, output]: Event,
	vector: readonly ComplexNumber[]
): ComplexNumber[] {
	const element = measurements[party]?.[input]?.[output] ?? [];
	const size = dimensions[party] ?? 1;
	const right = dimensions.slice(party + 1).reduce((product, d) => product * d, 1);
	return vector.map((_, i) => {
		const row = Math.floor(i / right) % size;
		let [re, im] = [0, 0];
		for (let k = 0; k < size; k++) {
			const [a, b] = element[row]?.[k] ?? [0, 0];
			const [c, d] = vector[i + (k - row) * right] ?? [0, 0];
			re += a * c - b * d;
			im += a * d + b * c;
		}
		return [re, im];
	});
}

/** What keeps this from being a strategy for the scenario, in words; null for nothing. */
export function strategyDefect(scenario: Scenario, strategy: QuantumStrategy): string | null {
	const { dimensions, state, measurements } = strategy;
	const parties = scenario.outputs.length;
	if (dimensions.length !== parties || dimensions.some((d) => !Number.isInteger(d) || d < 1))
		return `the strategy needs ${parties} dimensions, whole numbers of at least 1`;
	const total = dimensions.reduce((product, d) => product * d, 1);
	if (total > STATE_LIMIT) return `a state of ${total} entries is past the limit of ${STATE_LIMIT}`;
	if (state.length !== total) return `the state has ${state.length} entries, not ${total}`;
	const norm = state.reduce((sum, [re, im]) => sum + re * re + im * im, 0);
	if (!(Math.abs(norm - 1) <= STRATEGY_TOLERANCE))
		return `the state has squared length ${norm}, not 1`;
	for (const [p, counts] of scenario.outputs.entries()) {
		for (const [x, count] of counts.entries()) {
			const place = `party ${p}, input ${x}`;
			const elements = measurements[p]?.[x];
			if (elements?.length !== count) return `${place}: ${count} measurement elements are needed`;
			const defect = elementsDefect(elements, dimensions[p] ?? 1);
			if (defect) return `${place}: ${defect}`;
		}
	}
	return null;
}

function elementsDefect(elements: readonly ComplexMatrix[], size: number): string | null {
	for (const element of elements) {
		if (element.length !== size || element.some((row) => row.length !== size))
			return `an element is no ${size} x ${size} matrix`;
	}
	for (let i = 0; i < size; i++) {
		for (let j = 0; j < size; j++) {
			let [re, im] = [i === j ? -1 : 0, 0];
			for (const element of elements) {
				const [a, b] = element[i]?.[j] ?? [NaN, NaN];
				const [c, d] = element[j]?.[i] ?? [NaN, NaN];
				if (!(Math.abs(a - c) + Math.abs(b + d) <= STRATEGY_TOLERANCE))
					return 'an element is not Hermitian';
				if (i === j && !(a >= -STRATEGY_TOLERANCE)) return 'an element is not positive';
				re += a;
				im += b;
			}
			if (!(Math.abs(re) + Math.abs(im) <= STRATEGY_TOLERANCE))
				return 'the elements do not sum to the identity';
		}
	}
	return null;
}

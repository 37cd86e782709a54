/** Probabilities of a strategy, from the definition; the roundings are bounded by the caller. */
import type { Event } from '../scenario/scenario';
import type { Entries, ReadStrategy } from './strategy-shape';

function strideOf(dimensions: readonly number[], party: number): number {
	return dimensions.slice(party + 1).reduce((product, d) => product * d, 1);
}

/** (matrix on one party) vector; the matrix may be conjugated. */
function act(
	matrix: Entries,
	conjugated: boolean,
	dimensions: readonly number[],
	party: number,
	vector: Entries
): Entries {
	const size = dimensions[party] ?? 1;
	const stride = strideOf(dimensions, party);
	const sign = conjugated ? -1 : 1;
	const length = vector.re.length;
	const out = { re: new Float64Array(length), im: new Float64Array(length) };
	for (let at = 0; at < length; at++) {
		const row = Math.floor(at / stride) % size;
		const first = at - row * stride;
		let re = 0;
		let im = 0;
		for (let j = 0; j < size; j++) {
			const a = matrix.re[row * size + j] ?? 0;
			const b = sign * (matrix.im[row * size + j] ?? 0);
			const c = vector.re[first + j * stride] ?? 0;
			const d = vector.im[first + j * stride] ?? 0;
			re += a * c - b * d;
			im += a * d + b * c;
		}
		out.re[at] = re;
		out.im[at] = im;
	}
	return out;
}

export function squaredLength({ re, im }: Entries): number {
	let sum = 0;
	for (let i = 0; i < re.length; i++) sum += (re[i] ?? 0) ** 2 + (im[i] ?? 0) ** 2;
	return sum;
}

/**
 * Probabilities of a projective strategy: the state is written in the output bases once per tuple
 * of inputs; P is the share of its squared length that belongs to the outputs.
 */
export function projectiveProbabilities(
	strategy: ReadStrategy
): (events: readonly Event[]) => number {
	const { dimensions, state, measurements } = strategy;
	const whole = squaredLength(state);
	const known = new Map<string, Entries>();
	const inBases = (events: readonly Event[]): Entries => {
		const key = events.map(([party, input]) => `${party}.${input}`).join(' ');
		const before = known.get(key);
		if (before) return before;
		let vector = state;
		for (const [party, input] of events) {
			const basis = measurements[party]?.[input]?.basis;
			if (basis) vector = act(basis, true, dimensions, party, vector);
		}
		known.set(key, vector);
		return vector;
	};
	return (events) => {
		if (events.length === 0) return 1;
		const { re, im } = inBases(events);
		const wanted = events.map(([party, input, output]) => ({
			stride: strideOf(dimensions, party),
			size: dimensions[party] ?? 1,
			labels: measurements[party]?.[input]?.labels ?? [],
			output
		}));
		let sum = 0;
		for (let at = 0; at < re.length; at++) {
			const belongs = wanted.every(
				({ stride, size, labels, output }) => labels[Math.floor(at / stride) % size] === output
			);
			if (belongs) sum += (re[at] ?? 0) ** 2 + (im[at] ?? 0) ** 2;
		}
		return sum / whole;
	};
}

/** <psi| (x) E |psi> / <psi|psi> for general elements `elements[party][input][output]`. */
export function generalProbabilities(
	{ dimensions, state }: ReadStrategy,
	elements: readonly (readonly (readonly Entries[])[])[]
): (events: readonly Event[]) => number {
	const whole = squaredLength(state);
	return (events) => {
		if (events.length === 0) return 1;
		let vector = state;
		for (const [party, input, output] of events) {
			const element = elements[party]?.[input]?.[output];
			if (element) vector = act(element, false, dimensions, party, vector);
		}
		let sum = 0;
		for (let at = 0; at < state.re.length; at++)
			sum +=
				(state.re[at] ?? 0) * (vector.re[at] ?? 0) + (state.im[at] ?? 0) * (vector.im[at] ?? 0);
		return sum / whole;
	};
}

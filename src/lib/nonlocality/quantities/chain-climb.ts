import type { ChainFunctional, ChainMeasurement, ChainStrategy } from './chain-strategy';

/** Power steps towards the top of the state's matrix in each iteration. */
const POWER_STEPS = 8;
/** Gains are looked at once in so many iterations: single ones are too small to tell from rounding. */
const LOOK_EVERY = 50;
/** A climb is given up when so many times its last gain would not reach the best value known. */
const OPTIMISM = 20;
const MAX_ITERATIONS = 40_000;

/**
 * Alternating maximisation within chain form, in place: each measurement is set to the projector on
 * the positive part of its operator's blocks (the optimum among those of its form), then the state
 * moves towards the top of its matrix by power steps. The value never falls.
 * @param tolerance gain of 50 iterations at which the climb ends
 * @returns the value reached
 */
export function climbChain(
	functional: ChainFunctional,
	chain: ChainStrategy,
	{ best, tolerance, poll }: { best: number; tolerance: number; poll: () => void }
): number {
	const size = chain.dimension;
	const matrix = { diagonal: new Float64Array(size), off: new Float64Array(size) };
	normalise(chain.state);
	let before = -Infinity;
	for (let iteration = 1; iteration <= MAX_ITERATIONS; iteration++) {
		if (iteration % 10 === 0) poll();
		chain.measurements.forEach((row, party) => {
			row.forEach((measurement, input) => {
				improveMeasurement(functional, chain, party, input, measurement);
			});
		});
		fillStateMatrix(functional, chain, matrix);
		improveState(matrix, chain.state);
		if (iteration % LOOK_EVERY > 0) continue;
		const value = functional.constant + quadraticForm(matrix, chain.state);
		const gain = value - before;
		before = value;
		if (gain <= tolerance || value + OPTIMISM * gain < best) break;
	}
	return before;
}

interface Tridiagonal {
	readonly diagonal: Float64Array;
	readonly off: Float64Array;
}

function weightOf({ outputs, joint }: ChainFunctional, party: number, own: number, other: number) {
	const columns = outputs[1]?.length ?? 0;
	return joint[party === 0 ? own * columns + other : other * columns + own] ?? 0;
}

function improveMeasurement(
	functional: ChainFunctional,
	{ dimension: size, state, measurements }: ChainStrategy,
	party: number,
	input: number,
	{ first, diagonal, off }: ChainMeasurement
) {
	const others = measurements[1 - party] ?? [];
	const weights = others.map((_, other) => weightOf(functional, party, input, other));
	const marginal = functional.marginals[party]?.[input] ?? 0;
	const force = (i: number) => {
		let sum = marginal;
		for (let k = 0; k < weights.length; k++)
			sum += (weights[k] ?? 0) * (others[k]?.diagonal[i] ?? 0);
		return sum * (state[i] ?? 0) ** 2;
	};
	const coupling = (i: number) => {
		let sum = 0;
		for (let k = 0; k < weights.length; k++) sum += (weights[k] ?? 0) * (others[k]?.off[i] ?? 0);
		return sum * (state[i] ?? 0) * (state[i + 1] ?? 0);
	};
	for (let i = 0; i < size; i++) {
		const p = force(i);
		off[i] = 0;
		diagonal[i] = p > 0 ? 1 : 0;
		if (i < first || (i - first) % 2 !== 0 || i + 1 >= size) continue;
		const q = force(i + 1);
		const r = coupling(i);
		const middle = (p + q) / 2;
		const radius = Math.hypot((p - q) / 2, r);
		i++;
		off[i] = 0;
		if (Math.abs(middle) >= radius) {
			// both eigenvalues have one sign: the whole block or nothing
			diagonal[i - 1] = middle > 0 ? 1 : 0;
			diagonal[i] = middle > 0 ? 1 : 0;
			continue;
		}
		const cosine = (p - q) / 2 / radius;
		diagonal[i - 1] = (1 + cosine) / 2;
		diagonal[i] = (1 - cosine) / 2;
		off[i - 1] = r / radius / 2;
	}
}

/** M with value = constant + s^T M s. */
function fillStateMatrix(functional: ChainFunctional, chain: ChainStrategy, out: Tridiagonal) {
	const [rows = [], columns = []] = chain.measurements;
	const { marginals, joint } = functional;
	for (let i = 0; i < chain.dimension; i++) {
		let diagonal = 0;
		let off = 0;
		for (let x = 0; x < rows.length; x++) {
			const own = rows[x];
			const [d, o] = [own?.diagonal[i] ?? 0, own?.off[i] ?? 0];
			diagonal += (marginals[0][x] ?? 0) * d;
			for (let y = 0; y < columns.length; y++) {
				const weight = joint[x * columns.length + y] ?? 0;
				diagonal += weight * d * (columns[y]?.diagonal[i] ?? 0);
				off += weight * o * (columns[y]?.off[i] ?? 0);
			}
		}
		for (let y = 0; y < columns.length; y++)
			diagonal += (marginals[1][y] ?? 0) * (columns[y]?.diagonal[i] ?? 0);
		out.diagonal[i] = diagonal;
		out.off[i] = off;
	}
}

/** Power steps on M + shift >= 0 (Gershgorin): they never lower the quotient s^T M s / s^T s. */
function improveState({ diagonal, off }: Tridiagonal, state: Float64Array) {
	let shift = 0;
	for (let i = 0; i < state.length; i++)
		shift = Math.max(
			shift,
			Math.abs(off[i] ?? 0) + Math.abs(i > 0 ? (off[i - 1] ?? 0) : 0) - (diagonal[i] ?? 0)
		);
	for (let step = 0; step < POWER_STEPS; step++) {
		let previous = 0;
		for (let i = 0; i < state.length; i++) {
			const own = state[i] ?? 0;
			let sum = ((diagonal[i] ?? 0) + shift) * own;
			if (i > 0) sum += (off[i - 1] ?? 0) * previous;
			sum += (off[i] ?? 0) * (state[i + 1] ?? 0);
			previous = own;
			state[i] = sum;
		}
		normalise(state);
	}
}

function quadraticForm({ diagonal, off }: Tridiagonal, state: Float64Array): number {
	let sum = 0;
	for (let i = 0; i < state.length; i++)
		sum +=
			(diagonal[i] ?? 0) * (state[i] ?? 0) ** 2 +
			2 * (off[i] ?? 0) * (state[i] ?? 0) * (state[i + 1] ?? 0);
	return sum;
}

function normalise(state: Float64Array) {
	let square = 0;
	for (const entry of state) square += entry * entry;
	if (square === 0) return; // M + shift = 0: every state is as good
	const scale = 1 / Math.sqrt(square);
	for (let i = 0; i < state.length; i++) state[i] = (state[i] ?? 0) * scale;
}

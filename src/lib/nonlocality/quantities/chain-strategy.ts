import { scaleComplex, squaredNorm } from '../linalg/complex-dense';
import type { SeededRandom } from '../linalg/seeded-random';
import { collinsGisinForm, type Functional } from '../scenario/functional';
import { randomStrategy, updateElements, type SeeSawStrategy } from './see-saw-strategy';

/** A two-party two-outcome functional: constant + a.P_A + b.P_B + sum_xy c_xy P(00|xy). */
export interface ChainFunctional {
	readonly outputs: readonly (readonly number[])[];
	readonly constant: number;
	/** `marginals[party][input]`. */
	readonly marginals: readonly [Float64Array, Float64Array];
	/** `joint[x * inputs of party 1 + y]`. */
	readonly joint: Float64Array;
}

/** The projector of output 0: 2 x 2 blocks on neighbours from `first` on, the rest diagonal. */
export interface ChainMeasurement {
	readonly first: 0 | 1;
	readonly diagonal: Float64Array;
	/** Entry [i][i+1]. */
	readonly off: Float64Array;
}

/**
 * A real strategy in chain form: state sum_i s_i |ii>, every projector of blocks of at most 2 x 2.
 * Its value is s^T M s with M tridiagonal, so that a step costs the dimension, not its cube. Two
 * projectors always have such a form in common (Jordan's lemma); the best strategies known for
 * I3322 have it for all three, the blocks of its inputs beginning at 0 or 1.
 * @see Pal and Vertesi, Phys. Rev. A 82, 022116 (2010)
 */
export interface ChainStrategy {
	readonly dimension: number;
	readonly state: Float64Array;
	/** `measurements[party][input]`. */
	readonly measurements: readonly (readonly ChainMeasurement[])[];
}

/** Null unless there are two parties and every input has two outputs. */
export function chainFunctional(g: Functional): ChainFunctional | null {
	const { outputs } = g.scenario;
	const [own, other] = outputs;
	if (!own || !other || outputs.length !== 2 || outputs.flat().some((count) => count !== 2))
		return null;
	const marginals = [new Float64Array(own.length), new Float64Array(other.length)] as const;
	const joint = new Float64Array(own.length * other.length);
	let constant = 0;
	for (const { coefficient, events } of collinsGisinForm(g).terms) {
		const [first, second] = events;
		const { value } = coefficient;
		if (!first) constant += value;
		else if (!second) {
			const of = marginals[first[0] === 0 ? 0 : 1];
			of[first[1]] = (of[first[1]] ?? 0) + value;
		} else {
			const [x, y] = first[0] === 0 ? [first[1], second[1]] : [second[1], first[1]];
			joint[x * other.length + y] = (joint[x * other.length + y] ?? 0) + value;
		}
	}
	return { outputs, constant, marginals, joint };
}

/** How far the blocks' angles scatter about those of their input: more breaks the chain up. */
const SCATTER = 0.1;

/**
 * A random start: each input's blocks begin where the pattern says and turn by about the same
 * angle, the state decays along the chain.
 * @param pattern bit p of it: whether input p (party 0's first) begins its blocks at 1
 */
export function randomChain(
	{ outputs }: ChainFunctional,
	dimension: number,
	pattern: number,
	random: SeededRandom
): ChainStrategy {
	let bit = 0;
	const measurements = outputs.map((inputs) =>
		inputs.map((): ChainMeasurement => {
			const first = (pattern >> bit++) & 1 ? 1 : 0;
			const diagonal = Float64Array.from({ length: dimension }, () => random.integer(2));
			const off = new Float64Array(dimension);
			const common = Math.PI * random.uniform();
			for (let i: number = first; i + 1 < dimension; i += 2) {
				const angle = common + SCATTER * (random.uniform() - 0.5);
				diagonal[i] = Math.cos(angle) ** 2;
				diagonal[i + 1] = Math.sin(angle) ** 2;
				off[i] = Math.cos(angle) * Math.sin(angle);
			}
			return { first, diagonal, off };
		})
	);
	const decay = 0.5 + 0.45 * random.uniform();
	const state = Float64Array.from({ length: dimension }, (_, i) => decay ** Math.ceil(i / 2));
	return { dimension, state, measurements };
}

/** The same strategy as matrices on the whole space. */
export function expandChain(
	{ outputs }: ChainFunctional,
	chain: ChainStrategy,
	random: SeededRandom
): SeeSawStrategy {
	const size = chain.dimension;
	const strategy = randomStrategy(outputs, [size, size], { real: true, general: false }, random);
	strategy.state.re.fill(0);
	chain.state.forEach((entry, i) => (strategy.state.re[i * size + i] = entry));
	scaleComplex(strategy.state, 1 / Math.sqrt(squaredNorm(strategy.state)));
	strategy.measurements.forEach((row, party) => {
		row.forEach((measurement, input) => {
			const source = chain.measurements[party]?.[input];
			if (!source) return;
			const { re } = measurement.basis;
			re.fill(0);
			for (let i = 0; i < size; i++) {
				re[i * size + i] = 1;
				measurement.labels[i] = (source.diagonal[i] ?? 0) > 0.5 ? 0 : 1;
			}
			for (let i: number = source.first; i + 1 < size; i += 2) {
				const [p, q, r] = [
					source.diagonal[i] ?? 0,
					source.diagonal[i + 1] ?? 0,
					source.off[i] ?? 0
				];
				if (r === 0) continue;
				// the projector's own vector (cos t, sin t), and the one across
				const angle = Math.atan2(2 * r, p - q) / 2;
				const [upper, lower] = [i * size + i, (i + 1) * size + i];
				re[upper] = Math.cos(angle);
				re[upper + 1] = Math.sin(angle);
				re[lower] = -Math.sin(angle);
				re[lower + 1] = Math.cos(angle);
				measurement.labels.set([0, 1], i);
			}
			updateElements(measurement, size);
		});
	});
	return strategy;
}

import {
	complexZeros,
	scaleComplex,
	squaredNorm,
	type ComplexArray
} from '../linalg/complex-dense';
import { SolverStop, type ProblemOf } from '../problem';

/**
 * The state that a problem prescribes, normalised; null when it may move.
 * `maximally-entangled` is sum_i |ii> / sqrt(d) for two parties, d the smaller dimension.
 * @throws SolverStop `failed` when the vector does not fit the dimensions
 */
export function fixedState(
	state: ProblemOf<'see-saw'>['state'],
	dimensions: readonly number[]
): ComplexArray | null {
	if (state === 'free') return null;
	const total = dimensions.reduce((product, d) => product * d, 1);
	if (state === 'maximally-entangled') {
		const [first = 1, second = 1] = dimensions;
		if (dimensions.length !== 2)
			throw new SolverStop(
				'failed',
				'state: "maximally-entangled" is for two parties; give the vector for more'
			);
		const vector = complexZeros(total, true);
		const rank = Math.min(first, second);
		for (let i = 0; i < rank; i++) vector.re[i * second + i] = 1 / Math.sqrt(rank);
		return vector;
	}
	if (state.length !== total)
		throw new SolverStop(
			'failed',
			`state: ${state.length} entries where the dimensions ${dimensions.join(' x ')} need ${total}`
		);
	const vector = complexZeros(
		total,
		state.every(([, im]) => im === 0)
	);
	state.forEach(([re, im], i) => {
		vector.re[i] = re;
		if (vector.im) vector.im[i] = im;
	});
	const norm = Math.sqrt(squaredNorm(vector));
	if (!(norm > 0 && norm < Infinity))
		throw new SolverStop('failed', 'state: the vector must be finite and not zero');
	scaleComplex(vector, 1 / norm);
	return vector;
}

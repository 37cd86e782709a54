import { ratio, type Rational } from '../exact/rational';
import { SolverStop } from '../problem';
import type { NoSignallingRows } from './no-signalling-rows';

/** Rays kept at any time: the pairs of them are looked at for every inequality. */
export const RAY_LIMIT = 6_000;

/** A ray (t, y) of the cone over the polytope, in integers without common divisor. */
interface Ray {
	readonly entries: Float64Array;
	/** One bit per inequality that is met with equality, 32 a word. */
	readonly zeros: Int32Array;
}

/**
 * All vertices of a no-signalling polytope, as Collins-Gisin coordinates, by the double description
 * method: the inequalities y >= 0 (probabilities and marginals) and t >= 0 give a first cone, the
 * others cut it one after another. Integers in doubles, exact below 2^53.
 * @throws SolverStop `limit` beyond 6,000 rays
 * @see Fukuda and Prodon, Double description method revisited, LNCS 1120, 91 (1996)
 */
export function polytopeVertices(polytope: NoSignallingRows, tick: () => void): Rational[][] {
	const size = polytope.columns.length + 1;
	const cuts = polytope.rows.filter(
		({ entries, constant }) => entries.length > 1 || constant !== 0
	);
	const words = Math.ceil((size + cuts.length) / 32);
	let rays: Ray[] = Array.from({ length: size }, (_, i) => {
		const entries = new Float64Array(size);
		entries[i] = 1;
		const zeros = new Int32Array(words);
		for (let j = 0; j < size; j++) if (j !== i) setBit(zeros, j);
		return { entries, zeros };
	});
	cuts.forEach((row, k) => {
		const values = rays.map(({ entries }) =>
			row.entries.reduce(
				(sum, [column, value]) => sum + value * (entries[column + 1] ?? 0),
				row.constant * (entries[0] ?? 0)
			)
		);
		const made = newRays(rays, values, size, tick);
		for (const [i, ray] of rays.entries()) if (values[i] === 0) setBit(ray.zeros, size + k);
		for (const ray of made) setBit(ray.zeros, size + k);
		rays = [...rays.filter((_, i) => (values[i] ?? 0) >= 0), ...made];
		if (rays.length > RAY_LIMIT)
			throw new SolverStop(
				'limit',
				`the no-signalling polytope of one group has more than ${RAY_LIMIT} vertices, too many to list`
			);
	});
	return rays.map(({ entries }) => {
		const scale = BigInt(entries[0] ?? 0); // not 0: the polytope is bounded
		return Array.from(entries.subarray(1), (y) => ratio(BigInt(y), scale));
	});
}

/** Where an edge of the cone crosses the cut: one ray for each adjacent pair on its two sides. */
function newRays(
	rays: readonly Ray[],
	values: readonly number[],
	size: number,
	tick: () => void
): Ray[] {
	const made: Ray[] = [];
	for (const [i, inside] of rays.entries()) {
		const above = values[i] ?? 0;
		if (above <= 0) continue;
		tick();
		for (const [j, outside] of rays.entries()) {
			const below = values[j] ?? 0;
			if (below >= 0) continue;
			const shared = inside.zeros.map((word, w) => word & (outside.zeros[w] ?? 0));
			if (countBits(shared) < size - 2) continue;
			const between = rays.some(
				({ zeros }, k) =>
					k !== i && k !== j && shared.every((word, w) => (word & ~(zeros[w] ?? 0)) === 0)
			);
			if (between) continue;
			const entries = inside.entries.map((x, e) => above * (outside.entries[e] ?? 0) - below * x);
			made.push({ entries: reduced(entries), zeros: shared });
		}
	}
	return made;
}

function setBit(bits: Int32Array, index: number): void {
	const word = index >> 5;
	bits[word] = (bits[word] ?? 0) | (1 << (index & 31));
}

function countBits(bits: Int32Array): number {
	let count = 0;
	for (let word of bits) for (; word !== 0; word &= word - 1) count++;
	return count;
}

/** Divided by the greatest common divisor. */
function reduced(entries: Float64Array): Float64Array {
	let divisor = 0;
	for (let b of entries) {
		if (Math.abs(b) > Number.MAX_SAFE_INTEGER)
			throw new SolverStop('limit', 'the vertices of one group have numbers beyond 2^53');
		for (b = Math.abs(b); b !== 0;) [divisor, b] = [b, divisor % b];
	}
	return entries.map((x) => x / divisor);
}

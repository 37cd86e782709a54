import { hermitianEigen } from '../linalg/hermitian-eigen';
import { seededRandom } from '../linalg/seeded-random';
import type { RelabellingAction } from './relabelling-action';
import { moveVector, type WordOrbit } from './word-orbits';

/** A space of vectors on one orbit that the group maps to itself, by an orthonormal basis. */
export interface InvariantSubspace {
	readonly orbit: WordOrbit;
	readonly vectors: readonly Float64Array[];
}

/** Eigenvalues of a random matrix closer than this (relative) count as one. */
const SAME_EIGENVALUE = 1e-8;
const SEED = 40487;

/**
 * Splits the space of an orbit into invariant subspaces: the eigenspaces of a random matrix that
 * commutes with the group (Murota, Kanno, Kojima, Kojima, Jpn. J. Ind. Appl. Math. 27, 125 (2010)).
 * With probability 1 none of them can be split further. Eigenvectors carry rounding errors over the
 * gap of their eigenvalues; averaging each projector over the group takes these out again.
 */
export function invariantSubspaces(
	action: RelabellingAction,
	orbit: WordOrbit,
	attempt: number
): InvariantSubspace[] {
	const size = orbit.words.length;
	const random = seededRandom(SEED + attempt, size);
	const largest = Math.max(...orbit.patterns.map(({ from, to }) => to - from));
	// Enough vectors for full rank: the group alone spans at most one pattern's share of each.
	const sources = Array.from({ length: largest + 2 }, () =>
		Float64Array.from({ length: size }, () => random.normal())
	);
	const matrix = averagedProjector(action, orbit, sources);
	const { values, vectors } = hermitianEigen({ re: matrix, im: null }, size);
	const order = [...values.keys()].sort((a, b) => (values[a] ?? 0) - (values[b] ?? 0));
	const scale = Math.max(...values.map(Math.abs));
	const groups: Float64Array[][] = [];
	let previous = -Infinity;
	for (const k of order) {
		const value = values[k] ?? 0;
		const vector = vectors.re.slice(k * size, (k + 1) * size);
		if (value - previous <= SAME_EIGENVALUE * scale) groups.at(-1)?.push(vector);
		else groups.push([vector]);
		previous = value;
	}
	const done: Float64Array[] = [];
	return groups.map((group) => {
		const projector = averagedProjector(action, orbit, group);
		const cleaned = group.map((vector) => {
			let current = vector;
			for (let pass = 0; pass < 2; pass++) {
				current = product(projector, current);
				orthonormalise(current, []);
			}
			return current;
		});
		for (const vector of cleaned) {
			orthonormalise(vector, done);
			done.push(vector);
		}
		return { orbit, vectors: cleaned };
	});
}

/** The mean over the group of sum_v v v^T. */
function averagedProjector(
	action: RelabellingAction,
	orbit: WordOrbit,
	vectors: readonly Float64Array[]
): Float64Array {
	const size = orbit.words.length;
	const matrix = new Float64Array(size * size);
	const image = new Float64Array(size);
	for (const vector of vectors) {
		for (let g = 0; g < action.order; g++) {
			moveVector(action, orbit, g, vector, image);
			for (let i = 0; i < size; i++) {
				const factor = (image[i] ?? 0) / action.order;
				if (factor === 0) continue;
				const row = i * size;
				for (let j = 0; j <= i; j++)
					matrix[row + j] = (matrix[row + j] ?? 0) + factor * (image[j] ?? 0);
			}
		}
	}
	for (let i = 0; i < size; i++)
		for (let j = 0; j < i; j++) matrix[j * size + i] = matrix[i * size + j] ?? 0;
	return matrix;
}

function product(matrix: Float64Array, vector: Float64Array): Float64Array {
	const n = vector.length;
	return vector.map((_, i) => {
		let sum = 0;
		for (let j = 0; j < n; j++) sum += (matrix[i * n + j] ?? 0) * (vector[j] ?? 0);
		return sum;
	});
}

/** Twice, since once loses digits when little is left. */
export function orthonormalise(vector: Float64Array, others: readonly Float64Array[]): void {
	for (let pass = 0; pass < 2; pass++) {
		for (const other of others) {
			let along = 0;
			for (let i = 0; i < vector.length; i++) along += (vector[i] ?? 0) * (other[i] ?? 0);
			for (let i = 0; i < vector.length; i++)
				vector[i] = (vector[i] ?? 0) - along * (other[i] ?? 0);
		}
		const norm = Math.hypot(...vector);
		for (let i = 0; i < vector.length; i++) vector[i] = (vector[i] ?? 0) / norm;
	}
}

import { hermitianEigen } from '../linalg/hermitian-eigen';
import { seededRandom } from '../linalg/seeded-random';
import type { RelabellingAction } from './relabelling-action';
import { moveVectors, type WordOrbit } from './word-orbits';

/** Eigenvalues of a random matrix closer than this (relative) count as one. */
const SAME_EIGENVALUE = 1e-8;
const SEED = 40487;

/**
 * Splits the space of an orbit into subspaces that the group maps to themselves, each given by
 * orthonormal vectors: the eigenspaces of a random matrix that commutes with the group (Murota,
 * Kanno, Kojima, Kojima, Jpn. J. Ind. Appl. Math. 27, 125 (2010)). With probability 1 none can be
 * split further.
 */
export function invariantSubspaces(
	action: RelabellingAction,
	orbit: WordOrbit,
	attempt: number,
	poll: () => void
): Float64Array[][] {
	const n = orbit.words.length;
	const matrix = randomInvariantMatrix(action, orbit, attempt, poll);
	const { values, vectors } = hermitianEigen({ re: matrix, im: null }, n);
	const order = [...values.keys()].sort((a, b) => (values[a] ?? 0) - (values[b] ?? 0));
	const scale = values.reduce((most, value) => Math.max(most, Math.abs(value)), 0);
	const groups: number[][] = [];
	order.forEach((k, at) => {
		const gap = (values[k] ?? 0) - (values[order[at - 1] ?? k] ?? 0);
		if (at > 0 && gap <= SAME_EIGENVALUE * scale) groups.at(-1)?.push(at);
		else groups.push([at]);
	});
	const sorted = new Float64Array(n * n);
	order.forEach((k, at) => {
		for (let i = 0; i < n; i++) sorted[i * n + at] = vectors.re[k * n + i] ?? 0;
	});
	const cleaned = cleanedVectors(action, orbit, sorted, groups, poll);
	const done: Float64Array[] = [];
	return groups.map((group) =>
		group.map((column) => {
			const vector = Float64Array.from({ length: n }, (_, i) => cleaned[i * n + column] ?? 0);
			orthonormalise(vector, done);
			done.push(vector);
			return vector;
		})
	);
}

/** The mean over the group of S S^T for random S. */
function randomInvariantMatrix(
	action: RelabellingAction,
	orbit: WordOrbit,
	attempt: number,
	poll: () => void
): Float64Array {
	const n = orbit.words.length;
	const random = seededRandom(SEED + attempt, n);
	// Enough columns for full rank: the group alone spans at most one pattern's share of each.
	const columns = 2 + orbit.patterns.reduce((most, { from, to }) => Math.max(most, to - from), 0);
	const sources = Float64Array.from({ length: n * columns }, () => random.normal());
	const images = new Float64Array(n * columns);
	const matrix = new Float64Array(n * n);
	for (let g = 0; g < action.order; g++) {
		poll();
		moveVectors(action, orbit, g, sources, columns, images);
		for (let i = 0; i < n; i++) {
			for (let j = 0; j <= i; j++) {
				let sum = 0;
				for (let c = 0; c < columns; c++)
					sum += (images[i * columns + c] ?? 0) * (images[j * columns + c] ?? 0);
				matrix[i * n + j] = (matrix[i * n + j] ?? 0) + sum / action.order;
			}
		}
	}
	for (let i = 0; i < n; i++)
		for (let j = 0; j < i; j++) matrix[j * n + i] = matrix[i * n + j] ?? 0;
	return matrix;
}

/**
 * Eigenvectors carry rounding errors over the gap of their eigenvalues. The mean over the group of
 * an eigenspace's projector commutes with the group and has eigenvalues near 1 and 0 only: applied
 * to the eigenvectors it takes those errors out.
 */
function cleanedVectors(
	action: RelabellingAction,
	orbit: WordOrbit,
	vectors: Float64Array,
	groups: readonly (readonly number[])[],
	poll: () => void
): Float64Array {
	const n = orbit.words.length;
	const images = new Float64Array(n * n);
	const cleaned = new Float64Array(n * n);
	for (let g = 0; g < action.order; g++) {
		poll();
		moveVectors(action, orbit, g, vectors, n, images);
		for (const group of groups)
			for (const column of group)
				for (const other of group) {
					let along = 0;
					for (let i = 0; i < n; i++)
						along += (images[i * n + other] ?? 0) * (vectors[i * n + column] ?? 0);
					along /= action.order;
					for (let i = 0; i < n; i++)
						cleaned[i * n + column] =
							(cleaned[i * n + column] ?? 0) + along * (images[i * n + other] ?? 0);
				}
	}
	return cleaned;
}

/** Twice, since once loses digits when little is left. */
function orthonormalise(vector: Float64Array, others: readonly Float64Array[]): void {
	for (let pass = 0; pass < 2; pass++) {
		for (const other of others) {
			let along = 0;
			for (let i = 0; i < vector.length; i++) along += (vector[i] ?? 0) * (other[i] ?? 0);
			for (let i = 0; i < vector.length; i++)
				vector[i] = (vector[i] ?? 0) - along * (other[i] ?? 0);
		}
		let squares = 0;
		for (const value of vector) squares += value * value;
		const norm = Math.sqrt(squares);
		for (let i = 0; i < vector.length; i++) vector[i] = (vector[i] ?? 0) / norm;
	}
}

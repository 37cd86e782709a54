import { multiply } from '../linalg/dense';
import { seededRandom } from '../linalg/seeded-random';
import { fillCentred, type CentredMomentMatrix } from './centred-moment-matrix';
import { invariantSubspaces } from './invariant-subspaces';
import type { RelabellingAction } from './relabelling-action';
import { alignSubspaces, type Subspace } from './subspace-alignment';
import { moveVectors, type WordOrbit } from './word-orbits';

/** A vector on the words of one orbit. */
export interface AdaptedVector {
	/** Place in the list of orbits. */
	readonly orbit: number;
	readonly entries: Float64Array;
}

/**
 * One block of all invariant moment matrices: every copy is a list of orthonormal vectors, and the
 * matrix has the same entries on each copy.
 */
export interface AdaptedBlock {
	readonly copies: readonly (readonly AdaptedVector[])[];
	/**
	 * Where equivalent subspaces could not be made alike (one copy holds all of them): the matrices
	 * by which the group moves the vectors, row-major. A multiplier has to be averaged over them.
	 */
	readonly moves: readonly Float64Array[];
}

const ATTEMPTS = 3;
const SEED = 77003;

/**
 * An orthonormal basis in which every invariant moment matrix is block-diagonal. A second random
 * matrix tells which invariant subspaces are equivalent and turns their bases alike; a third checks.
 * Murota, Kanno, Kojima, Kojima, Jpn. J. Ind. Appl. Math. 27, 125 (2010).
 * @returns null when no attempt passes the check.
 */
export function adaptedBasis(
	action: RelabellingAction,
	orbits: readonly WordOrbit[],
	matrix: CentredMomentMatrix,
	poll: () => void
): AdaptedBlock[] | null {
	const n = matrix.size;
	for (let attempt = 0; attempt < ATTEMPTS; attempt++) {
		const orbitOf: number[] = [];
		const basis = new Float64Array(n * n);
		const spaces: Subspace[] = orbits.flatMap((orbit, place) => {
			return invariantSubspaces(action, orbit, attempt, poll).map((vectors) => {
				const first = orbitOf.length;
				for (const vector of vectors) {
					const row = orbitOf.push(place) - 1;
					orbit.words.forEach((word, at) => (basis[row * n + word] = vector[at] ?? 0));
				}
				return { first, size: vectors.length };
			});
		});
		const random = (which: number) => {
			poll();
			const stream = seededRandom(SEED, 2 * attempt + which);
			const eta = Float64Array.from({ length: matrix.unknowns + 1 }, () => stream.normal());
			return fillCentred(matrix, eta);
		};
		const seen = (which: number) => inBasis(random(which), basis, n);
		const blocks = alignSubspaces(
			basis,
			spaces,
			n,
			() => seen(0),
			() => seen(1)
		);
		if (!blocks) continue;
		const vector = (row: number): AdaptedVector => {
			const orbit = orbitOf[row] ?? 0;
			const words = orbits[orbit]?.words ?? new Int32Array(0);
			return {
				orbit,
				entries: Float64Array.from(words, (word) => basis[row * n + word] ?? 0)
			};
		};
		return blocks.map(({ copies, alike }) => {
			const adapted = copies.map((rows) => rows.map(vector));
			return { copies: adapted, moves: alike ? [] : movesOf(action, orbits, adapted[0] ?? []) };
		});
	}
	return null;
}

/** V R V^T for the basis V, a vector a row. */
function inBasis(matrix: Float64Array, basis: Float64Array, n: number): Float64Array {
	const transposed = new Float64Array(n * n);
	for (let i = 0; i < n; i++)
		for (let j = 0; j < n; j++) transposed[j * n + i] = basis[i * n + j] ?? 0;
	const first = new Float64Array(n * n);
	const result = new Float64Array(n * n);
	multiply(basis, matrix, first, n);
	multiply(first, transposed, result, n);
	return result;
}

/** <u_k, g u_l> for every element g. */
function movesOf(
	action: RelabellingAction,
	orbits: readonly WordOrbit[],
	vectors: readonly AdaptedVector[]
): Float64Array[] {
	const n = vectors.length;
	return Array.from({ length: action.order }, (_, g) => {
		const matrix = new Float64Array(n * n);
		vectors.forEach(({ orbit, entries }, l) => {
			const image = new Float64Array(entries.length);
			const own = orbits[orbit];
			if (own) moveVectors(action, own, g, entries, 1, image);
			vectors.forEach((other, k) => {
				if (other.orbit === orbit)
					matrix[k * n + l] = other.entries.reduce((sum, v, at) => sum + v * (image[at] ?? 0), 0);
			});
		});
		return matrix;
	});
}

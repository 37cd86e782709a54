import { seededRandom } from '../linalg/seeded-random';
import type { CentredMomentMatrix } from './centred-moment-matrix';
import { invariantSubspaces, type InvariantSubspace } from './invariant-subspaces';
import type { RelabellingAction } from './relabelling-action';
import { moveVector, type WordOrbit } from './word-orbits';

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

/** Couplings of a random invariant matrix below this are none, relative to its entries of about 1. */
const COUPLED = 1e-7;
/** What is left where the block structure says 0. */
const TOLERANCE = 1e-10;
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
	for (let attempt = 0; attempt < ATTEMPTS; attempt++) {
		const spaces: Space[] = orbits.flatMap((orbit, place) => {
			poll();
			return invariantSubspaces(action, orbit, attempt).map(({ vectors }) => ({
				orbit: place,
				words: orbit.words,
				vectors: [...vectors]
			}));
		});
		const couplings = [0, 1].map((which) =>
			coupling(spaces, randomMatrix(matrix, 2 * attempt + which), matrix.size, poll)
		);
		const [linking, checking] = couplings;
		if (!linking || !checking) return null;
		const blocks = alignedBlocks(spaces, linking, checking);
		if (!blocks) continue;
		return blocks.map(({ copies, whole }) => ({
			copies,
			moves: whole ? movesOf(action, orbits, copies[0] ?? []) : []
		}));
	}
	return null;
}

interface Space {
	readonly orbit: number;
	readonly words: Int32Array;
	vectors: InvariantSubspace['vectors'];
}

/** Gamma at random invariant moments, both triangles. */
function randomMatrix(matrix: CentredMomentMatrix, stream: number): Float64Array {
	const random = seededRandom(SEED, stream);
	const eta = Float64Array.from({ length: matrix.unknowns + 1 }, () => random.normal());
	return fillCentred(matrix, eta);
}

/** Writes out the moment matrix of centred words, both triangles. */
export function fillCentred(matrix: CentredMomentMatrix, eta: Float64Array): Float64Array {
	const { size: n, start, moments, values } = matrix;
	const filled = new Float64Array(n * n);
	let cell = 0;
	for (let i = 0; i < n; i++) {
		for (let j = 0; j <= i; j++, cell++) {
			let sum = 0;
			const end = start[cell + 1] ?? 0;
			for (let at = start[cell] ?? 0; at < end; at++)
				sum += (values[at] ?? 0) * (eta[moments[at] ?? 0] ?? 0);
			filled[i * n + j] = sum;
			filled[j * n + i] = sum;
		}
	}
	return filled;
}

/** V_e^T R V_f for spaces e and f, row-major. */
type Couplings = (e: number, f: number) => Float64Array;

function coupling(
	spaces: readonly Space[],
	matrix: Float64Array,
	n: number,
	poll: () => void
): Couplings {
	const images = spaces.map(({ words, vectors }) => {
		poll();
		return vectors.map((vector) => {
			const image = new Float64Array(n);
			vector.forEach((value, k) => {
				const row = (words[k] ?? 0) * n;
				for (let i = 0; i < n; i++) image[i] = (image[i] ?? 0) + value * (matrix[row + i] ?? 0);
			});
			return image;
		});
	});
	return (e, f) => {
		const { words, vectors } = spaces[e] ?? { words: new Int32Array(0), vectors: [] };
		return Float64Array.from(
			vectors.flatMap((vector) =>
				(images[f] ?? []).map((image) =>
					vector.reduce((sum, value, k) => sum + value * (image[words[k] ?? 0] ?? 0), 0)
				)
			)
		);
	};
}

/** a b^T for `rows x inner` and `columns x inner`. */
function timesTranspose(a: Float64Array, b: Float64Array, rows: number, columns: number) {
	const inner = a.length / Math.max(1, rows);
	const result = new Float64Array(rows * columns);
	for (let i = 0; i < rows; i++)
		for (let j = 0; j < columns; j++) {
			let sum = 0;
			for (let k = 0; k < inner; k++) sum += (a[i * inner + k] ?? 0) * (b[j * inner + k] ?? 0);
			result[i * columns + j] = sum;
		}
	return result;
}

/** a b for `rows x inner` and `inner x columns`. */
function times(a: Float64Array, b: Float64Array, rows: number, inner: number): Float64Array {
	const columns = b.length / Math.max(1, inner);
	const result = new Float64Array(rows * columns);
	for (let i = 0; i < rows; i++)
		for (let k = 0; k < inner; k++) {
			const factor = a[i * inner + k] ?? 0;
			for (let j = 0; j < columns; j++)
				result[i * columns + j] =
					(result[i * columns + j] ?? 0) + factor * (b[k * columns + j] ?? 0);
		}
	return result;
}

const norm = (a: Float64Array) => Math.hypot(...a);

/** Largest distance of a square matrix from a multiple of the unit matrix. */
function distanceFromScalar(a: Float64Array, n: number): number {
	let mean = 0;
	for (let i = 0; i < n; i++) mean += (a[i * n + i] ?? 0) / n;
	return a.reduce((largest, value, at) => {
		const wanted = at % (n + 1) === 0 ? mean : 0;
		return Math.max(largest, Math.abs(value - wanted));
	}, 0);
}

function alignedBlocks(
	spaces: readonly Space[],
	linking: Couplings,
	checking: Couplings
): { copies: AdaptedVector[][]; whole: boolean }[] | null {
	const count = spaces.length;
	const size = (e: number) => spaces[e]?.vectors.length ?? 0;
	/** Orthogonal matrix by which each space's basis is turned: new basis = basis * turn^T. */
	const turns: (Float64Array | null)[] = spaces.map(() => null);
	const members: number[][] = [];
	for (let root = 0; root < count; root++) {
		if (turns[root]) continue;
		turns[root] = unit(size(root));
		const block = [root];
		// The strongest link first: its errors are the smallest.
		const links = new Map<number, { from: number; strength: number; matrix: Float64Array }>();
		for (let at = 0; at < block.length; at++) {
			const e = block[at] ?? 0;
			for (let f = 0; f < count; f++) {
				if (turns[f]) continue;
				const matrix = linking(e, f);
				const strength = norm(matrix);
				if (strength > COUPLED && strength > (links.get(f)?.strength ?? 0))
					links.set(f, { from: e, strength, matrix });
			}
			let best: number | null = null;
			for (const [f, { strength }] of links)
				if (strength > (best === null ? 0 : (links.get(best)?.strength ?? 0))) best = f;
			const link = best === null ? undefined : links.get(best);
			if (best === null || !link) continue;
			links.delete(best);
			const d = size(link.from);
			if (size(best) !== d) return null;
			// V_e^T R V_f = s Q with Q orthogonal: V_f Q^T sees V_e as s times the unit matrix.
			const scaled = link.matrix.map((value) => (value * Math.sqrt(d)) / link.strength);
			if (distanceFromScalar(timesTranspose(scaled, scaled, d, d), d) > TOLERANCE) return null;
			turns[best] = times(turns[link.from] ?? unit(d), scaled, d, d);
			block.push(best);
		}
		members.push(block);
	}
	const turned = (e: number, f: number) => {
		const [left, right] = [turns[e], turns[f]];
		if (!left || !right) return new Float64Array(0);
		const d = size(e);
		return timesTranspose(times(left, checking(e, f), d, d), right, d, size(f));
	};
	const blockOf = new Map(members.flatMap((block, b) => block.map((e) => [e, b] as const)));
	const splits = members.map(() => true);
	for (let e = 0; e < count; e++)
		for (let f = 0; f <= e; f++) {
			const b = blockOf.get(e) ?? -1;
			if (b !== blockOf.get(f)) {
				if (norm(checking(e, f)) > TOLERANCE) return null;
			} else if (splits[b] && distanceFromScalar(turned(e, f), size(e)) > TOLERANCE) {
				splits[b] = false;
			}
		}
	return members.map((block, b) => {
		const bases = block.map((e) => ({
			orbit: spaces[e]?.orbit ?? 0,
			vectors: turnedBasis(spaces[e]?.vectors ?? [], turns[e] ?? unit(size(e)))
		}));
		const list = ({ orbit, vectors }: (typeof bases)[number]) =>
			vectors.map((entries) => ({ orbit, entries }));
		// Subspaces of complex type have no basis that makes them alike: they stay together.
		if (!splits[b]) return { copies: [bases.flatMap(list)], whole: true };
		const copies = bases[0]?.vectors.length ?? 0;
		return {
			copies: Array.from({ length: copies }, (_, c) =>
				bases.flatMap((basis) => list(basis).slice(c, c + 1))
			),
			whole: false
		};
	});
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
			if (own) moveVector(action, own, g, entries, image);
			vectors.forEach((other, k) => {
				if (other.orbit === orbit)
					matrix[k * n + l] = other.entries.reduce((sum, v, at) => sum + v * (image[at] ?? 0), 0);
			});
		});
		return matrix;
	});
}

function unit(n: number): Float64Array {
	return Float64Array.from({ length: n * n }, (_, at) => (at % (n + 1) === 0 ? 1 : 0));
}

/** Columns of V T^T. */
function turnedBasis(vectors: readonly Float64Array[], turn: Float64Array): Float64Array[] {
	const d = vectors.length;
	return vectors.map((_, c) => {
		const sum = new Float64Array(vectors[0]?.length ?? 0);
		vectors.forEach((vector, k) => {
			const factor = turn[c * d + k] ?? 0;
			vector.forEach((value, at) => (sum[at] = (sum[at] ?? 0) + factor * value));
		});
		return sum;
	});
}

/** Consecutive rows of a basis. */
export interface Subspace {
	readonly first: number;
	readonly size: number;
}

/** Rows of the basis that belong together: the matrices have the same entries on every copy. */
export interface RowBlock {
	readonly copies: readonly (readonly number[])[];
	/** False when the subspaces could not be made alike: one copy then holds all of them. */
	readonly alike: boolean;
}

/** Couplings of a random invariant matrix below this are none, relative to its entries of about 1. */
const COUPLED = 1e-7;
/** What may be left where the block structure says 0. */
const TOLERANCE = 1e-10;

/**
 * Finds which irreducible subspaces are equivalent, from a matrix that commutes with the group, and
 * turns the rows of the basis so that equivalent ones see such matrices alike (Schur's lemma: what
 * couples two subspaces is a multiple of an orthogonal matrix).
 * @param linking a random invariant matrix in the basis; @param checking another one, in the basis
 *   as it is then.
 * @returns null when the couplings are not what they must be.
 */
export function alignSubspaces(
	basis: Float64Array,
	spaces: readonly Subspace[],
	n: number,
	linking: () => Float64Array,
	checking: () => Float64Array
): RowBlock[] | null {
	const turned = turnedSubspaces(basis, spaces, n, linking());
	return turned && checkedBlocks(turned, spaces, n, checking());
}

/** Size of the part of a matrix that couples two subspaces. */
function strengthOf(matrix: Float64Array, n: number, e: Subspace, f: Subspace): number {
	let squares = 0;
	for (let i = e.first; i < e.first + e.size; i++)
		for (let j = f.first; j < f.first + f.size; j++) squares += (matrix[i * n + j] ?? 0) ** 2;
	return Math.sqrt(squares);
}

/** The subspaces of each block, by the strongest couplings first: their errors are the smallest. */
function turnedSubspaces(
	basis: Float64Array,
	spaces: readonly Subspace[],
	n: number,
	matrix: Float64Array
): number[][] | null {
	const turns = spaces.map((): Float64Array | null => null);
	const blocks: number[][] = [];
	for (const [root, { size }] of spaces.entries()) {
		if (turns[root]) continue;
		turns[root] = Float64Array.from({ length: size * size }, (_, at) =>
			at % (size + 1) === 0 ? 1 : 0
		);
		const block = [root];
		const links = new Map<number, { from: number; strength: number }>();
		let newest: number | undefined = root;
		while (newest !== undefined) {
			const e = spaces[newest];
			for (const [f, space] of spaces.entries()) {
				if (turns[f] || !e) continue;
				const strength = strengthOf(matrix, n, e, space);
				if (strength > COUPLED && strength > (links.get(f)?.strength ?? 0))
					links.set(f, { from: newest, strength });
			}
			newest = undefined;
			let strongest = 0;
			for (const [f, { strength }] of links)
				if (strength > strongest) [newest, strongest] = [f, strength];
			const link = newest === undefined ? undefined : links.get(newest);
			if (newest === undefined || !link) break;
			links.delete(newest);
			const [from, to] = [spaces[link.from], spaces[newest]];
			const before = turns[link.from];
			if (!from || !to || !before || from.size !== to.size) return null;
			const turn = orthogonalCoupling(matrix, n, from, to, before);
			if (!turn) return null;
			turnRows(basis, n, to, turn);
			turns[newest] = turn;
			block.push(newest);
		}
		blocks.push(block);
	}
	return blocks;
}

/** `before` times the coupling's orthogonal factor; null when it is none. */
function orthogonalCoupling(
	matrix: Float64Array,
	n: number,
	from: Subspace,
	to: Subspace,
	before: Float64Array
): Float64Array | null {
	const d = from.size;
	const scale = Math.sqrt(d) / strengthOf(matrix, n, from, to);
	const turn = new Float64Array(d * d);
	for (let i = 0; i < d; i++)
		for (let k = 0; k < d; k++)
			for (let j = 0; j < d; j++)
				turn[i * d + j] =
					(turn[i * d + j] ?? 0) +
					(before[i * d + k] ?? 0) * scale * (matrix[(from.first + k) * n + to.first + j] ?? 0);
	for (let i = 0; i < d; i++)
		for (let j = 0; j <= i; j++) {
			let sum = i === j ? -1 : 0;
			for (let k = 0; k < d; k++) sum += (turn[i * d + k] ?? 0) * (turn[j * d + k] ?? 0);
			if (Math.abs(sum) > TOLERANCE) return null;
		}
	return turn;
}

function turnRows(basis: Float64Array, n: number, { first, size }: Subspace, turn: Float64Array) {
	const rows = basis.slice(first * n, (first + size) * n);
	basis.fill(0, first * n, (first + size) * n);
	for (let i = 0; i < size; i++)
		for (let k = 0; k < size; k++) {
			const factor = turn[i * size + k] ?? 0;
			for (let at = 0; at < n; at++)
				basis[(first + i) * n + at] =
					(basis[(first + i) * n + at] ?? 0) + factor * (rows[k * n + at] ?? 0);
		}
}

function checkedBlocks(
	blocks: readonly (readonly number[])[],
	spaces: readonly Subspace[],
	n: number,
	matrix: Float64Array
): RowBlock[] | null {
	const blockOf = new Map(blocks.flatMap((block, b) => block.map((e) => [e, b] as const)));
	const alike = blocks.map(() => true);
	for (const [e, left] of spaces.entries())
		for (const [f, right] of spaces.entries()) {
			if (f > e) break;
			const b = blockOf.get(e) ?? -1;
			if (b !== blockOf.get(f)) {
				if (strengthOf(matrix, n, left, right) > TOLERANCE) return null;
			} else if (!isScalar(matrix, n, left, right)) {
				alike[b] = false;
			}
		}
	return blocks.map((block, b) => {
		const members = block.flatMap((e) => spaces[e] ?? []);
		const rows = ({ first, size }: Subspace) => Array.from({ length: size }, (_, k) => first + k);
		// Subspaces of complex type have no bases that make them alike: they stay together.
		if (!alike[b]) return { copies: [members.flatMap(rows)], alike: false };
		const copies = Array.from({ length: members[0]?.size ?? 0 }, (_, c) =>
			members.map(({ first }) => first + c)
		);
		return { copies, alike: true };
	});
}

/** Whether the coupling of two subspaces is a multiple of the unit matrix. */
function isScalar(matrix: Float64Array, n: number, left: Subspace, right: Subspace): boolean {
	const d = left.size;
	let mean = 0;
	for (let i = 0; i < d; i++) mean += (matrix[(left.first + i) * n + right.first + i] ?? 0) / d;
	for (let i = 0; i < d; i++)
		for (let j = 0; j < d; j++) {
			const value = matrix[(left.first + i) * n + right.first + j] ?? 0;
			if (Math.abs(value - (i === j ? mean : 0)) > TOLERANCE) return false;
		}
	return true;
}

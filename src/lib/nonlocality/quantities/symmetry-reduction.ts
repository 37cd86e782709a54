import { addScaled, multiply } from '../linalg/dense';
import type { BlockProgramme } from '../optimization/block-programme';
import type { SparseRow } from '../optimization/moment-programme';
import type { Relabelling } from '../scenario/relabelling';
import { adaptedBasis, type AdaptedBlock } from './adapted-basis';
import { blockMatrices } from './block-entries';
import {
	centredMomentMatrix,
	fillCentred,
	type CentredMomentMatrix
} from './centred-moment-matrix';
import { CentredStrings } from './centred-strings';
import { changeOfWords } from './change-of-words';
import { InvariantMoments } from './invariant-moments';
import type { MomentMatrix } from './moment-matrix';
import type { MomentProblem } from './moment-problem';
import type { Word } from './moment-words';
import { RelabellingAction } from './relabelling-action';
import { wordOrbits, type WordOrbit } from './word-orbits';

/** Entries of the invariant moment matrix: past this many its lists take a gigabyte. */
export const MOST_ENTRIES = 2e7;
/** Two square matrices of this many rows, the linear system and the Gram matrix: 256 MB. */
const MOST_INVARIANT_MOMENTS = 4000;
/** Rows whose forms on the invariant moments differ by less are the same on average. */
const SAME_ROW = 1e-9;

/**
 * A moment problem on its invariant moments, block by block, and the way back. Everything invariant
 * is decided by the block programme; what is proved afterwards is proved for the original problem.
 */
export class SymmetryReduction {
	readonly order: number;
	readonly programme: BlockProgramme;
	readonly #matrix: MomentMatrix;
	readonly #centred: CentredMomentMatrix;
	/** Projector words in centred words. */
	readonly #inCentred: Float64Array;
	/** One per block and copy: the basis in projector words, size x n row-major. */
	readonly #bases: readonly (readonly Float64Array[])[];
	/** By block, the matrices that its multiplier is averaged over. */
	readonly #moves: readonly (readonly Float64Array[])[];
	/** Which row of the programme each row of the original became (-1: none), and among how many. */
	readonly #rowOf: readonly number[];
	readonly #rowCounts: readonly number[];
	readonly #firstCell: Int32Array;

	private constructor(parts: Parts) {
		this.order = parts.order;
		this.programme = parts.programme;
		this.#matrix = parts.matrix;
		this.#centred = parts.centred;
		this.#inCentred = parts.inCentred;
		this.#bases = parts.bases;
		this.#moves = parts.moves;
		this.#rowOf = parts.rowOf;
		this.#rowCounts = parts.rowCounts;
		this.#firstCell = new Int32Array(parts.matrix.moments.length).fill(-1);
		parts.matrix.index.forEach((moment, cell) => {
			if (moment >= 0 && (this.#firstCell[moment] ?? 0) < 0) this.#firstCell[moment] = cell;
		});
	}

	/**
	 * @param elements a group of symmetries of the objective and the set of rows.
	 * @returns null when the words are not closed under it, when it would not fit in memory, or when
	 *   the numerical block structure fails its check: the plain problem is to be solved then.
	 */
	static of(
		problem: MomentProblem,
		elements: readonly Relabelling[],
		poll: () => void
	): SymmetryReduction | null {
		const { matrix } = problem;
		const { alphabet, words } = matrix;
		const parties = alphabet.scenario.outputs.map(
			(counts, p) => new CentredStrings(alphabet.inputs[p] ?? [], alphabet.first[p] ?? [], counts)
		);
		const action = new RelabellingAction(parties, elements);
		const invariants = new InvariantMoments(action);
		const centred = centredMomentMatrix(parties, words, action, invariants, MOST_ENTRIES, poll);
		if (!centred || centred.unknowns > MOST_INVARIANT_MOMENTS) return null;
		const inCentred = changeOfWords(parties, words, 'inCentred');
		const inProjectors = changeOfWords(parties, words, 'inProjectors');
		const orbits = wordOrbits(parties, words, action);
		if (!inCentred || !inProjectors || !orbits) return null;
		const blocks = adaptedBasis(action, orbits, centred, poll);
		const matrices = blocks && blockMatrices(centred, orbits, blocks, poll);
		if (!matrices) return null;
		const forms = new InvariantForms(matrix, parties, action, invariants);
		const objective = forms.of(denseRow(problem.programme.objective));
		const rows = averagedRows(problem.programme.rows.map((row) => forms.of(row)));
		if (invariants.count - 1 !== centred.unknowns) return null;
		return new SymmetryReduction({
			order: elements.length,
			programme: { ...matrices, objective, rows: rows.rows },
			matrix,
			centred,
			inCentred,
			bases: basesInProjectors(inProjectors, orbits, blocks),
			moves: blocks.map(({ moves }) => moves),
			rowOf: rows.rowOf,
			rowCounts: rows.counts
		});
	}

	/** Bytes that it keeps. */
	get bytes(): number {
		const { values, unknowns, gram } = this.programme;
		const n = this.#matrix.size;
		const numbers = 2 * n * n + 2 * values.length + 1.5 * this.#centred.values.length;
		return 8 * (numbers + (gram.factor ? unknowns ** 2 : unknowns));
	}

	/** The multiplier of the original moment matrix that the blocks' multipliers stand for. */
	liftMultiplier(x: Float64Array): Float64Array {
		const n = this.#matrix.size;
		const z = new Float64Array(n * n);
		this.#bases.forEach((copies, b) => {
			const size = this.programme.sizes[b] ?? 0;
			const from = this.programme.offsets[b] ?? 0;
			const block = averaged(x.subarray(from, from + size * size), size, this.#moves[b] ?? []);
			for (const basis of copies) {
				const image = new Float64Array(size * n);
				for (let k = 0; k < size; k++)
					for (let l = 0; l < size; l++)
						addMultiple(image, k * n, (block[k * size + l] ?? 0) / copies.length, basis, l * n, n);
				for (let k = 0; k < size; k++)
					for (let i = 0; i < n; i++)
						addMultiple(z, i * n, basis[k * n + i] ?? 0, image, k * n, i + 1);
			}
		});
		for (let i = 0; i < n; i++) for (let j = 0; j < i; j++) z[j * n + i] = z[i * n + j] ?? 0;
		return z;
	}

	liftRowMultipliers(z: Float64Array): Float64Array {
		return Float64Array.from(this.#rowOf, (row) =>
			row < 0 ? 0 : (z[row] ?? 0) / (this.#rowCounts[row] ?? 1)
		);
	}

	/** All moments from the invariant ones. */
	liftMoments(eta: Float64Array): Float64Array {
		const n = this.#matrix.size;
		const first = new Float64Array(n * n);
		const gamma = new Float64Array(n * n);
		multiply(this.#inCentred, fillCentred(this.#centred, eta), first, n);
		multiply(first, transposed(this.#inCentred, n), gamma, n);
		const y = Float64Array.from(this.#firstCell, (cell) => gamma[cell] ?? 0);
		y[0] = 1;
		return y;
	}
}

interface Parts {
	readonly order: number;
	readonly programme: BlockProgramme;
	readonly matrix: MomentMatrix;
	readonly centred: CentredMomentMatrix;
	readonly inCentred: Float64Array;
	readonly bases: readonly (readonly Float64Array[])[];
	readonly moves: readonly (readonly Float64Array[])[];
	readonly rowOf: readonly number[];
	readonly rowCounts: readonly number[];
}

/** The mean of D X D^T over the matrices D; X itself where there are none. */
function averaged(x: Float64Array, n: number, moves: readonly Float64Array[]): Float64Array {
	if (moves.length === 0) return x;
	const mean = new Float64Array(n * n);
	const first = new Float64Array(n * n);
	const second = new Float64Array(n * n);
	for (const move of moves) {
		multiply(move, x, first, n);
		multiply(first, transposed(move, n), second, n);
		addScaled(mean, 1 / moves.length, second);
	}
	return mean;
}

/** to[t ..] += factor * from[f ..], `count` entries. */
function addMultiple(
	to: Float64Array,
	t: number,
	factor: number,
	from: Float64Array,
	f: number,
	count: number
): void {
	if (factor === 0) return;
	for (let i = 0; i < count; i++) to[t + i] = (to[t + i] ?? 0) + factor * (from[f + i] ?? 0);
}

function transposed(a: Float64Array, n: number): Float64Array {
	const result = new Float64Array(n * n);
	for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) result[j * n + i] = a[i * n + j] ?? 0;
	return result;
}

function denseRow(form: Float64Array): SparseRow {
	const columns = [...form.keys()].filter((column) => form[column] !== 0);
	return { columns, values: columns.map((column) => form[column] ?? 0) };
}

/** Writes every basis vector in projector words. */
function basesInProjectors(
	inProjectors: Float64Array,
	orbits: readonly WordOrbit[],
	blocks: readonly AdaptedBlock[]
): Float64Array[][] {
	const n = Math.round(Math.sqrt(inProjectors.length));
	return blocks.map(({ copies }) =>
		copies.map((vectors) => {
			const basis = new Float64Array(vectors.length * n);
			vectors.forEach(({ orbit, entries }, k) =>
				orbits[orbit]?.words.forEach((word, at) =>
					addMultiple(basis, k * n, entries[at] ?? 0, inProjectors, word * n, n)
				)
			);
			return basis;
		})
	);
}

/** Linear forms on the moments, as forms on the invariant ones. */
class InvariantForms {
	constructor(
		readonly matrix: MomentMatrix,
		readonly parties: readonly CentredStrings[],
		readonly action: RelabellingAction,
		readonly invariants: InvariantMoments
	) {}

	of(row: SparseRow): Float64Array {
		const form = new Map<number, number>();
		row.columns.forEach((moment, at) =>
			this.#add(this.matrix.moments[moment] ?? [], row.values[at] ?? 0, form)
		);
		const dense = new Float64Array(this.invariants.count);
		for (const [moment, value] of form) dense[moment] = value;
		return dense;
	}

	#add(word: Word, factor: number, form: Map<number, number>): void {
		const combinations = this.parties.map((party, p) =>
			party.inCentred(party.strings.numberOf(word[p] ?? []))
		);
		const pattern = this.parties.map(() => 0);
		const descend = (p: number, at: number, weight: number): void => {
			const combination = combinations[p];
			if (!combination) {
				const key = this.action.keyOf(pattern);
				const { first, count, values } = this.invariants.of(pattern, key);
				for (let k = 0; k < count; k++)
					form.set(first + k, (form.get(first + k) ?? 0) + weight * (values[at * count + k] ?? 0));
				return;
			}
			for (const [string, amount] of combination) {
				const placed = this.action.placeOf(p, string);
				pattern[p] = placed.pattern;
				const dimension = this.action.dimensionOfPart(p, placed.pattern);
				descend(p + 1, at * dimension + placed.at, weight * amount);
			}
		};
		descend(0, 0, factor);
	}
}

/** Rows with the same form on the invariant moments are one row; constant ones say nothing. */
function averagedRows(forms: readonly Float64Array[]): {
	rows: SparseRow[];
	rowOf: number[];
	counts: number[];
} {
	const rows: SparseRow[] = [];
	const counts: number[] = [];
	const numbers = new Map<string, number>();
	const rowOf = forms.map((form) => {
		const rounded = form.map((value) => Math.round(value / SAME_ROW));
		if (rounded.every((value, j) => j === 0 || value === 0) && (form[0] ?? 0) > 0) return -1;
		const key = rounded.join();
		const known = numbers.get(key) ?? rows.length;
		if (known === rows.length) {
			numbers.set(key, known);
			rows.push(denseRow(form.map((value, j) => (rounded[j] === 0 ? 0 : value))));
			counts.push(0);
		}
		counts[known] = (counts[known] ?? 0) + 1;
		return known;
	});
	return { rows, rowOf, counts };
}

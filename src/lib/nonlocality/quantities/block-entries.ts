import { factorGram, type BlockProgramme } from '../optimization/block-programme';
import type { AdaptedBlock, AdaptedVector } from './adapted-basis';
import type { CentredMomentMatrix } from './centred-moment-matrix';
import type { WordOrbit } from './word-orbits';

/** Entries this small are rounding errors: the others are products of numbers of about 1. */
const NEGLIGIBLE = 1e-13;

interface Member {
	readonly block: number;
	/** Place in the block. */
	readonly row: number;
	readonly entries: AdaptedVector['entries'];
}

/** A block programme without objective and rows. */
export type BlockMatrices = Omit<BlockProgramme, 'objective' | 'rows'>;

/**
 * The invariant moment matrices on the first copy of every block.
 * @returns null when they are not independent.
 */
export function blockMatrices(
	matrix: CentredMomentMatrix,
	orbits: readonly WordOrbit[],
	blocks: readonly AdaptedBlock[],
	poll: () => void
): BlockMatrices | null {
	const sizes = blocks.map(({ copies }) => copies[0]?.length ?? 0);
	const offsets = [0];
	for (const size of sizes) offsets.push((offsets.at(-1) ?? 0) + size * size);
	const members: Member[][] = orbits.map(() => []);
	blocks.forEach(({ copies }, block) =>
		copies[0]?.forEach(({ orbit, entries }, row) => members[orbit]?.push({ block, row, entries }))
	);
	const found: { moment: number; cell: number; mirror: number; value: number }[] = [];
	orbits.forEach((left, a) => {
		poll();
		for (let b = 0; b <= a; b++) {
			const right = orbits[b] ?? left;
			const part = new OrbitPair(matrix, left.words, right.words);
			for (const column of members[b] ?? []) {
				const rows = (members[a] ?? []).filter(
					({ block, row }) => block === column.block && (a !== b || row >= column.row)
				);
				if (rows.length === 0) continue;
				part.apply(column.entries);
				for (const { row, block, entries } of rows) {
					const size = sizes[block] ?? 0;
					const [high, low] = row >= column.row ? [row, column.row] : [column.row, row];
					const cell = (offsets[block] ?? 0) + high * size + low;
					const mirror = (offsets[block] ?? 0) + low * size + high;
					part.collect(entries, (moment, value) => {
						if (Math.abs(value) > NEGLIGIBLE) found.push({ moment, cell, mirror, value });
					});
				}
			}
		}
	});
	const m = matrix.unknowns;
	const start = new Int32Array(m + 2);
	for (const { moment } of found) start[moment + 1] = (start[moment + 1] ?? 0) + 1;
	for (let j = 0; j <= m; j++) start[j + 1] = (start[j + 1] ?? 0) + (start[j] ?? 0);
	const next = start.slice();
	const cells = new Int32Array(found.length);
	const mirrors = new Int32Array(found.length);
	const values = new Float64Array(found.length);
	for (const { moment, cell, mirror, value } of found) {
		const at = next[moment] ?? 0;
		next[moment] = at + 1;
		cells[at] = cell;
		mirrors[at] = mirror;
		values[at] = value;
	}
	const weights = blocks.map(({ copies }) => copies.length);
	const entries = { start, cells, mirrors, values };
	const gram = factorGram(gramMatrix(m, offsets, weights, entries), m);
	return gram && { sizes, offsets, unknowns: m, ...entries, weights, gram };
}

/** The cells between two orbits: for each moment a small matrix, all of them applied at once. */
class OrbitPair {
	/** The moments that occur. */
	readonly #moments: number[] = [];
	readonly #rowStart: Int32Array;
	readonly #columns: number[] = [];
	readonly #local: number[] = [];
	readonly #values: number[] = [];
	readonly #rows: number;
	#images = new Float64Array(0);

	constructor(matrix: CentredMomentMatrix, left: Int32Array, right: Int32Array) {
		const places = new Map<number, number>();
		this.#rows = left.length;
		this.#rowStart = new Int32Array(left.length + 1);
		left.forEach((u, row) => {
			right.forEach((v, column) => {
				const cell = u >= v ? (u * (u + 1)) / 2 + v : (v * (v + 1)) / 2 + u;
				for (let at = matrix.start[cell] ?? 0; at < (matrix.start[cell + 1] ?? 0); at++) {
					const moment = matrix.moments[at] ?? 0;
					let local = places.get(moment);
					if (local === undefined) {
						local = this.#moments.length;
						places.set(moment, local);
						this.#moments.push(moment);
					}
					this.#columns.push(column);
					this.#local.push(local);
					this.#values.push(matrix.values[at] ?? 0);
				}
			});
			this.#rowStart[row + 1] = this.#columns.length;
		});
	}

	/** Multiplies a vector on the right orbit by every moment's matrix. */
	apply(vector: Float64Array): void {
		const count = this.#moments.length;
		const images = new Float64Array(this.#rows * count);
		for (let row = 0; row < this.#rows; row++) {
			const end = this.#rowStart[row + 1] ?? 0;
			const to = row * count;
			for (let at = this.#rowStart[row] ?? 0; at < end; at++) {
				const place = to + (this.#local[at] ?? 0);
				images[place] =
					(images[place] ?? 0) + (this.#values[at] ?? 0) * (vector[this.#columns[at] ?? 0] ?? 0);
			}
		}
		this.#images = images;
	}

	/** Inner products of a vector on the left orbit with what `apply` left. */
	collect(vector: Float64Array, take: (moment: number, value: number) => void): void {
		const count = this.#moments.length;
		const sums = new Float64Array(count);
		for (let row = 0; row < this.#rows; row++) {
			const factor = vector[row] ?? 0;
			if (factor === 0) continue;
			for (let k = 0; k < count; k++)
				sums[k] = (sums[k] ?? 0) + factor * (this.#images[row * count + k] ?? 0);
		}
		sums.forEach((value, k) => take(this.#moments[k] ?? 0, value));
	}
}

/** Lower triangle of sum over blocks of weight * <B_j, B_k>, j, k >= 1. */
function gramMatrix(
	m: number,
	offsets: readonly number[],
	weights: readonly number[],
	entries: Pick<BlockProgramme, 'start' | 'cells' | 'mirrors' | 'values'>
): Float64Array {
	const gram = new Float64Array(m * m);
	const weightOf = new Float64Array(offsets.at(-1) ?? 0);
	weights.forEach((weight, b) => weightOf.fill(weight, offsets[b], offsets[b + 1]));
	const byCell = new Map<number, { moment: number; value: number }[]>();
	for (let j = 1; j <= m; j++) {
		for (let at = entries.start[j] ?? 0; at < (entries.start[j + 1] ?? 0); at++) {
			const cell = entries.cells[at] ?? 0;
			const factor = (weightOf[cell] ?? 0) * (cell === entries.mirrors[at] ? 1 : 2);
			const value = entries.values[at] ?? 0;
			const others = byCell.get(cell) ?? [];
			others.push({ moment: j, value });
			byCell.set(cell, others);
			for (const other of others) {
				const place = (j - 1) * m + (other.moment - 1);
				gram[place] = (gram[place] ?? 0) + factor * value * other.value;
			}
		}
	}
	return gram;
}

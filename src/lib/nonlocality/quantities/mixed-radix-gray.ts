/**
 * Steps through all digit tuples so that one digit changes by one at a time (reflected mixed-radix
 * Gray code, loopless: Knuth, The Art of Computer Programming 4A, 7.2.1.1, Algorithm H).
 * Starts at all zeros.
 */
export class MixedRadixGray {
	readonly digits: Int32Array;
	/** The digit changed by the last step, and its value before. */
	changed = -1;
	before = 0;
	readonly #radix: Int32Array;
	readonly #focus: Int32Array;
	readonly #direction: Int32Array;

	constructor(radices: readonly number[]) {
		const n = radices.length;
		this.#radix = Int32Array.from(radices);
		this.digits = new Int32Array(n);
		this.#focus = Int32Array.from({ length: n + 1 }, (_, j) => j);
		this.#direction = new Int32Array(n).fill(1);
	}

	/** Changes one digit; false when all tuples have been visited. */
	step(): boolean {
		const focus = this.#focus;
		const j = focus[0] ?? 0;
		focus[0] = 0;
		if (j >= this.digits.length) return false;
		const before = this.digits[j] ?? 0;
		const direction = this.#direction[j] ?? 1;
		const after = before + direction;
		this.digits[j] = after;
		this.changed = j;
		this.before = before;
		if (after === 0 || after === (this.#radix[j] ?? 0) - 1) {
			this.#direction[j] = -direction;
			focus[j] = focus[j + 1] ?? 0;
			focus[j + 1] = j + 1;
		}
		return true;
	}
}

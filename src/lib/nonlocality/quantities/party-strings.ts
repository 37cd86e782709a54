/**
 * Strings of letters of one party, numbered as they are met; number 0 is the empty one. Products
 * and keys of words then cost a few look-ups in integers.
 */
export class PartyStrings {
	readonly #width: number;
	readonly #letters: number[][] = [[]];
	readonly #parents: number[] = [0];
	readonly #longer = new Map<number, number>();
	readonly #reversed: number[] = [0];

	/** @param inputs input of each letter. */
	constructor(readonly inputs: readonly number[]) {
		this.#width = inputs.length;
	}

	get count(): number {
		return this.#letters.length;
	}

	letters(id: number): readonly number[] {
		return this.#letters[id] ?? [];
	}

	/** The string without its last letter. */
	parent(id: number): number {
		return this.#parents[id] ?? 0;
	}

	/** The string with a letter more, nothing reduced. */
	append(id: number, letter: number): number {
		const key = id * this.#width + letter;
		const known = this.#longer.get(key);
		if (known !== undefined) return known;
		const fresh = this.#letters.length;
		this.#longer.set(key, fresh);
		this.#letters.push([...(this.#letters[id] ?? []), letter]);
		this.#parents.push(id);
		return fresh;
	}

	/** Null when the string was never met. */
	find(letters: readonly number[]): number | null {
		let id = 0;
		for (const letter of letters) {
			const longer = this.#longer.get(id * this.#width + letter);
			if (longer === undefined) return null;
			id = longer;
		}
		return id;
	}

	numberOf(letters: readonly number[]): number {
		let id = 0;
		for (const letter of letters) id = this.append(id, letter);
		return id;
	}

	reversed(id: number): number {
		const known = this.#reversed[id];
		if (known !== undefined) return known;
		const letters = this.#letters[id] ?? [];
		let reversed = 0;
		for (let i = letters.length - 1; i >= 0; i--) reversed = this.append(reversed, letters[i] ?? 0);
		this.#reversed[id] = reversed;
		return reversed;
	}

	/** u^dagger v in projectors, reduced; -1 when it vanishes. Both are reduced themselves. */
	adjointProduct(u: number, v: number): number {
		let product = this.reversed(u);
		const tail = this.#letters[v] ?? [];
		const last = this.#letters[product]?.at(-1);
		const first = tail[0];
		let from = 0;
		if (last !== undefined && first !== undefined && this.inputs[last] === this.inputs[first]) {
			if (last !== first) return -1;
			from = 1;
		}
		for (let i = from; i < tail.length; i++) product = this.append(product, tail[i] ?? 0);
		return product;
	}
}

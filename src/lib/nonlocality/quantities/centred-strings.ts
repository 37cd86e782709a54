import { centredLetters, type CentredLetters } from './centred-letters';
import { PartyStrings } from './party-strings';

/** A linear combination of strings, by number. */
export type Combination = readonly (readonly [string: number, weight: number])[];

/**
 * Strings of centred letters of one party. Letter (input, k) has the number of the projector
 * E(input, k), so both kinds of strings share their numbers. In the free-product trace, where the
 * moment of the empty string is 1 and all others vanish, the strings are orthonormal.
 */
export class CentredStrings {
	readonly strings: PartyStrings;
	readonly #outputs: readonly number[];
	/** By input. */
	readonly #letters: readonly CentredLetters[];
	readonly #first: readonly number[];

	/** @param inputs input of each letter; @param first first letter of each input. */
	constructor(inputs: readonly number[], first: readonly number[], counts: readonly number[]) {
		const kinds = new Map<number, CentredLetters>();
		this.strings = new PartyStrings(inputs);
		this.#first = first;
		this.#outputs = counts;
		this.#letters = counts.map((count) => {
			const letters = kinds.get(count) ?? centredLetters(count);
			kinds.set(count, letters);
			return letters;
		});
	}

	get inputCount(): number {
		return this.#outputs.length;
	}

	/** Centred letters of an input, and the first of them. */
	dimensionOf(input: number): number {
		return (this.#outputs[input] ?? 2) - 1;
	}

	firstOf(input: number): number {
		return this.#first[input] ?? 0;
	}

	lettersOf(input: number): CentredLetters {
		return this.#letters[input] ?? centredLetters(2);
	}

	/** u^dagger v as a combination of reduced strings. */
	adjointProduct(u: number, v: number): Combination {
		const sums = new Map<number, number>();
		this.#addProduct(this.strings.reversed(u), this.strings.letters(v), 0, 1, sums);
		return [...sums].filter(([, weight]) => weight !== 0);
	}

	#addProduct(
		head: number,
		tail: readonly number[],
		from: number,
		weight: number,
		sums: Map<number, number>
	): void {
		const { strings } = this;
		const last = strings.letters(head).at(-1);
		const next = tail[from];
		const input = next === undefined ? -1 : (strings.inputs[next] ?? -1);
		const append = (start: number, place: number) => {
			let id = start;
			for (let i = place; i < tail.length; i++) id = strings.append(id, tail[i] ?? 0);
			return id;
		};
		const add = (id: number, amount: number) => sums.set(id, (sums.get(id) ?? 0) + amount);
		if (last === undefined || next === undefined || strings.inputs[last] !== input) {
			add(append(head, from), weight);
			return;
		}
		const shorter = strings.parent(head);
		if (last === next) this.#addProduct(shorter, tail, from + 1, weight, sums);
		const first = this.firstOf(input);
		const count = this.dimensionOf(input);
		const { products } = this.lettersOf(input);
		const row = ((last - first) * count + (next - first)) * count;
		for (let j = 0; j < count; j++) {
			const c = products[row + j] ?? 0;
			if (c !== 0) add(append(strings.append(shorter, first + j), from + 1), weight * c);
		}
	}

	/** A string of centred letters in strings of projectors. */
	inProjectors(id: number): Combination {
		return this.#expand(id, (input, letter) => {
			const { outputs, weights } = this.lettersOf(input);
			const first = this.firstOf(input);
			const row = (letter - first) * outputs;
			const last = weights[row + outputs - 1] ?? 0;
			return {
				constant: last,
				times: (place) => (weights[row + place] ?? 0) - last,
				joined: (place, other) => (place === other ? [[place, 1]] : [])
			};
		});
	}

	/** A string of projectors in strings of centred letters. */
	inCentred(id: number): Combination {
		return this.#expand(id, (input, letter) => {
			const { outputs, weights, products } = this.lettersOf(input);
			const count = outputs - 1;
			const output = letter - this.firstOf(input);
			return {
				constant: 1 / outputs,
				times: (place) => (weights[place * outputs + output] ?? 0) / outputs,
				joined: (place, other) => {
					const row = (place * count + other) * count;
					const found: [number, number][] = place === other ? [[-1, 1]] : [];
					for (let j = 0; j < count; j++) found.push([j, products[row + j] ?? 0]);
					return found;
				}
			};
		});
	}

	/** Multiplies from the left, the last letter first. */
	#expand(id: number, rule: (input: number, letter: number) => LetterRule): Combination {
		const { strings } = this;
		let sums = new Map<number, number>([[0, 1]]);
		for (const letter of [...strings.letters(id)].reverse()) {
			const input = strings.inputs[letter] ?? 0;
			const { constant, times, joined } = rule(input, letter);
			const first = this.firstOf(input);
			const count = this.dimensionOf(input);
			const next = new Map<number, number>();
			const add = (string: number, amount: number) => {
				if (amount !== 0) next.set(string, (next.get(string) ?? 0) + amount);
			};
			for (const [string, weight] of sums) {
				add(string, constant * weight);
				const [head, ...rest] = strings.letters(string);
				for (let place = 0; place < count; place++) {
					const amount = weight * times(place);
					if (amount === 0) continue;
					if (head === undefined || strings.inputs[head] !== input) {
						const whole = head === undefined ? [] : [head, ...rest];
						add(strings.numberOf([first + place, ...whole]), amount);
						continue;
					}
					for (const [result, factor] of joined(place, head - first))
						add(strings.numberOf(result < 0 ? rest : [first + result, ...rest]), amount * factor);
				}
			}
			sums = next;
		}
		return [...sums];
	}
}

/** How one letter of the old kind is written in the new kind, of the same input. */
interface LetterRule {
	readonly constant: number;
	times(place: number): number;
	/** The product of two new letters of one input: new letters, -1 for the identity. */
	joined(place: number, other: number): readonly (readonly [number, number])[];
}

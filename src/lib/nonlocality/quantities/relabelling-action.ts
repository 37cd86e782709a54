import { applyToFactor, tensorFactors } from '../linalg/tensor-factors';
import type { Relabelling } from '../scenario/relabelling';
import { outputMatrix } from './centred-letters';
import type { CentredStrings } from './centred-strings';
import { PartyStrings } from './party-strings';

/**
 * The inputs of a word, per party the number of its string of inputs. Words of one pattern with
 * centred letters span a space: a vector lists them row-major, first party and letter first.
 */
export type Pattern = readonly number[];

interface Element {
	/** New party of each party. */
	readonly parties: readonly number[];
	/** Old party of each party. */
	readonly sources: readonly number[];
	/** New input, and the orthogonal matrix of the outputs (null for the identity). */
	readonly inputs: readonly (readonly number[])[];
	readonly matrices: readonly (readonly (Float64Array | null)[])[];
	/** By party: image and sign of each string of inputs, as they are asked for. */
	readonly images: number[][];
	readonly signs: number[][];
}

/**
 * How relabellings act on words of centred letters: a pattern goes to a pattern, by an orthogonal
 * matrix that is a product over the letters (a sign where all outputs are two).
 */
export class RelabellingAction {
	readonly #parties: readonly CentredStrings[];
	readonly #inputStrings: readonly PartyStrings[];
	readonly #elements: readonly Element[];
	readonly #bits: number;
	readonly #placed: readonly { pattern: number[]; at: number[] }[];

	constructor(parties: readonly CentredStrings[], elements: readonly Relabelling[]) {
		this.#parties = parties;
		this.#bits = Math.floor(52 / parties.length);
		this.#inputStrings = parties.map(
			({ inputCount }) => new PartyStrings(Array.from({ length: inputCount }, (_, x) => x))
		);
		this.#placed = parties.map(() => ({ pattern: [], at: [] }));
		this.#elements = elements.map((relabelling) => ({
			parties: relabelling.parties,
			sources: relabelling.parties.map((_, p) => relabelling.parties.indexOf(p)),
			inputs: relabelling.inputs,
			matrices: relabelling.outputs.map((ofParty, p) =>
				ofParty.map((images, x) =>
					images.every((image, a) => image === a)
						? null
						: outputMatrix(parties[p]?.lettersOf(x) ?? noLetters(), images)
				)
			),
			images: parties.map(() => []),
			signs: parties.map(() => [])
		}));
	}

	get order(): number {
		return this.#elements.length;
	}

	/** Pattern of one party's string of letters, and where in the pattern's vectors it stands. */
	placeOf(party: number, string: number): { pattern: number; at: number } {
		const placed = this.#placed[party];
		const centred = this.#parties[party];
		const inputStrings = this.#inputStrings[party];
		if (!placed || !centred || !inputStrings) throw new RangeError(`there is no party ${party}`);
		const known = placed.pattern[string];
		if (known !== undefined) return { pattern: known, at: placed.at[string] ?? 0 };
		let pattern = 0;
		let at = 0;
		for (const letter of centred.strings.letters(string)) {
			const input = centred.strings.inputs[letter] ?? 0;
			pattern = inputStrings.append(pattern, input);
			at = at * centred.dimensionOf(input) + (letter - centred.firstOf(input));
		}
		placed.pattern[string] = pattern;
		placed.at[string] = at;
		return { pattern, at };
	}

	/** A number that tells patterns apart. @throws RangeError when there are too many. */
	keyOf(pattern: Pattern): number {
		const base = 2 ** this.#bits;
		return pattern.reduce((key, part) => {
			if (part >= base) throw new RangeError('too many patterns to number');
			return key * base + part;
		}, 0);
	}

	/** Sizes of the factors of a pattern's space, party by party. */
	#dimensions(pattern: Pattern): number[][] {
		return pattern.map((part, p) =>
			(this.#inputStrings[p]?.letters(part) ?? []).map((x) => this.#parties[p]?.dimensionOf(x) ?? 1)
		);
	}

	dimensionOfPart(party: number, part: number): number {
		const inputs = this.#inputStrings[party]?.letters(part) ?? [];
		return inputs.reduce((product, x) => product * (this.#parties[party]?.dimensionOf(x) ?? 1), 1);
	}

	dimension(pattern: Pattern): number {
		return pattern.reduce((product, part, p) => product * this.dimensionOfPart(p, part), 1);
	}

	/** @param reversed the word's adjoint is taken as well. */
	image(element: number, pattern: Pattern, reversed: boolean): number[] {
		const image = pattern.map(() => 0);
		const g = this.#elements[element];
		if (!g) throw new RangeError('no such element');
		pattern.forEach((part, p) => {
			const target = g.parties[p] ?? p;
			const cache = g.images[p];
			const strings = this.#inputStrings[target];
			if (!cache || !strings) throw new RangeError(`there is no party ${p}`);
			let mapped = cache[part];
			if (mapped === undefined) {
				mapped = 0;
				for (const x of this.#inputStrings[p]?.letters(part) ?? [])
					mapped = strings.append(mapped, g.inputs[p]?.[x] ?? 0);
				cache[part] = mapped;
			}
			image[target] = reversed ? strings.reversed(mapped) : mapped;
		});
		return image;
	}

	/** A pattern of dimension 1: what its vector is multiplied by. */
	sign(element: number, pattern: Pattern): number {
		const g = this.#elements[element];
		let sign = 1;
		pattern.forEach((part, p) => {
			const cache = g?.signs[p];
			let own = cache?.[part];
			if (own === undefined) {
				own = 1;
				for (const x of this.#inputStrings[p]?.letters(part) ?? [])
					own *= g?.matrices[p]?.[x]?.[0] ?? 1;
				if (cache) cache[part] = own;
			}
			sign *= own;
		});
		return sign;
	}

	/**
	 * The images of vectors of a pattern, laid out as the image's pattern asks for.
	 * @param vectors row-major, the pattern's words by `columns`.
	 */
	apply(
		element: number,
		pattern: Pattern,
		vectors: Float64Array,
		reversed: boolean,
		columns = 1
	): Float64Array {
		if (vectors.length === columns) {
			const sign = Math.round(this.sign(element, pattern));
			return vectors.map((value) => sign * value);
		}
		const g = this.#elements[element];
		const dimensions = this.#dimensions(pattern);
		const sizes = [...dimensions.flat(), columns];
		const factors = tensorFactors(sizes);
		let current = { re: vectors.slice(), im: null };
		let other = { re: new Float64Array(vectors.length), im: null };
		let axis = 0;
		pattern.forEach((part, p) => {
			for (const x of this.#inputStrings[p]?.letters(part) ?? []) {
				const factor = factors[axis++];
				const re = g?.matrices[p]?.[x];
				if (!re || !factor) continue;
				applyToFactor({ re, im: null }, factor, current, other);
				[current, other] = [other, current];
			}
		});
		let first = 0;
		const axes = dimensions.map((own) => own.map(() => first++));
		const order = (g?.sources ?? []).flatMap((source) => {
			const own = axes[source] ?? [];
			return reversed ? own.toReversed() : own;
		});
		return permuteAxes(current.re, sizes, [...order, first]);
	}
}

function noLetters(): never {
	throw new RangeError('the relabelling has a party too many');
}

/** Axis k of the result is axis order[k] of the row-major array. */
function permuteAxes(
	array: Float64Array,
	dimensions: readonly number[],
	order: readonly number[]
): Float64Array {
	if (order.every((axis, k) => axis === k)) return array;
	const strides = tensorFactors(dimensions).map(({ right }) => right);
	const sizes = order.map((axis) => dimensions[axis] ?? 1);
	const steps = order.map((axis) => strides[axis] ?? 1);
	const digits = order.map(() => 0);
	const result = new Float64Array(array.length);
	let from = 0;
	for (let to = 0; to < array.length; to++) {
		result[to] = array[from] ?? 0;
		for (let k = order.length - 1; k >= 0; k--) {
			const step = steps[k] ?? 0;
			const digit = (digits[k] ?? 0) + 1;
			from += step;
			if (digit < (sizes[k] ?? 1)) {
				digits[k] = digit;
				break;
			}
			from -= step * digit;
			digits[k] = 0;
		}
	}
	return result;
}

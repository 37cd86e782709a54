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

interface Party {
	readonly centred: CentredStrings;
	readonly inputStrings: PartyStrings;
	/** Pattern and place of each string of letters, as they are asked for. */
	readonly patterns: number[];
	readonly places: number[];
}

/** What a relabelling does to one party. */
interface ElementPart {
	/** The new party. */
	readonly target: number;
	/** New input, and the orthogonal matrix of the outputs (null for the identity). */
	readonly inputs: readonly number[];
	readonly matrices: readonly (Float64Array | null)[];
	/** Image and sign of each string of inputs, as they are asked for. */
	readonly images: number[];
	readonly signs: number[];
}

interface Element {
	readonly parts: readonly ElementPart[];
	/** Old party of each party. */
	readonly sources: readonly number[];
}

/**
 * How relabellings act on words of centred letters: a pattern goes to a pattern, by an orthogonal
 * matrix that is a product over the letters (a sign where all outputs are two).
 */
export class RelabellingAction {
	readonly #parties: readonly Party[];
	readonly #elements: readonly Element[];
	readonly #bits: number;

	constructor(parties: readonly CentredStrings[], elements: readonly Relabelling[]) {
		this.#bits = Math.floor(52 / parties.length);
		this.#parties = parties.map((centred) => ({
			centred,
			inputStrings: new PartyStrings(Array.from({ length: centred.inputCount }, (_, x) => x)),
			patterns: [],
			places: []
		}));
		this.#elements = elements.map((relabelling) => ({
			parts: relabelling.parties.map((target, p) => ({
				target,
				inputs: relabelling.inputs[p] ?? [],
				matrices: (relabelling.outputs[p] ?? []).map((images, x) =>
					images.every((image, a) => image === a)
						? null
						: outputMatrix(this.#party(p).centred.lettersOf(x), images)
				),
				images: [],
				signs: []
			})),
			sources: relabelling.parties.map((_, p) => relabelling.parties.indexOf(p))
		}));
	}

	#party(p: number): Party {
		const party = this.#parties[p];
		if (!party) throw new RangeError(`there is no party ${p}`);
		return party;
	}

	#element(number: number): Element {
		const element = this.#elements[number];
		if (!element) throw new RangeError(`there is no relabelling ${number}`);
		return element;
	}

	get order(): number {
		return this.#elements.length;
	}

	/** Pattern of one party's string of letters, and where in the pattern's vectors it stands. */
	placeOf(party: number, string: number): { pattern: number; at: number } {
		const { centred, inputStrings, patterns, places } = this.#party(party);
		const known = patterns[string];
		if (known !== undefined) return { pattern: known, at: places[string] ?? 0 };
		let pattern = 0;
		let at = 0;
		for (const letter of centred.strings.letters(string)) {
			const input = centred.strings.inputs[letter] ?? 0;
			pattern = inputStrings.append(pattern, input);
			at = at * centred.dimensionOf(input) + (letter - centred.firstOf(input));
		}
		patterns[string] = pattern;
		places[string] = at;
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

	dimensionOfPart(party: number, part: number): number {
		const { centred, inputStrings } = this.#party(party);
		const inputs = inputStrings.letters(part);
		return inputs.reduce((product, x) => product * centred.dimensionOf(x), 1);
	}

	dimension(pattern: Pattern): number {
		return pattern.reduce((product, part, p) => product * this.dimensionOfPart(p, part), 1);
	}

	/** @param reversed the word's adjoint is taken as well. */
	image(element: number, pattern: Pattern, reversed: boolean): number[] {
		const image = pattern.map(() => 0);
		this.#element(element).parts.forEach(({ target, inputs, images }, p) => {
			const part = pattern[p] ?? 0;
			const { inputStrings } = this.#party(target);
			let mapped = images[part];
			if (mapped === undefined) {
				mapped = 0;
				for (const x of this.#party(p).inputStrings.letters(part))
					mapped = inputStrings.append(mapped, inputs[x] ?? 0);
				images[part] = mapped;
			}
			image[target] = reversed ? inputStrings.reversed(mapped) : mapped;
		});
		return image;
	}

	/** A pattern of dimension 1: what its vector is multiplied by. */
	sign(element: number, pattern: Pattern): number {
		let sign = 1;
		this.#element(element).parts.forEach(({ matrices, signs }, p) => {
			const part = pattern[p] ?? 0;
			let own = signs[part];
			if (own === undefined) {
				own = 1;
				for (const x of this.#party(p).inputStrings.letters(part)) own *= matrices[x]?.[0] ?? 1;
				signs[part] = own;
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
		const { parts, sources } = this.#element(element);
		const inputs = pattern.map((part, p) => this.#party(p).inputStrings.letters(part));
		const dimensions = inputs.map((own, p) =>
			own.map((x) => this.#party(p).centred.dimensionOf(x))
		);
		const sizes = [...dimensions.flat(), columns];
		const matrices = inputs.flatMap((own, p) => own.map((x) => parts[p]?.matrices[x]));
		let current = { re: vectors.slice(), im: null };
		let other = { re: new Float64Array(vectors.length), im: null };
		tensorFactors(sizes).forEach((factor, axis) => {
			const re = matrices[axis];
			if (!re) return;
			applyToFactor({ re, im: null }, factor, current, other);
			[current, other] = [other, current];
		});
		let first = 0;
		const axes = dimensions.map((own) => own.map(() => first++));
		const order = sources.flatMap((source) => {
			const own = axes[source] ?? [];
			return reversed ? own.toReversed() : own;
		});
		return permuteAxes(current.re, sizes, [...order, first]);
	}
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

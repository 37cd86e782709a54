import type { Scenario } from '../scenario/scenario';

/**
 * Words in the projectors E(input, output) of each party, last output of every input left out
 * (Collins-Gisin). A word keeps one string of letters per party, since operators of different
 * parties commute; a letter is the projector's number within its party. Reduced: a repeated
 * projector is merged, two outputs of one input next to each other give zero.
 * Navascues, Pironio, Acin, New J. Phys. 10, 073013 (2008).
 */
export type Word = readonly (readonly number[])[];

/** The projectors of each party, by number. */
export interface Alphabet {
	readonly scenario: Scenario;
	/** `inputs[party][letter]`, `outputs[party][letter]`. */
	readonly inputs: readonly (readonly number[])[];
	readonly outputs: readonly (readonly number[])[];
	/** `first[party][input]` is the letter of E(input, 0). */
	readonly first: readonly (readonly number[])[];
}

export function makeAlphabet(scenario: Scenario): Alphabet {
	const inputs: number[][] = [];
	const outputs: number[][] = [];
	const first: number[][] = [];
	for (const counts of scenario.outputs) {
		const partyInputs: number[] = [];
		const partyOutputs: number[] = [];
		const partyFirst: number[] = [];
		counts.forEach((count, input) => {
			partyFirst.push(partyInputs.length);
			for (let output = 0; output < count - 1; output++) {
				partyInputs.push(input);
				partyOutputs.push(output);
			}
		});
		inputs.push(partyInputs);
		outputs.push(partyOutputs);
		first.push(partyFirst);
	}
	return { scenario, inputs, outputs, first };
}

/** The letter of E(input, output). @throws RangeError for a last output or outside the scenario. */
export function letterOf(alphabet: Alphabet, party: number, input: number, output: number): number {
	const count = alphabet.scenario.outputs[party]?.[input] ?? 0;
	const first = alphabet.first[party]?.[input];
	if (first === undefined || output < 0 || output >= count - 1)
		throw new RangeError(`party ${party}, input ${input} has no projector for output ${output}`);
	return first + output;
}

/** Appends letters to a reduced string; null when the product vanishes. */
function reduceOnto(
	inputs: readonly number[],
	head: readonly number[],
	tail: readonly number[]
): number[] | null {
	const reduced = [...head];
	for (const letter of tail) {
		const last = reduced.at(-1);
		if (last !== undefined && inputs[last] === inputs[letter]) {
			if (last !== letter) return null;
			continue;
		}
		reduced.push(letter);
	}
	return reduced;
}

/** u^dagger v, reduced; null when it vanishes. */
export function adjointProduct(alphabet: Alphabet, u: Word, v: Word): Word | null {
	const product: number[][] = [];
	for (let party = 0; party < u.length; party++) {
		const head = [...(u[party] ?? [])].reverse();
		const reduced = reduceOnto(alphabet.inputs[party] ?? [], head, v[party] ?? []);
		if (!reduced) return null;
		product.push(reduced);
	}
	return product;
}

function keyOf(word: Word): string {
	return word.map((letters) => letters.join(',')).join('|');
}

/** One name for a word and its adjoint: the real part of a moment is the same for both. */
export function momentKey(word: Word): string {
	const key = keyOf(word);
	if (word.every((letters) => letters.length < 2)) return key;
	const reversed = keyOf(word.map((letters) => [...letters].reverse()));
	return reversed < key ? reversed : key;
}

/** All reduced strings of exactly `length` letters of one party. */
export function reducedStrings(alphabet: Alphabet, party: number, length: number): number[][] {
	const inputs = alphabet.inputs[party] ?? [];
	let strings: number[][] = [[]];
	for (let step = 0; step < length; step++) {
		strings = strings.flatMap((letters) => {
			const last = letters.at(-1);
			const lastInput = last === undefined ? undefined : inputs[last];
			return inputs.flatMap((input, letter) => (input === lastInput ? [] : [[...letters, letter]]));
		});
	}
	return strings;
}

import type { Alphabet, Word } from './moment-words';

/**
 * Moments of the maximally mixed state: within a party the projectors of different inputs are free
 * from each other and each has trace 1/outputs; parties are independent. Reduced words are linearly
 * independent there, so every moment matrix of it is positive definite: the solver's start.
 * Freeness (Voiculescu): a product of centred elements, neighbours from different algebras, has
 * trace 0. Expanding that product gives each trace from those of shorter words.
 */
export function mixedStateMoment(alphabet: Alphabet, cache: Map<string, number>, word: Word) {
	return word.reduce(
		(product, letters, party) => product * stringTrace(alphabet, party, letters, cache),
		1
	);
}

function stringTrace(
	alphabet: Alphabet,
	party: number,
	letters: readonly number[],
	cache: Map<string, number>
): number {
	if (letters.length === 0) return 1;
	const key = `${party}:${letters.join(',')}`;
	const known = cache.get(key);
	if (known !== undefined) return known;
	const inputs = alphabet.inputs[party] ?? [];
	const counts = alphabet.scenario.outputs[party] ?? [];
	const traceOf = (letter: number) => 1 / (counts[inputs[letter] ?? 0] ?? 1);
	let trace = 0;
	for (let taken = 1; taken < 2 ** letters.length; taken++) {
		let factor = -1;
		let rest: number[] | null = [];
		for (const [place, letter] of letters.entries()) {
			if ((taken >> place) & 1) {
				factor *= -traceOf(letter);
				continue;
			}
			const last: number | undefined = rest.at(-1);
			if (last !== undefined && inputs[last] === inputs[letter]) {
				if (last === letter) continue;
				rest = null;
				break;
			}
			rest.push(letter);
		}
		if (rest) trace += factor * stringTrace(alphabet, party, rest, cache);
	}
	cache.set(key, trace);
	return trace;
}

import { SolverStop, type Level } from '../problem';
import type { Event, Scenario } from '../scenario/scenario';
import { levelWords, printLevel } from './moment-level';
import { letterOf, makeAlphabet, type Alphabet, type Word } from './moment-words';
import { wordProducts } from './word-products';

/** Named limits: past them a solve would take many minutes or more than half a gigabyte. */
export const MOST_ROWS = 600;
export const MOST_MOMENTS = 6000;

/** The moment matrix of a level: which cell holds which moment. */
export interface MomentMatrix {
	readonly alphabet: Alphabet;
	readonly level: Level;
	readonly words: readonly Word[];
	readonly size: number;
	/** -1 zero, 0 one, i > 0 moment i; moments are numbered along the lower triangle, row by row. */
	readonly index: Int32Array;
	/** One word per moment; entry 0 is the identity. */
	readonly moments: readonly Word[];
	/** Number of the moment that a reduced word (or its adjoint) is, null where it is missing. */
	numberOf(word: Word): number | null;
}

/**
 * @param poll called for every row of the matrix.
 * @throws SolverStop `limit` past MOST_ROWS, with the figure; `failed` for a level that does not
 *   fit the scenario.
 */
export function makeMomentMatrix(
	scenario: Scenario,
	level: Level,
	poll?: () => void
): MomentMatrix {
	const alphabet = makeAlphabet(scenario);
	const words = levelWords(scenario, level, MOST_ROWS);
	const n = words.length;
	const parties = wordProducts(alphabet.inputs, words);
	const index = new Int32Array(n * n).fill(-1);
	const identity: Word = scenario.outputs.map(() => []);
	const moments: Word[] = [identity];
	const numbers = new Map([[0, 0]]);
	for (let i = 0; i < n; i++) {
		poll?.();
		for (let j = 0; j <= i; j++) {
			let key = 0;
			for (const { place, distinct, table, stride } of parties) {
				const product = table[(place[i] ?? 0) * distinct.length + (place[j] ?? 0)] ?? -1;
				if (product < 0) {
					key = -1;
					break;
				}
				key += stride * product;
			}
			if (key < 0) continue;
			let number = numbers.get(key);
			if (number === undefined) {
				number = moments.length;
				let adjoint = 0;
				const word = parties.map(({ strings, place, distinct, table, stride }) => {
					const product = table[(place[i] ?? 0) * distinct.length + (place[j] ?? 0)] ?? 0;
					adjoint += stride * strings.reversed(product);
					return strings.letters(product);
				});
				numbers.set(key, number).set(adjoint, number);
				moments.push(word);
			}
			index[i * n + j] = number;
			index[j * n + i] = number;
		}
	}
	const numberOf = (word: Word): number | null => {
		let key = 0;
		for (const [party, { strings, stride }] of parties.entries()) {
			const id = strings.find(word[party] ?? []);
			if (id === null) return null;
			key += stride * id;
		}
		return numbers.get(key) ?? null;
	};
	return { alphabet, level, words, size: n, index, moments, numberOf };
}

/** @throws SolverStop `limit` when the linear system of that many unknowns would be too large. */
export function refuseManyMoments(level: Level, unknowns: number): void {
	if (unknowns <= MOST_MOMENTS) return;
	const megabytes = Math.round((8 * unknowns * unknowns) / 2 ** 20);
	throw new SolverStop(
		'limit',
		`level ${printLevel(level)} has ${unknowns} free moments (${megabytes} MB for the ` +
			`linear system); the limit is ${MOST_MOMENTS}`
	);
}

/** Number of the moment that a product of events (no last outputs) is, or null where it is missing. */
export function momentOfEvents(matrix: MomentMatrix, events: readonly Event[]): number | null {
	return matrix.numberOf(wordOfEvents(matrix.alphabet, events));
}

export function wordOfEvents(alphabet: Alphabet, events: readonly Event[]): Word {
	const word: number[][] = alphabet.scenario.outputs.map(() => []);
	for (const [party, input, output] of events)
		word[party] = [letterOf(alphabet, party, input, output)];
	return word;
}

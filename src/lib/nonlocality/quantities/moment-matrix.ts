import { SolverStop, type Level } from '../problem';
import type { Event, Scenario } from '../scenario/scenario';
import { levelWords, printLevel } from './moment-level';
import {
	adjointProduct,
	letterOf,
	makeAlphabet,
	momentKey,
	type Alphabet,
	type Word
} from './moment-words';

/** Named limits: past them a solve would take many minutes or more than half a gigabyte. */
export const MOST_ROWS = 300;
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
	readonly numberOf: ReadonlyMap<string, number>;
}

/**
 * @param poll called for every row of the matrix.
 * @throws SolverStop `limit` past MOST_ROWS or MOST_MOMENTS, with the figure; `failed` for a level
 *   that does not fit the scenario.
 */
export function makeMomentMatrix(
	scenario: Scenario,
	level: Level,
	poll?: () => void
): MomentMatrix {
	const alphabet = makeAlphabet(scenario);
	const words = levelWords(scenario, level, MOST_ROWS);
	const n = words.length;
	const index = new Int32Array(n * n);
	const identity: Word = scenario.outputs.map(() => []);
	const moments: Word[] = [identity];
	const numberOf = new Map([[momentKey(identity), 0]]);
	words.forEach((u, i) => {
		poll?.();
		for (let j = 0; j <= i; j++) {
			const product = adjointProduct(alphabet, u, words[j] ?? identity);
			let number = -1;
			if (product) {
				const key = momentKey(product);
				const known = numberOf.get(key);
				number = known ?? moments.length;
				if (known === undefined) {
					numberOf.set(key, number);
					moments.push(product);
				}
			}
			index[i * n + j] = number;
			index[j * n + i] = number;
		}
	});
	const unknowns = moments.length - 1;
	if (unknowns > MOST_MOMENTS) {
		const megabytes = Math.round((8 * unknowns * unknowns) / 2 ** 20);
		throw new SolverStop(
			'limit',
			`level ${printLevel(level)} has ${unknowns} free moments (${megabytes} MB for the ` +
				`linear system); the limit is ${MOST_MOMENTS}`
		);
	}
	return { alphabet, level, words, size: n, index, moments, numberOf };
}

/** Number of the moment that a product of events (no last outputs) is, or null where it is missing. */
export function momentOfEvents(matrix: MomentMatrix, events: readonly Event[]): number | null {
	const word = wordOfEvents(matrix.alphabet, events);
	return matrix.numberOf.get(momentKey(word)) ?? null;
}

export function wordOfEvents(alphabet: Alphabet, events: readonly Event[]): Word {
	const word: number[][] = alphabet.scenario.outputs.map(() => []);
	for (const [party, input, output] of events)
		word[party] = [letterOf(alphabet, party, input, output)];
	return word;
}

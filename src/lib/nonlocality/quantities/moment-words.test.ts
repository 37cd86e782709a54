import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { levelWords } from './moment-level';
import { adjointProduct, letterOf, makeAlphabet, momentKey, type Word } from './moment-words';
import type { Level } from '../problem';
import { isClosed, levelNames, momentName, nameOf } from '../certificates/operator-words';
import type { Monomial } from '../certificates/types';

const scenarios = fc
	.array(fc.array(fc.integer({ min: 2, max: 3 }), { minLength: 1, maxLength: 3 }), {
		minLength: 1,
		maxLength: 3
	})
	.map((outputs) => ({ outputs }));

const levels: fc.Arbitrary<Level> = fc.oneof(
	fc.integer({ min: 1, max: 2 }),
	fc.constant({ perParty: 1 }),
	fc.constant({ products: ['A', 'AA'] })
);

/** The check's words and the solver's are written apart: they must say the same. */
describe('operator words', () => {
	test('both ways of listing a level agree, and the list is closed', () => {
		fc.assert(
			fc.property(scenarios, levels, (scenario, level) => {
				const alphabet = makeAlphabet(scenario);
				const words = levelWords(scenario, level, 500).map((word) => printed(alphabet, word));
				const names = new Set(words.map(nameOf));
				expect(names).toEqual(levelNames(scenario, level));
				expect(isClosed(words, names)).toBe(true);
			}),
			{ numRuns: 40 }
		);
	});

	test('both reductions find the same moments', () => {
		fc.assert(
			fc.property(scenarios, levels, (scenario, level) => {
				const alphabet = makeAlphabet(scenario);
				const words = levelWords(scenario, level, 500).slice(0, 25);
				const nameOfKey = new Map<string | null, string | null>();
				const keyOfName = new Map<string | null, string | null>();
				for (const u of words) {
					for (const v of words) {
						const product = adjointProduct(alphabet, u, v);
						const key = product && momentKey(product);
						const name = momentName(printed(alphabet, u), printed(alphabet, v));
						expect(nameOfKey.get(key) ?? name).toBe(name);
						expect(keyOfName.get(name) ?? key).toBe(key);
						nameOfKey.set(key, name);
						keyOfName.set(name, key);
					}
				}
			}),
			{ numRuns: 40 }
		);
	});
});

function printed(alphabet: ReturnType<typeof makeAlphabet>, word: Word): Monomial {
	return word.map((letters, party) =>
		letters.map(
			(letter) =>
				[alphabet.inputs[party]?.[letter] ?? NaN, alphabet.outputs[party]?.[letter] ?? NaN] as const
		)
	);
}

test('has no projector for a last output, nor for an input that is not there', () => {
	const alphabet = makeAlphabet({ outputs: [[2]] });
	expect(letterOf(alphabet, 0, 0, 0)).toBe(0);
	expect(() => letterOf(alphabet, 0, 0, 1)).toThrow(RangeError);
	expect(() => letterOf(alphabet, 0, 1, 0)).toThrow(RangeError);
});

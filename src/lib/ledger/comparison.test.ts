import { describe, expect, it } from 'vitest';
import { comparisonWords } from './comparison';

const all = { valueMatches: true, locatorMatches: true, inequalityMatches: true };
const none = { valueMatches: false, locatorMatches: false, inequalityMatches: false };

describe('what a comparison found', () => {
	it.each([
		[all, 'As in the paper: value, locator and inequality.'],
		[{ ...all, valueMatches: false }, 'Not as in the paper: value.'],
		[{ ...none, valueMatches: true }, 'Not as in the paper: locator and inequality.'],
		[none, 'Not as in the paper: value, locator and inequality.']
	])('is one sentence', (found, words) => {
		expect(comparisonWords(found)).toBe(words);
	});
});

import { describe, expect, it } from 'vitest';
import { comparisonWords, disputing } from './comparison';

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

describe('disputing', () => {
	const right = { valueMatches: true, locatorMatches: true, inequalityMatches: true };
	const wrong = { ...right, locatorMatches: false };
	const [now, before] = [{ current: true }, { current: false }];

	it.each([
		['nothing is compared', [], null],
		['it was found right', [{ ...right, ...now }], null],
		['it was found wrong', [{ ...wrong, ...now }], 0],
		[
			'it was found right after it was found wrong',
			[
				{ ...right, ...now },
				{ ...wrong, ...now }
			],
			null
		],
		[
			'what found it right counts no more',
			[
				{ ...right, ...before },
				{ ...wrong, ...now }
			],
			1
		],
		['what found it wrong counts no more', [{ ...wrong, ...before }], null]
	] as const)('where %s', (_, checks, index) => {
		expect(disputing(checks)).toBe(index === null ? null : checks[index]);
	});
});

import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { passwordProblem } from './password-rules';

const about = { email: 'ines.arden@harrow.example', name: 'Ines Arden' };

describe('passwordProblem', () => {
	it.each([
		['fourteen chars', 'at least 15'],
		['x'.repeat(15), 'repeats itself'],
		['abcabcabcabcabc', 'repeats itself'],
		['Password 12345678', 'Too many people'],
		['Correct-Horse-Battery-Staple', 'Too many people'],
		['merestone merestone', 'mostly your name'],
		['InesArden-harrow-1', 'mostly your name'],
		['ines.arden@harrow', 'mostly your name'],
		['lichen '.repeat(19), 'at most 128']
	])('refuses %s', (password, problem) => {
		expect(passwordProblem(password, about)).toContain(problem);
	});

	it.each([
		'fifteen charact',
		'seven boundary stones',
		'ünïcödé wörds tøø',
		'merestone lichen gate 17 oak',
		[...Array(64).keys()].map((i) => String.fromCodePoint(0x4e00 + i * 7)).join('')
	])('takes %s', (password) => {
		expect(passwordProblem(password, about)).toBeNull();
	});

	it('counts code points after normalisation, not bytes or halves of pairs', () => {
		expect(passwordProblem('🪨🌿🚪🌳🪵🐑🌧🪶🦉🍂🧭🗝🕯📐🧮')).toBeNull();
		expect(passwordProblem('e\u0301'.repeat(14))).toContain('at least 15');
	});

	it('answers for any text, and never takes a short one', () => {
		fc.assert(
			fc.property(fc.string({ unit: 'grapheme', maxLength: 14 }), (password) => {
				const short = [...password.normalize('NFKC')].length < 15;
				expect(short && passwordProblem(password) === null).toBe(false);
			})
		);
	});
});

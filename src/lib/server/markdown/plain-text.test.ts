import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { plainText } from './plain-text';

describe('plainText', () => {
	// Marks of CommonMark 0.31 and its GFM extensions; Unicode's characters for the formulas.
	it.each([
		['a **bold** and *slanted* word', 'a bold and slanted word'],
		['the `code` of it', 'the code of it'],
		['# Heading\n\nBelow', 'Heading\n\nBelow'],
		['- one\n- two', '– one\n– two'],
		['3. one\n4. two', '3. one\n4. two'],
		['see [the page](https://lab.example/a)', 'see the page (https://lab.example/a)'],
		['see https://lab.example/a', 'see https://lab.example/a'],
		['> quoted', 'quoted'],
		['| a | b |\n|---|---|\n| 1 | 2 |', 'a | b\n1 | 2'],
		['it is $2\\sqrt{2}$ here', 'it is 2√2 here'],
		['$\\frac{1}{2}$ or $\\langle A_0 B_1 \\rangle$', '1/2 or ⟨A₀ B₁⟩'],
		['$\\frac{\\alpha}{2} \\le \\pi^2$', 'α/2 ≤π²'],
		['$p_{ab}$ and $x^{n}$', 'p_(ab) and x^n'],
		['$\\begin{pmatrix}1\\end{pmatrix}$', '\\begin{pmatrix}1\\end{pmatrix}'],
		['$$\n2\\sqrt2\n$$', '2√2'],
		['<b>as typed</b>', '<b>as typed</b>'],
		['two\nlines', 'two\nlines']
	])('%j', (text, plain) => {
		expect(plainText(text)).toBe(plain);
	});

	it('keeps every word of a text without marks', () => {
		const word = fc.stringMatching(/^[a-z]{1,8}$/);
		fc.assert(
			fc.property(fc.array(word, { minLength: 1, maxLength: 20 }), (words) => {
				expect(plainText(words.join(' '))).toBe(words.join(' '));
			})
		);
	});

	it('never fails', () => {
		fc.assert(
			fc.property(fc.string({ unit: 'grapheme' }), (text) => {
				expect(typeof plainText(text)).toBe('string');
			})
		);
	});
});

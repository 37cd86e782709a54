import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { NotationError } from './notation-error';
import { plainNotation } from './plain-notation';

const squeezed = (text: string) => plainNotation(text).text.replace(/\s+/g, '');

describe('plainNotation', () => {
	it.each([
		['\\frac{1}{2}', '((1)/(2))'],
		['\\dfrac{\\sqrt{2}}{3}', '((sqrt(2))/(3))'],
		['\\frac12', '((1)/(2))'],
		['2\u221a2', '2sqrt(2)'],
		['\\sqrt{2 + \\sqrt{3}}', 'sqrt(2+sqrt(3))'],
		['A\u2081\u2082 \u2212 B\u2080', 'A_12-B_0'],
		['\\left\\langle A_0 B_{1}\\right\\rangle \\leqslant 2', '<A_0B_{1}><=2'],
		['\\left. x \\right|', 'x|'],
		['2 \\cdot 3 \\times 4 \\otimes 5', '2*3*4*5'],
		['x\u00b2', 'x^2'],
		['cos(pi/8)', 'cos(pi/8)'],
		['\\cos^2(\\pi/8)', '(cos(pi/8)^2)'],
		['cos\u00b2(\u03c0/8)', '(cos(pi/8)^2)'],
		['\\sin^{2}\\left(\\frac{\\pi}{8}\\right)', '(sin(((pi)/(8)))^2)'],
		['\\cos\\frac{\\pi}{8}', 'cos(((pi)/(8)))'],
		['\\(a\\) \\[b\\]', 'ab'],
		['\\begin{align*} a \\label{eq:a} \\end{align*}', 'a'],
		['a \\overset{\\mathrm{L}}{\\leq} 2', 'a<=2'],
		['a \\stackrel{LHV}{\\le} b \\lesssim c', 'a<=b<=c'],
		['\\expval{A_0 B_0}', '<A_0B_0>'],
		['{\\rm A}_{\\mathrm{0}}', '{A}_{{0}}'],
		['$a \\, b$ \\\\', 'ab']
	])('%s', (source, text) => {
		expect(squeezed(source)).toBe(text);
	});

	it('leaves plain text as it is, position by position', () => {
		const plain = fc.string({
			unit: fc.constantFrom(...'ABCDEF0123456789+-*/^()<>=|,_{} .'.split(''))
		});
		fc.assert(
			fc.property(plain, (text) => {
				const { text: out, positions } = plainNotation(text);
				expect(out).toBe(text);
				expect(positions).toEqual([...text, ''].map((_, i) => i));
			})
		);
	});

	it('knows where everything came from', () => {
		const source = 'b + \\frac{x}{y} - z';
		const { text, positions } = plainNotation(source);
		expect(positions).toHaveLength(text.length + 1);
		for (const letter of 'bxyz')
			expect(positions[text.lastIndexOf(letter)]).toBe(source.lastIndexOf(letter));
	});

	it.each([
		['1 + \\alpha', 4],
		['\\sqrt[3]{2}', 0],
		['\\frac{1}{2', 8],
		['\\frac{1}', 0],
		['a \\', 2],
		['\\begin{matrix}', 0],
		['\\label x', 0],
		['\\cos^2 \\pi', 0],
		['1\u00bd', 1]
	])('refuses %s at position %i', (source, position) => {
		expect(() => plainNotation(source)).toThrow(NotationError);
		expect(() => plainNotation(source)).toThrow(expect.objectContaining({ position }));
	});

	it('bounds nesting', () => {
		const deep = '\\sqrt{'.repeat(60) + '2' + '}'.repeat(60);
		expect(() => plainNotation(deep)).toThrow(/50 levels/);
	});
});

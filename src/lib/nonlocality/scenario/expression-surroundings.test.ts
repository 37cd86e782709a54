import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { withoutSurroundings } from './expression-surroundings';

describe('withoutSurroundings', () => {
	it.each([
		['S = A0 B0', 'A0 B0'],
		['$I_{3322} = A_0 + B_0$', 'A_0 + B_0'],
		['I_{\\text{CHSH}}^{(2)} &:= A0 B0', 'A0 B0'],
		['\\hat{\\mathcal{B}} = A0 B0', '\\hat{\\mathcal{B}} = A0 B0'],
		['\\mathcal{B} \\coloneqq A0 B0', 'A0 B0'],
		['B = A0 B0', 'A0 B0'],
		['S_1 = E(0,1)', 'E(0,1)'],
		// An observable, a correlator, a probability is no name, and a number no formula.
		['A_0 = 2', 'A_0 = 2'],
		['A0 = B0', 'A0 = B0'],
		['E_{01} = E_{10}', 'E_{01} = E_{10}'],
		['E(0,1) = A0', 'E(0,1) = A0'],
		['P(a=0|x=0) = 1', 'P(a=0|x=0) = 1'],
		['S = 2\\sqrt{2}', 'S = 2\\sqrt{2}'],
		['A0 % the first\n+ B0', 'A0            \n+ B0'],
		['A0 \\leq 2 \\tag*{(3)}', 'A0 \\leq 2'],
		['A0 \\leq 0.25088(2).', 'A0 \\leq 0.25088(2)'],
		['A0 \\leq 2.828...', 'A0 \\leq 2.828...'],
		['A0 \\leq 2.828....', 'A0 \\leq 2.828....'],
		['A_{0} ', 'A_{0}'],
		['\\left\\{ A0 \\right\\}', '\\left\\{ A0 \\right\\}'],
		['', '']
	])('%j', (source, left) => {
		const text = withoutSurroundings(source);
		expect(text.trim()).toBe(left);
		expect(text.length).toBe(source.length);
	});

	it('keeps every position', () => {
		const pieces = fc.constantFrom(
			...'S = A0 \\leq 2 , . \\quad (3) % \\label{a} \\end{align} $ \\] \\\\ & { } _ := \\equiv'.split(
				' '
			)
		);
		fc.assert(
			fc.property(fc.array(pieces, { maxLength: 12 }), fc.constantFrom('', ' '), (parts, glue) => {
				const source = parts.join(glue);
				const text = withoutSurroundings(source);
				expect(text.length).toBe(source.length);
				for (let i = 0; i < text.length; i++) expect([' ', source[i]]).toContain(text[i]);
			})
		);
	});

	it.each([
		'a'.repeat(4000),
		'\\'.repeat(4000),
		'{'.repeat(4000),
		'\\label{'.repeat(570),
		'$ '.repeat(2000),
		'S_{'.repeat(1300),
		`S${'_{a}'.repeat(1000)}`,
		'\\forall '.repeat(500),
		', (1)'.repeat(800),
		'\\begin{a}'.repeat(440),
		'_a'.repeat(2000)
	])('takes no time on %#', (source) => {
		const before = process.cpuUsage();
		withoutSurroundings(source);
		const { user, system } = process.cpuUsage(before);
		expect((user + system) / 1000).toBeLessThan(200);
	});
});

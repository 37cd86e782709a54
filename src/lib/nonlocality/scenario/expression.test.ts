import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { anyFunctional } from '../../../../tests/factories/any-functional';
import { addCoefficients, negateCoefficient, type Coefficient } from '../exact/coefficient';
import { parseCoefficient } from '../exact/expression';
import { parseExpression, type ExpressionOptions } from './expression';
import { printExpression } from './expression-print';
import { familyFunctional, type FamilySpec } from './families';
import { collinsGisinForm, makeFunctional, type Functional } from './functional';
import { printLatex } from './latex';

/** Equal on every no-signalling behaviour: equal Collins-Gisin coordinates. */
function expectSame(a: Functional, b: Functional): void {
	expect(a.scenario.outputs).toEqual(b.scenario.outputs);
	const negative = b.terms.map((t) => ({ ...t, coefficient: negateCoefficient(t.coefficient) }));
	const difference = makeFunctional(a.scenario, [...a.terms, ...negative]);
	expect(collinsGisinForm(difference).terms).toEqual([]);
}

const read = (text: string, options?: ExpressionOptions) =>
	parseExpression(text, options).functional;
const chsh = familyFunctional({ name: 'chsh' });

describe('ways to write CHSH', () => {
	it.each([
		'A0 B0 + A0 B1 + A1 B0 - A1 B1',
		'A0B0+A0B1+A1B0-A1B1',
		'A_0 B_0 + A_0 B_1 + A_1 B_0 - A_1 B_1',
		'A0*B0 + A0*B1 + A1*B0 - A1*B1',
		'<A_0 B_0> + <A_0 B_1> + <A_1 B_0> - <A_1 B_1>',
		'<A0 B0>+<A0 B1>+<A1 B0>-<A1 B1> <= 2',
		'A0 (B0 + B1) + A1 (B0 - B1)',
		'(A0 + A1) B0 + (A0 - A1) B1',
		'E(0,0) + E(0,1) + E(1,0) - E(1,1)',
		'E_{00}+E_{01}+E_{10}-E_{11}',
		'E_{0,0}+E_{0,1}+E_{1,0}-E_{1,1}',
		'2 * (1/2 A0 B0 + A0 B1/2 + 0.5 A1 B0 - \\frac{1}{2} A1 B1)',
		'\\langle A_0 B_0\\rangle + \\langle A_{0}B_{1}\\rangle + \\langle A_1 B_0 \\rangle - \\langle A_1 B_1\\rangle \\leq 2',
		'\\left\\langle \\hat{A}_0 \\otimes \\hat{B}_0 \\right\\rangle + A_0 B_1 + A_1 B_0 \u2212 A_1 B_1',
		'\u27e8A\u2080 B\u2080\u27e9 + A\u2080B\u2081 + A\u2081B\u2080 - A\u2081B\u2081',
		'sqrt(2) (A0 B0 + A0 B1 + A1 B0 - A1 B1) / \\sqrt{2}',
		'A0 B0 + A0 B1 + A1 B0 - A1 B1 + 1 - 1',
		'$A_0B_0 + A_0B_1 + A_1B_0 - A_1B_1.$',
		'\\(A_0B_0 + A_0\\,B_1 + A_1\\;B_0\\! - A_1\\quad B_1\\)',
		'\\begin{equation} A_0B_0 + A_0B_1 + A_1B_0 - A_1B_1 \\overset{L}{\\leq} 2, \\end{equation}',
		'\\mathrm{A}_0\\mathrm{B}_0 + A_{\\rm 0} B_1 + \\hat A_1 B_0 - \\mathbf{A}_1 \\times B_1',
		'E(A_0,B_0) + E(A_0,B_1) + E(A_1B_0) - E[A_1 B_1]',
		'\\mathbb{E}[A_0B_0] + \\expval{A_0 B_1} + \\braket{A_1B_0} - \\bigl\\langle A_1B_1\\bigr\\rangle',
		'E(x=0,y=0) + E(x=0,y=1) + E(x=1,y=0) - E(x=1,y=1)',
		'C_{00}+C_{01}+C_{10}-C_{11}',
		'2^{-1} * (2 A0 B0 + 2 A0 B1) + 2^-1 * 2 (A1 B0 - A1 B1) .',
		'S = A_0B_0 + A_0B_1 + A_1B_0 - A_1B_1',
		'\\mathcal{B}_{\\text{CHSH}} \\equiv A_0B_0 + A_0B_1 + A_1B_0 - A_1B_1',
		'\\langle S \\rangle := A_0B_0 + A_0B_1 + A_1B_0 - A_1B_1 \\le 2',
		'\\begin{align} \\beta &= A_0B_0 + A_0B_1 \\nonumber\\\\ &\\quad + A_1B_0 - A_1B_1 \\leq 2. \\label{eq:1} \\end{align}',
		'\\begin{aligned} & A_{0}B_{0} + A_{0}B_{1} \\\\ & + A_{1}B_{0} - A_{1}B_{1} \\leqslant 2 \\end{aligned}',
		'\\begin{array}{rl} A_0B_0 & + A_0B_1 \\\\ + A_1B_0 & - A_1B_1 \\end{array}',
		'2 \\geq A_0B_0 + A_0B_1 + A_1B_0 - A_1B_1 % the bound of \\cite{x}',
		'\\langle A_0 B_0\\rangle_{\\rho} + \\langle A_0 B_1\\rangle_\\psi + \\expval{A_1 B_0}_Q - \\langle A_1 B_1\\rangle',
		'{}A_0B_0 + \\nicefrac{2}{2} A_0B_1 + {A_1}{B_0} - \\operatorname{E}[A_1B_1]',
		'\ud835\udc340\ud835\udc350 + \uff210\uff221 + \u0391\u2081\u0392\u2080 - \u0410_1\u0412_1',
		'\\sqrt2\\,\\tfrac{1}{\\sqrt2}\\left[A_0B_0+A_0B_1\\right] + \\dfrac22 A_1B_0 - A_1B_1'
	])('reads %s', (text) => {
		expectSame(read(text), chsh);
	});

	it('reads the probabilities of the form of Clauser and Horne: CHSH = 4 CH + 2', () => {
		const ch = 'P(0,0|0,0) + P(00|01) + P_{AB}(0,0|1,0) - P(0 0|1 1) - P_A(0|0) - P_B(0|0)';
		expectSame(read(`4 (${ch}) + 2`), chsh);
		expectSame(read(`4 (${ch.replaceAll('P', 'p')}) + 2`), chsh);
	});

	it.each([
		['P(a=0,b=1|x=0,y=1)', 'P(0,1|0,1)'],
		['p(ab=01|xy=10)', 'P(0,1|1,0)'],
		['P(b=1,a=0|y=1,x=0)', 'P(0,1|0,1)'],
		['P(a=0, b=1 \\,|\\, x=0, y=1)', 'P(0,1|0,1)'],
		['P(b=1|y=1) + 0 A0', 'P_B(1|1) + 0 A0'],
		['P_A(a=1|x=0)', 'P_A(1|0)'],
		['P(A_0=0,B_1=1)', 'P(0,1|0,1)'],
		['P(B0 = 1) + 0 A0', 'P_B(1|0) + 0 A0'],
		['P(0,1|x=1,y=0)', 'P(0,1|1,0)'],
		['\\mathrm{Pr}(00\\vert 01)', 'P(0,0|0,1)']
	])('reads %s as %s', (written, plain) => {
		expectSame(read(written), read(plain));
	});

	it('reads three parties', () => {
		const mermin = familyFunctional({ name: 'mermin', n: 3 });
		expectSame(read('A0 B0 C0 - A0 B1 C1 - A1 B0 C1 - A1 B1 C0'), mermin);
		expectSame(read('E(0,0,0) - E(0,1,1) - E(1,0,1) - E(1,1,0)'), mermin);
	});
});

describe('index base and scenario', () => {
	it('reads inputs from 1 only where no 0 occurs, and says so', () => {
		const one = parseExpression('A1 B1 + A1 B2 + A2 B1 - A2 B2', { indexBase: 'read' });
		expect(one).toMatchObject({ indexBase: 1, chosen: false });
		expectSame(one.functional, chsh);
		const zero = parseExpression('A0 B1 + A1 B2', { indexBase: 'read' });
		expect(zero).toMatchObject({ indexBase: 0, chosen: false });
		expect(zero.functional.scenario.outputs).toEqual([
			[2, 2],
			[2, 2, 2]
		]);
		expect(parseExpression('A1 B1', { indexBase: 0 })).toMatchObject({
			indexBase: 0,
			chosen: true
		});
	});

	it('takes the smallest scenario that contains every index', () => {
		expect(read('P(2,0|0,1)').scenario.outputs).toEqual([[3], [2, 2]]);
		expect(read('A0 C1').scenario.outputs).toEqual([[2], [2], [2, 2]]);
		expect(read('P_A(0|0)', { outputs: [[4], [3, 2]] }).scenario.outputs).toEqual([[4], [3, 2]]);
		expect(read('3/2', { outputs: [[2], [2]] }).terms).toHaveLength(1);
	});

	it.each([
		['A0 B0 <= 2', { relation: '<=', text: '2' }],
		['A0 B0 \\leq 2\\sqrt{2}', { relation: '<=', text: '2\\sqrt{2}' }],
		['<A0 B0> < 0.25088(2)', { relation: '<=', text: '0.25088(2)' }],
		['<A0 B0>=1', { relation: '=', text: '1' }],
		['\\langle A_0\\rangle\\geq -1', { relation: '>=', text: '-1' }],
		['A0 B0 > -3/2', { relation: '>=', text: '-3/2' }],
		['A_0 B_0 \\;\\leq\\; 2\\,,', { relation: '<=', text: '2' }],
		['A0 B0 \\leq 2.', { relation: '<=', text: '2' }],
		['$A_0 B_0 \\leq 2\\sqrt2.$', { relation: '<=', text: '2\\sqrt2' }],
		['\\[A_0B_0 \\stackrel{LHV}{\\le} 2, \\]', { relation: '<=', text: '2' }],
		['2 \\ge A0 B0', { relation: '<=', text: '2' }],
		['2^2 \\cos(\\pi/4) >= A0 B0', { relation: '<=', text: '2^2 \\cos(\\pi/4)' }],
		['-\\frac{1}{2} \\leq A0 B0', { relation: '>=', text: '-\\frac{1}{2}' }],
		['A0 B0 =< 2', { relation: '<=', text: '2' }],
		['A0 B0 \u2264 2\u221a2 (5)', { relation: '<=', text: '2\u221a2 (5)' }],
		['A0 B0 \u2264 2\u221a2, (5)', { relation: '<=', text: '2\u221a2' }],
		['A0 B0 \\leq_{\\text{LHV}} 2 \\qquad (12a)', { relation: '<=', text: '2' }],
		['A0 B0 \\leq 2 \\text{ for all local models}.', { relation: '<=', text: '2' }],
		['A0 B0 \\leq 2,\\quad \\forall \\lambda', { relation: '<=', text: '2' }],
		['A0 B0 \\leq 2~\\cite{Bell64}, \\tag{3}', { relation: '<=', text: '2' }],
		['A0 B0 = 2\\sqrt{2} \\approx 2.828', { relation: '=', text: '2\\sqrt{2}' }],
		['\\begin{eqnarray} A_0B_0 &\\leq& 2 \\end{eqnarray}', { relation: '<=', text: '2' }],
		['A0 B0 \\approx 2.828...', { relation: '=', text: '2.828...' }],
		['A0 B0', null]
	])('finds the bound in %s', (text, bound) => {
		expect(parseExpression(text).claimedBound).toEqual(bound);
	});
});

describe('printing', () => {
	it.each<[FamilySpec, string]>([
		[{ name: 'chsh' }, 'A0 B0 + A0 B1 + A1 B0 - A1 B1'],
		[{ name: 'tilted-chsh', alpha: 'sqrt(2)/2' }, '1/2*sqrt(2) A0 + A0 B0 + A0 B1 + A1 B0 - A1 B1'],
		[{ name: 'mermin', n: 3 }, 'A0 B0 C0 - A0 B1 C1 - A1 B0 C1 - A1 B1 C0']
	])('prints %j', (spec, text) => {
		expect(printExpression(familyFunctional(spec))).toBe(text);
	});

	it('prints LaTeX', () => {
		expect(printLatex(chsh, { indexBase: 1 })).toBe('A_1B_1+A_1B_2+A_2B_1-A_2B_2');
		const tilted = familyFunctional({ name: 'tilted-chsh', alpha: '1/2' });
		expect(printLatex(tilted)).toBe('\\tfrac{1}{2}\\,A_0+A_0B_0+A_0B_1+A_1B_0-A_1B_1');
		expect(printLatex(read('P(2,0|0,0) - 2 sqrt(2) P_A(0|0)'))).toBe(
			'-2\\sqrt{2}\\,P_{A}(0|0)+P(2,0|0,0)'
		);
		expect(printLatex(read('cos(pi/8) A0'))).toBe('\\cos (\\tfrac{1}{8}\\,\\pi )\\,A_0');
	});

	it('is linear: a sum of texts is the sum of the functionals', () => {
		const outputs = [0, 1, 2].map(() => [2, 2, 2]);
		const binary = anyFunctional(outputs);
		fc.assert(
			fc.property(binary, binary, (f, g) => {
				const text = `(${printExpression(f)}) - 3/2 (${printExpression(g)})`;
				const scaled = g.terms.map((t) => ({
					...t,
					coefficient: minusThreeHalves(t.coefficient)
				}));
				expectSame(read(text, { outputs }), makeFunctional({ outputs }, [...f.terms, ...scaled]));
			}),
			{ numRuns: 100 }
		);
	});

	it('takes probabilities where they are shorter', () => {
		expect(printExpression(familyFunctional({ name: 'gyni', n: 3 }))).toBe(
			'1/4 P(0,0,0|0,0,0) + 1/4 P(1,1,0|0,1,1) + 1/4 P(0,1,1|1,0,1) + 1/4 P(1,0,1|1,1,0)'
		);
	});

	it('prints and reads six parties', () => {
		const f = familyFunctional({ name: 'mermin', n: 6 });
		const text = printExpression(f);
		expect(text.split(/[+-]/)).toHaveLength(32);
		expect(read(text).terms).toEqual(f.terms);
	});
});

/** -3/2 c, as -(c + c/2), so that the property does not lean on the same multiplication. */
function minusThreeHalves(c: Coefficient): Coefficient {
	return negateCoefficient(addCoefficients(c, parseCoefficient(`(${c.text})/2`)));
}

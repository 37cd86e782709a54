import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { addCoefficients, negateCoefficient, type Coefficient } from '../exact/coefficient';
import { parseCoefficient } from '../exact/expression';
import { NotationError, NotationLimitError } from '../exact/notation-error';
import { parseExpression, type ExpressionOptions } from './expression';
import { printExpression } from './expression-print';
import { familyFunctional, type FamilySpec } from './families';
import { collinsGisinForm, makeFunctional, type Functional } from './functional';
import { printLatex } from './latex';
import type { Event, Scenario } from './scenario';

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

function failure(text: string, options?: ExpressionOptions): unknown {
	try {
		parseExpression(text, options);
	} catch (error) {
		return error;
	}
	return null;
}

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

describe('what cannot be read', () => {
	it.each<[string, ExpressionOptions, number | null, RegExp, RegExp | null]>([
		['', {}, 0, /empty/, /for example/],
		['A0 B0 + ', {}, 8, /ends too early/, null],
		['A0 B0 + A0 & # B1', {}, 13, /# has no meaning/, null],
		['A0 B0 + A B1', {}, 8, /A needs an input/, /A0 or A1/],
		['a0 b0', {}, 0, /a is not a party/, /Write A0/],
		['S + A0 B0 = 2', {}, 0, /S is not a party/, /right-hand side alone/],
		['Z0', {}, 0, /not a party/, /A, B, C/],
		['A0 A1', {}, 3, /party A occurs twice/, /\+ or -/],
		['A0 B0 A1', {}, 6, /party A occurs twice/, null],
		['1/A0', {}, 2, /only a number can be divided by/, null],
		['A0^2', {}, 2, /no power/, /square of an observable is 1/],
		['(A0 + A1)^2', {}, 1, /only a number can be raised/, null],
		['sqrt(A0)', {}, 5, /sqrt takes a number/, null],
		['A0 B0 / 0', {}, 8, /division by zero/, null],
		['sqrt 2 A0', {}, 0, /needs parentheses/, /sqrt\(/],
		['1/2sqrt(2) A0', {}, 3, /below the fraction bar/, /\*/],
		['A0 B0 / 2\u221a2', {}, 9, /below the fraction bar/, /\*/],
		['1/2\\sqrt{2} A0', {}, 3, /below the fraction bar/, /\*/],
		['1/sqrt(2) sqrt(3) A0', {}, 10, /below the fraction bar/, /\*/],
		['(A0 B0', {}, 0, /never closed/, /Add a \)/],
		['A0 B0)', {}, 5, /never opened/, null],
		['<A0 B0', {}, 0, /never closed/, null],
		['|A0 B0|', {}, 0, /absolute values/, /without the bars/],
		['A0 B0 <= ', {}, 6, /bound after the relation is missing/, null],
		['-2 <= A0 B0 <= 2', {}, 12, /between two bounds/, /one relation/],
		['A0 B0 <= A1 B1', {}, 9, /right-hand side has to be a number/, /to the left/],
		[
			'A0 B0 \\overset{L}{\\leq} 2 \\overset{Q}{\\leq} 2\\sqrt2',
			{},
			24,
			/more than one bound/,
			/claimed/
		],
		['2 <= 3', {}, 0, /no observable/, null],
		['A_0^{(1)} A_1^{(2)}', {}, 3, /no upper index/, /A_0 B_1/],
		['A^{(1)}_0 A^{(2)}_1', {}, 1, /no upper index/, /A_0 B_1/],
		['A B + A B^\\prime', {}, 10, /primes/, /A0 and A1/],
		['A0 B0 + i A1 B1', {}, 8, /imaginary/, /real/],
		['\\alpha A_0', {}, 0, /\\alpha is not understood/, /number in its place/],
		['\\langle\\psi|A_0|\\psi\\rangle', {}, 7, /\\psi/, /Leave the state out/],
		['\\sigma_x A_0', {}, 0, /\\sigma/, /A_0, B_1/],
		['\\sum_{x,y} E_{xy}', {}, 0, /\\sum/, /every term/],
		['A0 + \u2211 B0', {}, 5, /sums/, /every term/],
		['P(a\\neq b|0,0)', {}, 3, /outputs differ is a sum/, /Write it out/],
		['0,5 A0', {}, 1, /comma/, /0\.5/],
		['A0 B0, A1 B1', {}, 5, /comma/, /one formula/],
		['1E3 A0', {}, 0, /not clear whether 1E3/, /1e3/],
		['P(0,1|1,0', {}, 0, /never closed/, /P\(0,1\|1,0\)/],
		['E(0,1', {}, 0, /never closed/, null],
		['P(0,1)', {}, 5, /outputs, a bar and inputs/, null],
		['P(0,1|A_0B_1)', {}, 6, /have to be numbers/, null],
		['A0 ** B0', {}, 4, /can't stand here/, null],
		['A0 . B0', {}, 3, /stray point/, null],
		['A0 \u20ac', {}, 3, /this character has no meaning/, null],
		['P(A_0 + 1)', {}, 2, /not understood/, null],
		['G0 A0', {}, 0, /G is not a party/, /A, B, C, D, E and F/],
		['0/0 A0', {}, 2, /division by zero/, null],
		['A0 B0 \\not\\leq 2', {}, 6, /\\not/, null],
		['\ud835\udc34\ud835\udc65', {}, 0, /A needs an input/, null],
		['P(0,1|1)', {}, 0, /2 outputs for 1 inputs/, /commas/],
		['P(a,b|x,y)', {}, 2, /have to be numbers/, /P\(0,1\|1,0\)/],
		['P(a=b|0,0)', {}, 2, /two outputs are equal is a sum/, /Write it out/],
		['P(A_1=B_1)', {}, 2, /two outputs are equal is a sum/, /Write it out/],
		['P(a=0,b=1|x=0)', {}, 0, /input beside b is missing/, /P\(a=0,b=1/],
		['P(a=0|x=0,y=1)', {}, 0, /1 outputs for 2 inputs/, null],
		['P(a=0,a=1|x=0,y=0)', {}, 6, /occurs twice/, null],
		['P(k=0|x=0)', {}, 2, /no party/, /a, b, c/],
		['P_B(a=0|x=0)', {}, 0, /not those of its parties/, /P_A/],
		['P(++|11)', {}, 2, /have to be numbers/, /0 for \+, 1 for -/],
		['E(A_x,B_y)', {}, 2, /which input/, /E\(A0,B1\)/],
		['E(A0 B0 + A0 B1)', {}, 8, /one product/, /apart/],
		['E(A0,A1)', {}, 5, /party A occurs twice/, null],
		['A0 C_{01}', {}, 6, /C01 is no input/, /E\(0,1\)/],
		['A0 B0 + \\dots + A1 B1', {}, 8, /ellipsis/, /every term/],
		['P_A(0,1|1,0)', {}, 0, /1 parties are named/, null],
		['P_{AA}(0,1|1,0)', {}, 0, /twice/, null],
		['A0 B0 + P(0|1)', {}, 8, /does not say whose/, /P_A/],
		['E(0,1) + C0', {}, 0, /does not say whose/, /<A0 B0>/],
		['A0 + P_A(2|0)', {}, 0, /needs an input with two outputs, not 3/, /probabilities/],
		['\\sum_i A_i', {}, 0, /\\sum is not understood/, null],
		["A0 B0 + A0 B'", {}, 12, /primes/, null],
		['A1 B1 + A0 B1', { indexBase: 1 }, 8, /does not exist when indices start at 1/, /start at 0/],
		[
			'A2 B0',
			{
				outputs: [
					[2, 2],
					[2, 2]
				]
			},
			0,
			/no input 2 when indices start at 0 and it has 2/,
			/start at 1/
		],
		[
			'A0 C0',
			{
				outputs: [
					[2, 2],
					[2, 2]
				]
			},
			3,
			/no party C: the scenario has 2/,
			null
		],
		[
			'P(0,2|0,0)',
			{
				outputs: [
					[2, 2],
					[2, 2]
				]
			},
			0,
			/no output 2: it has 2/,
			null
		],
		['A0', { outputs: [[3], [2]] }, 0, /two outputs, not 3/, null],
		['5', {}, 0, /no observable/, null],
		['<script>alert(1)</script>', {}, 0, /s|</, null]
	])('%j', (text, options, position, message, suggestion) => {
		const error = failure(text, options);
		expect(error).toBeInstanceOf(NotationError);
		if (!(error instanceof NotationError)) return;
		expect(error.message).toMatch(message);
		if (!text.includes('script')) expect(error.position).toBe(position);
		if (suggestion) expect(error.suggestion).toMatch(suggestion);
	});

	it.each([
		['A64', /at most 64 inputs/],
		['P(20,0|0,0)', /at most 20 outputs/],
		[`${'A0 B0 + '.repeat(600)}A0`, /at most 4,000 characters/],
		[`${'('.repeat(60)}A0${')'.repeat(60)}`, /50 levels/],
		['E(0,0,0,0,0,0,0)', /at most 6 parties/],
		[
			['A', 'B', 'C', 'D']
				.map((p) => `(${[...Array(7).keys()].map((x) => p + x).join('+')})`)
				.join(''),
			/at most 2,000 terms/
		],
		[
			[...'ABCDEF'].map((p) => `(${[0, 1, 2].map((x) => p + x).join('+')})`).join(''),
			/at most 20,000 probabilities, this one 46,656/
		],
		['A_{1000000000}', /at most 64 inputs, this asks for input 1000000000/],
		['(2^200)^6 A0', /too many digits/],
		['(pi+sqrt(2)+cos(1)+sin(1)+cos(2)+cos(3))^200 A0', /too many irrational parts/]
	])('stops at its limits: %s', (text, message) => {
		const error = failure(text);
		expect(error).toBeInstanceOf(NotationError);
		expect(String(error)).toMatch(message);
	});

	it('tells limits from mistakes', () => {
		expect(failure('A64')).toBeInstanceOf(NotationLimitError);
		expect(failure('A0 +')).not.toBeInstanceOf(NotationLimitError);
	});

	it.each([
		'(',
		'A0+',
		'\\frac{',
		'\\frac1',
		'{',
		'\\sqrt',
		'\\left',
		'<',
		'A_{0}',
		'P(',
		'P(0,',
		'1^',
		'-',
		' ',
		'\\overset{',
		'cos(',
		'\\cos^2(',
		'=',
		'A0 <= ',
		'E_{0,',
		'\u221a',
		'9',
		'\\begin{align}',
		'(A0+1)*',
		'(pi+1)*',
		'0.1',
		'1/'
	])('answers within two tenths of a second on a long run of %j', (piece) => {
		const text = piece.repeat(4000).slice(0, 4000);
		for (const whole of [text, `A0 + ${text}`.slice(0, 4000), `A0 <= ${text}`.slice(0, 4000)]) {
			const before = process.cpuUsage();
			expect(failure(whole) ?? new NotationError('')).toBeInstanceOf(NotationError);
			const { user, system } = process.cpuUsage(before);
			expect((user + system) / 1000).toBeLessThan(200);
		}
	});

	it('throws nothing but NotationError on any text', () => {
		const pieces = fc.constantFrom(
			...'A0 B1 C2 E P ( ) | , _ { } < > <= = + - * / ^ 2 1/3 sqrt( pi \\frac \\sqrt & ~ [ ] ; x E(0,1) P(0,1|1,0) P_A(0|1) \\langle \\rangle'.split(
				' '
			)
		);
		fc.assert(
			fc.property(fc.array(pieces, { maxLength: 14 }), fc.constantFrom('', ' '), (parts, glue) => {
				const error = failure(parts.join(glue), { indexBase: 'read' });
				expect(error === null || error instanceof NotationError).toBe(true);
			}),
			{ numRuns: 3000 }
		);
	});
});

const coefficient = fc
	.oneof(
		fc.integer({ min: -9, max: 9 }).map(String),
		fc
			.tuple(fc.integer({ min: -9, max: 9 }), fc.integer({ min: 1, max: 9 }))
			.map(([p, q]) => `${p}/${q}`),
		fc.constantFrom('sqrt(2)', '-2*sqrt(3)', '1/2-sqrt(5)', '-1-sqrt(2)', 'cos(pi/8)', 'pi')
	)
	.map(parseCoefficient);

/** A functional of 1 to 3 parties; with `binary`, every input has two outputs. */
const functional = (binary: boolean) =>
	fc
		.array(
			fc.array(binary ? fc.constant(2) : fc.integer({ min: 2, max: 3 }), {
				minLength: 1,
				maxLength: 3
			}),
			{ minLength: 1, maxLength: 3 }
		)
		.chain((outputs) => {
			const scenario: Scenario = { outputs };
			const event = (party: number): fc.Arbitrary<Event | null> =>
				fc.tuple(fc.nat(2), fc.nat(2), fc.boolean()).map(([x, a, there]) => {
					const input = x % (outputs[party]?.length ?? 1);
					return there ? [party, input, a % (outputs[party]?.[input] ?? 1)] : null;
				});
			const term = fc
				.tuple(coefficient, fc.tuple(...outputs.map((_, party) => event(party))))
				.map(([c, events]) => ({ coefficient: c, events: events.filter((e) => e !== null) }));
			return fc.array(term, { maxLength: 6 }).map((terms) => makeFunctional(scenario, terms));
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

	it.each([true, false])('parse(print(f)) = f (two outputs everywhere: %s)', (binary) => {
		fc.assert(
			fc.property(functional(binary), fc.constantFrom<(0 | 1)[]>(0, 1), (f, indexBase) => {
				const { outputs } = f.scenario;
				expectSame(read(printExpression(f, { indexBase }), { indexBase, outputs }), f);
				expectSame(read(printLatex(f, { indexBase }), { indexBase, outputs }), f);
			}),
			{ numRuns: 200 }
		);
	});

	it('is linear: a sum of texts is the sum of the functionals', () => {
		const outputs = [0, 1, 2].map(() => [2, 2, 2]);
		const wide = (f: Functional) => makeFunctional({ outputs }, f.terms);
		fc.assert(
			fc.property(functional(true).map(wide), functional(true).map(wide), (f, g) => {
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

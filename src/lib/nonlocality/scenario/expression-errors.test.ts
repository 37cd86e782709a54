import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { NotationError, NotationLimitError } from '../exact/notation-error';
import { parseExpression, type ExpressionOptions } from './expression';

function failure(text: string, options?: ExpressionOptions): unknown {
	try {
		parseExpression(text, options);
	} catch (error) {
		return error;
	}
	return null;
}

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

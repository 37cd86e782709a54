import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { equalCoefficients } from './coefficient';
import { parseCoefficient } from './expression';
import { NotationError } from './notation-error';
import { exactOfDouble, printRational, ratio } from './rational';

const exactText = (text: string) => {
	const { exact } = parseCoefficient(text);
	return exact === null ? null : printRational(exact);
};

describe('parseCoefficient', () => {
	it.each([
		['1', '1'],
		['-1/2', '-1/2'],
		['0.25', '1/4'],
		['0.1', '1/10'],
		['2.5e-4', '1/4000'],
		['12345678901234567890.5', '24691357802469135781/2'],
		['(1 - 3) * 2^-2 / 5', '-1/10'],
		['-2^2', '-4'],
		['--1', '1'],
		['1/2/3', '1/6'],
		['sqrt(4/9)', '2/3'],
		['sqrt(8) / sqrt(2)', '2'],
		['cos(pi/3) + sin(pi/6)', '1'],
		['sqrt(2) - sqrt(2)', '0'],
		['(1 + sqrt(2)) * (1 - sqrt(2))', '-1'],
		['\\frac{1}{2}', '1/2'],
		['\\frac12 \\cdot 4', '2'],
		['\u22121/2', '-1/2'],
		['\u00bd', '1/2'],
		['4^(1/2)', '2']
	])('keeps %s exact', (text, exact) => {
		expect(exactText(text)).toBe(exact);
	});

	it.each([
		['2*sqrt(2)', '2\\sqrt{2}'],
		['2*sqrt(2)', '\\sqrt 8'],
		['2*sqrt(2)', '2\u221a2'],
		['sqrt(2)/2', '1/sqrt(2)'],
		['sqrt(2)/2', '\\frac{1}{\\sqrt{2}}'],
		['sqrt(2)/2', 'cos(pi/4)'],
		['sqrt(2)/2', '\\sin\\left(\\frac{\\pi}{4}\\right)'],
		['1/2 sqrt(3)', 'cos(pi/6)'],
		['cos(pi/8)', 'sin(3*pi/8)'],
		['sqrt(2) - 1', '1/(1+sqrt(2))']
	])('reads %s and %s as the same number', (a, b) => {
		expect(equalCoefficients(parseCoefficient(a), parseCoefficient(b))).toBe(true);
	});

	// Decimals computed to 30 digits with GNU bc (scale=40); the double must lie within its error.
	it.each([
		['2*sqrt(2)', '2.828427124746190097603377448419'],
		['(5*sqrt(5)-11)/2', '0.090169943749474241022934171828'],
		['8*cos(pi/8)', '7.391036260090294049025465515174'],
		['pi', '3.141592653589793238462643383279'],
		['sqrt(2+sqrt(2))', '1.847759065022573512256366378793'],
		['1/(1+pi)', '0.241453007005223854655569310955']
	])('bounds the error of %s', (text, decimal) => {
		const { value, error } = parseCoefficient(text);
		const truth = parseCoefficient(decimal).exact;
		expect(truth).not.toBeNull();
		if (truth === null) return;
		const off = exactOfDouble(value).sub(truth).abs();
		// the decimal itself is cut off after 30 places
		expect(off.compare(exactOfDouble(error).add(ratio(1n, 10n ** 30n)))).toBeLessThanOrEqual(0);
		expect(error).toBeLessThan(1e-14);
	});

	it.each([
		['', 0],
		['abc', 0],
		['1 + foo', 4],
		['a=3', 0],
		['1:1000000000', 1],
		['"text"', 0],
		['2..3', 2],
		['1 + ', 4],
		['sqrt2', 0],
		['1/2sqrt(2)', 3],
		['\\alpha', 0],
		['2 \\sqrt{2', 7],
		['NaN', 0],
		['Infinity', 0],
		['1e999', 0],
		['1/0', 0],
		['sqrt(-1)', 6],
		['9^9^9', 0],
		['constructor', 0],
		['[1,2]', 0],
		['{}', 0],
		['cos(1e300)', 0],
		['sqrt()', 0],
		['pi(2)', 3],
		['2 sqrt', 0],
		['1/pi sqrt(2)', 0]
	])('refuses %j at position %i', (text, position) => {
		let caught: unknown;
		try {
			parseCoefficient(text);
		} catch (error) {
			caught = error;
		}
		expect(caught).toBeInstanceOf(NotationError);
		expect(caught).toMatchObject({ position });
	});

	it('refuses texts past its limits', () => {
		expect(() => parseCoefficient(`1${'+1'.repeat(300)}`)).toThrow(/more than 500 characters/);
		expect(() => parseCoefficient(`${'('.repeat(60)}1${')'.repeat(60)}`)).toThrow(/50 levels/);
	});

	it('refuses a product that spreads into too many or too long square roots', () => {
		const product = (primes: number[]) => primes.map((p) => `(1+sqrt(${p}))`).join('*');
		expect(() => parseCoefficient(product([2, 3, 5, 7, 11, 13, 17]))).toThrow(/irrational parts/);
		expect(() => parseCoefficient(`1234567^9*${product([2, 3, 5, 7])}`)).toThrow(
			/too many irrational numbers/
		);
	});

	it('reads back what it prints', () => {
		const number = fc.oneof(
			fc.integer({ min: -99, max: 99 }).map(String),
			fc.tuple(fc.integer(), fc.integer({ min: 1, max: 999 })).map(([p, q]) => `(${p}/${q})`),
			fc.integer({ min: 0, max: 300 }).map((m) => `sqrt(${m})`),
			fc.tuple(fc.nat(40), fc.integer({ min: 1, max: 40 })).map(([p, q]) => `cos(${p}*pi/${q})`),
			fc.constant('pi')
		);
		const operator = fc.constantFrom(' + ', ' - ', '*');
		const sum = fc.array(fc.tuple(operator, number), { minLength: 1, maxLength: 5 });
		fc.assert(
			fc.property(number, sum, (first, rest) => {
				const read = parseCoefficient(first + rest.map(([op, x]) => op + x).join(''));
				const again = parseCoefficient(read.text);
				expect(again.text).toBe(read.text);
				expect(again.value).toBe(read.value);
			})
		);
	});

	it('throws nothing but NotationError on any text', () => {
		const characters = fc.constantFrom(...'0123456789.+-*/^() sqrtcoinpe\\{}_[]!%":;=,'.split(''));
		fc.assert(
			fc.property(fc.string({ unit: characters, maxLength: 40 }), (text) => {
				try {
					expect(Number.isFinite(parseCoefficient(text).value)).toBe(true);
				} catch (error) {
					expect(error).toBeInstanceOf(NotationError);
				}
			}),
			{ numRuns: 1000 }
		);
	});
});

import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseRational, ratio, toDecimal, type Rational } from '../nonlocality/exact/rational';
import type { ReadingChoice, Relation } from './claim';
import { StatedValueError, claimedRelation, readStatedValue } from './stated-value';

const r = (text: string): Rational => parseRational(text) ?? expect.fail(`${text} is no rational`);

/** The forms and readings that the ledger's rules name, with the interval each stands for. */
type Case = [printed: string, low: string, high: string, choice?: ReadingChoice];
const CASES: Case[] = [
	['0.2509', '0.25085', '0.25095'],
	['0.25090', '0.250895', '0.250905'],
	['2.8284', '2.82835', '2.82845'],
	['.25', '0.245', '0.255'],
	['+0.25', '0.245', '0.255'],
	['-0.25', '-0.255', '-0.245'],
	['\u22120.25', '-0.255', '-0.245'],
	['\u20130.25', '-0.255', '-0.245'],
	['0.0', '-0.05', '0.05'],
	['4', '4', '4'],
	['-4', '-4', '-4'],
	['0', '0', '0'],
	['2.5e-4', '0.000245', '0.000255'],
	['2.5E-4', '0.000245', '0.000255'],
	['2.5 x 10^-4', '0.000245', '0.000255'],
	['2.5 \u00d7 10^{-4}', '0.000245', '0.000255'],
	['2.5\u00b710\u207b\u2074', '0.000245', '0.000255'],
	['2.5 \\times 10^{-4}', '0.000245', '0.000255'],
	['2.5*10**-4', '0.000245', '0.000255'],
	['2.5*10^(-4)', '0.000245', '0.000255'],
	['2.50e3', '2495', '2505'],
	['2e3', '1500', '2500'],
	['82.8 %', '0.8275', '0.8285'],
	['82.8\\%', '0.8275', '0.8285'],
	['43 %', '0.425', '0.435'],
	['43%', '0.425', '0.435'],
	['0.25088(2)', '0.25086', '0.25090'],
	['0.25088(12)', '0.25076', '0.25100'],
	['12.3(1.4)', '10.9', '13.7'],
	['12(3)', '9', '15'],
	['2.50(12)e-3', '0.00238', '0.00262'],
	['82.8(3) %', '0.825', '0.831'],
	['0.25 +- 0.01', '0.24', '0.26'],
	['0.25 \u00b1 0.01', '0.24', '0.26'],
	['0.25 +/- 0.01', '0.24', '0.26'],
	['0.25 \\pm 0.01', '0.24', '0.26'],
	['(2.5 \u00b1 0.1) \u00d7 10^-3', '0.0024', '0.0026'],
	['82.8 \u00b1 0.3 %', '0.825', '0.831'],
	['4/3', '4/3', '4/3'],
	['-4 / 3', '-4/3', '-4/3'],
	['\\frac{4}{3}', '4/3', '4/3'],
	['1 000/3', '1000/3', '1000/3'],
	['50/3 %', '1/6', '1/6'],
	['sqrt(4)/3', '2/3', '2/3'],
	['0.250 875 38', '0.250875375', '0.250875385'],
	['0.250\u2009875', '0.2508745', '0.2508755'],
	['~ 2.8', '2.75', '2.85'],
	['\u2248 2.8', '2.75', '2.85'],
	['\\approx 2.8', '2.75', '2.85'],
	['< 3.0', '2.95', '3.05'],
	['\u2264 3', '3', '3'],
	['\\geq 3', '3', '3'],
	['2.8284.', '2.82835', '2.82845'],
	['2.8284 .', '2.82835', '2.82845'],
	['2.8284,', '2.82835', '2.82845'],
	['$2.8284$', '2.82835', '2.82845'],
	['\\(2.8284\\)', '2.82835', '2.82845'],
	['\\mathbf{2.8284}', '2.82835', '2.82845'],
	['\\textbf{2.8284}', '2.82835', '2.82845'],
	['{2.8284}', '2.82835', '2.82845'],
	['\\approx2.8284', '2.82835', '2.82845'],
	['\\sim 0.2509', '0.25085', '0.25095'],
	['\\lesssim 2.83', '2.825', '2.835'],
	['2.5\\cdot10^{-4}', '0.000245', '0.000255'],
	['2.5 10^-4', '0.000245', '0.000255'],
	['82.8\\,\\%', '0.8275', '0.8285'],
	['0.250\\,875', '0.2508745', '0.2508755'],
	['2.82(8)', '2.74', '2.90'],
	['2.828...', '2.828', '2.829'],
	['2.828\u2026', '2.828', '2.829'],
	['2.828\\ldots', '2.828', '2.829'],
	['-0.25\\dots', '-0.26', '-0.25'],
	['2.828...', '2.8275', '2.8285', 'rounded'],
	['\\frac34', '3/4', '3/4'],
	['\u00bd', '1/2', '1/2'],
	['4', '3.5', '4.5', 'rounded'],
	['0.25088(2)', '0.250875', '0.250885', 'rounded'],
	['2.8284', '2.8284', '2.8285', 'truncated'],
	['-2.8284', '-2.8285', '-2.8284', 'truncated'],
	['82.8 %', '0.828', '0.829', 'truncated'],
	['2.8284', '2.8284', '2.8284', 'exact'],
	['4/3', '4/3', '4/3', 'exact']
];

describe('readStatedValue', () => {
	it.each<Case>(CASES)('reads %s as %s to %s', (printed, low, high, choice) => {
		const read = readStatedValue(printed, choice ?? 'as-printed');
		expect([read.low.toFraction(), read.high.toFraction()]).toEqual([
			r(low).toFraction(),
			r(high).toFraction()
		]);
		expect(read.printed).toBe(printed);
		expect(read.exact).toBe(low === high);
		expect(read.irrational).toBe(false);
	});

	it.each([
		'2*sqrt(2)',
		'2\\sqrt{2}',
		'2\u221a2',
		'2 sqrt(2)',
		'$2\\sqrt2$',
		'2\\,\\sqrt 2',
		'\\(2\\sqrt{2}\\)',
		'2^{3/2}',
		'4\\cos(\\pi/4)',
		'4 \\cos\\frac{\\pi}{4}',
		'4\\sqrt2\\cos^2(\\pi/4)'
	])('encloses %s', (printed) => {
		const read = readStatedValue(printed, 'as-printed');
		// Square of 2 sqrt(2) is 8, whatever the digits.
		expect(read.low.mul(read.low).compare(8)).toBe(-1);
		expect(read.high.mul(read.high).compare(8)).toBe(1);
		expect(read.high.sub(read.low).compare(read.low.mul(ratio(1n, 10n ** 15n)))).toBe(-1);
		expect(read).toMatchObject({ exact: true, irrational: true, precision: null });
		expect(read.text).toMatch(/= 2\.828427124746…$/);
	});

	it('encloses (5*sqrt(5)-11)/2, whose terms cancel, to 1e-15 of its size', () => {
		const { low, high } = readStatedValue('(5*sqrt(5)-11)/2', 'as-printed');
		// It solves x^2 + 11 x = 1 (Hardy's value), so x^2 + 11 x - 1 changes sign between the ends.
		const at = (x: Rational) => x.mul(x).add(x.mul(11)).sub(1).s;
		expect([at(low), at(high)]).toEqual([-1n, 1n]);
		expect(high.sub(low).compare(low.mul(ratio(1n, 10n ** 15n)))).toBe(-1);
	});

	it.each([
		['~2.8', '='],
		['= 2.8', '='],
		['<2.8', '<='],
		['\u2a7d 2.8', '<='],
		['>2.8', '>='],
		['\\ge 2.8', '>=']
	])('takes the relation of %s for %s', (printed, relation) => {
		expect(readStatedValue(printed, 'as-printed').relation).toBe(relation);
	});

	it.each<[string, Relation, Relation | null]>([
		['2.8', '<=', '<='],
		['< 2.8', '=', '<='],
		['< 2.8', '<=', '<='],
		['< 2.8', '>=', null],
		['\u2248 2.8', '>=', '>=']
	])('with %s, the relation %s is %s', (printed, given, claimed) => {
		expect(claimedRelation(readStatedValue(printed, 'as-printed'), given)).toBe(claimed);
	});

	it.each([
		['0.2509', 'Read as 0.25085 to 0.25095'],
		['-0.25', 'Read as \u22120.255 to \u22120.245'],
		['4', 'Read as exactly 4'],
		['4/3', 'Read as exactly 4/3 = 1.333333333333…'],
		['~ 2 sqrt(2)', 'Read as exactly 2 sqrt(2) = 2.828427124746…']
	])('says how %s was read', (printed, text) => {
		expect(readStatedValue(printed, 'as-printed').text).toBe(text);
	});

	it.each([
		['0.2509', 4],
		['4', 0],
		['82.8 %', 3],
		['2.5e-4', 5],
		['2.5e3', -2]
	])('counts the digits behind the point of %s: %i', (printed, precision) => {
		expect(readStatedValue(printed, 'as-printed').precision).toBe(precision);
	});

	it.each([
		['', 0, /Enter the value/],
		['   ', 0, /Enter the value/],
		['NaN', 0, /finite number/],
		[' nan', 1, /finite number/],
		['-Infinity', 1, /finite number/],
		['\u221e', 0, /finite number/],
		['2,8284', 1, /decimal point/],
		['three', 0, /three is not a number/],
		['3 apples', 2, /apples/],
		['2.8 or 2.9', 4, /or is not a number/],
		['1/0', 0, /division by zero/],
		['sqrt(-1)', 6, /negative/],
		['1e999', 0, /exponent/],
		['2.8.3', 3, /can't be read/],
		['1:5', 1, /can't be read/],
		['<script>', 1, /can't be read/],
		['config()', 0, /config/],
		['S = 2.8284', 0, /without the name/],
		['2\\sqrt{2} \\approx 2.828', 10, /two values/],
		['(sqrt(3)-1)/2 = 0.366', 14, /two values/],
		['0.25 - 0.26', 5, /range or a difference/],
		['0.25\u20130.26', 4, /range or a difference/],
		['2.414(2)(3)', 8, /Two uncertainties/],
		['1.23 bits', 8, /without its unit/],
		['1/2\u221a2', 3, /below the fraction bar/],
		['1/2\\sqrt2', 3, /below the fraction bar/],
		['1/2\u03c0', 3, /below the fraction bar/],
		['2 2/3', 1, /two ways/],
		['1\u00bd', 1, /mixed number/],
		['1/3...', 0, /Dots may follow digits only/],
		['\\cos^2 \\pi/8', 0, /needs parentheses/],
		['9'.repeat(201), 200, /at most 200 characters/]
	])('refuses %j at position %i', (printed, position, message) => {
		const read = () => readStatedValue(printed, 'as-printed');
		expect(read).toThrow(StatedValueError);
		expect(read).toThrow(message);
		expect(read).toThrow(expect.objectContaining({ position }));
	});

	it.each(['rounded', 'truncated'] as const)('has no %s reading of a fraction', (choice) => {
		expect(() => readStatedValue('4/3', choice)).toThrow(/no last digit/);
	});
});

describe('readStatedValue, for every decimal', () => {
	const decimal = fc
		.tuple(fc.bigInt(-(10n ** 12n), 10n ** 12n), fc.integer({ min: 1, max: 9 }))
		.map(([units, places]) => ({
			places,
			value: ratio(units, 10n ** BigInt(places)),
			text: toDecimal(ratio(units, 10n ** BigInt(places)), places, 'nearest')
		}));

	it('is half a unit of the last digit either way, whatever the spaces and the minus sign', () => {
		fc.assert(
			fc.property(decimal, fc.boolean(), ({ value, places, text }, unicode) => {
				const spaced = text.replace(/(\d{3})(?=\d)/g, '$1 ');
				const read = readStatedValue(
					unicode ? spaced.replace('-', '\u2212') : spaced,
					'as-printed'
				);
				const half = ratio(1n, 2n * 10n ** BigInt(places));
				expect(read.low.equals(value.sub(half))).toBe(true);
				expect(read.high.equals(value.add(half))).toBe(true);
				expect(read.value.equals(value)).toBe(true);
			})
		);
	});

	it('is the same as its own percentage, and as its own exponent form', () => {
		fc.assert(
			fc.property(decimal, fc.integer({ min: -9, max: 9 }), ({ text, value }, exponent) => {
				const percent = readStatedValue(`${text} %`, 'as-printed');
				expect(percent.value.mul(100).equals(value)).toBe(true);
				const plain = readStatedValue(text, 'as-printed');
				const scaled = readStatedValue(`${text} x 10^${exponent}`, 'as-printed');
				const power = r(`1e${exponent}`);
				expect(scaled.low.equals(plain.low.mul(power))).toBe(true);
				expect(scaled.high.equals(plain.high.mul(power))).toBe(true);
			})
		);
	});

	it('keeps every reading around the printed number', () => {
		const choice = fc.constantFrom<ReadingChoice>('as-printed', 'rounded', 'truncated', 'exact');
		fc.assert(
			fc.property(decimal, choice, ({ text, value }, reading) => {
				const { low, high } = readStatedValue(text, reading);
				expect(low.compare(value)).toBeLessThanOrEqual(0);
				expect(high.compare(value)).toBeGreaterThanOrEqual(0);
			})
		);
	});

	it('reads any text or says where it fails, and never anything else', () => {
		const piece = fc.constantFrom(
			'2',
			'.',
			'8',
			'-',
			'+',
			'(',
			')',
			'%',
			'e',
			' ',
			'/',
			'*',
			'^',
			'sqrt',
			'\\sqrt{',
			'}',
			'\u00b1',
			'~',
			'pi',
			'x10^',
			'nan',
			',',
			'\u221a'
		);
		fc.assert(
			fc.property(fc.array(piece, { maxLength: 12 }), (pieces) => {
				const text = pieces.join('');
				try {
					const { low, high } = readStatedValue(text, 'as-printed');
					expect(low.compare(high)).toBeLessThanOrEqual(0);
				} catch (error) {
					if (!(error instanceof StatedValueError)) throw error;
					expect(error.position).toBeGreaterThanOrEqual(0);
					expect(error.position).toBeLessThanOrEqual(text.length);
				}
			}),
			{ numRuns: 500 }
		);
	});
});

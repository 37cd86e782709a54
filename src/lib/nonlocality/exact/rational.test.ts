import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
	exactOfDouble,
	isExactDouble,
	nextDouble,
	parseRational,
	printRational,
	ratio,
	rationalOfNumber,
	toDecimal,
	toDouble,
	toDoubleDown,
	toDoubleUp
} from './rational';

const finite = fc.double({ noNaN: true, noDefaultInfinity: true });
const rational = fc
	.tuple(
		fc.bigInt({ min: -(10n ** 30n), max: 10n ** 30n }),
		fc.bigInt({ min: 1n, max: 10n ** 30n })
	)
	.map(([n, d]) => ratio(n, d));

describe('rationals', () => {
	it.each([
		['0.1', '1/10'],
		['-.5', '-1/2'],
		['2.50e2', '250'],
		[' 6/4 ', '3/2'],
		['1/0', null],
		['1/2/3', null],
		['', null],
		['1.', '1'],
		['0x10', null],
		['Infinity', null],
		['1e99999', null]
	])('reads %j as %s', (text, printed) => {
		const read = parseRational(text);
		expect(read && printRational(read)).toBe(printed);
	});

	it('prints what it reads back', () => {
		fc.assert(
			fc.property(rational, (x) => {
				expect(parseRational(printRational(x))?.equals(x)).toBe(true);
			})
		);
	});

	it('reads a JSON number as the decimal of its shortest form', () => {
		expect(printRational(rationalOfNumber(0.1))).toBe('1/10');
		fc.assert(
			fc.property(finite, (x) => {
				expect(toDouble(rationalOfNumber(x))).toBe(x === 0 ? 0 : x);
			})
		);
		expect(() => rationalOfNumber(NaN)).toThrow(RangeError);
	});

	it('knows each double exactly', () => {
		fc.assert(
			fc.property(finite, (x) => {
				const exact = exactOfDouble(x);
				expect(toDouble(exact)).toBe(x === 0 ? 0 : x);
				expect(toDoubleDown(exact)).toBe(x === 0 ? 0 : x);
				expect(toDoubleUp(exact) === x).toBe(true);
			})
		);
		expect(isExactDouble(ratio(3n, 8n))).toBe(true);
		expect(isExactDouble(ratio(1n, 3n))).toBe(false);
	});

	it('rounds to the nearest double, and outward to its neighbours', () => {
		fc.assert(
			fc.property(rational, (x) => {
				const [down, near, up] = [toDoubleDown(x), toDouble(x), toDoubleUp(x)];
				expect(exactOfDouble(down).compare(x)).toBeLessThanOrEqual(0);
				expect(exactOfDouble(up).compare(x)).toBeGreaterThanOrEqual(0);
				expect(up === down || up === nextDouble(down, 1)).toBe(true);
				const distance = (y: number) => exactOfDouble(y).sub(x).abs();
				expect(distance(near).compare(distance(down))).toBeLessThanOrEqual(0);
				expect(distance(near).compare(distance(up))).toBeLessThanOrEqual(0);
			})
		);
	});

	it('stays finite at the ends of the doubles', () => {
		const huge = ratio(10n ** 400n);
		expect(toDouble(huge)).toBe(Infinity);
		expect(toDoubleDown(huge)).toBe(Number.MAX_VALUE);
		expect(toDoubleUp(huge)).toBe(Infinity);
		expect(toDoubleUp(huge.neg())).toBe(-Number.MAX_VALUE);
		const tiny = ratio(1n, 10n ** 400n);
		expect(toDoubleDown(tiny)).toBe(0);
		expect(toDoubleUp(tiny)).toBe(Number.MIN_VALUE);
	});

	it('rounds decimals in the direction asked', () => {
		const third = ratio(-1n, 3n);
		expect(['down', 'up', 'nearest'].map((d) => toDecimal(third, 3, d as 'down'))).toEqual([
			'-0.334',
			'-0.333',
			'-0.333'
		]);
		expect(toDecimal(ratio(5n, 2n), 0, 'nearest')).toBe('3');
		fc.assert(
			fc.property(rational, fc.nat(12), (x, places) => {
				const down = parseRational(toDecimal(x, places, 'down'));
				const up = parseRational(toDecimal(x, places, 'up'));
				expect(down && down.compare(x) <= 0 && up && up.compare(x) >= 0).toBe(true);
				expect(down && up && up.sub(down).compare(ratio(1n, 10n ** BigInt(places))) <= 0).toBe(
					true
				);
			})
		);
	});
});

it('refuses what is no number, and leaves infinity where it is', () => {
	expect(() => ratio(1n, 0n)).toThrow(RangeError);
	expect(() => exactOfDouble(NaN)).toThrow(RangeError);
	expect(nextDouble(Infinity, -1)).toBe(Infinity);
	expect(toDecimal(ratio(5n, 2n), 0, 'nearest')).toBe('3');
	expect(toDecimal(ratio(-5n, 2n), 0, 'nearest')).toBe('-3');
});

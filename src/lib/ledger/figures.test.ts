import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { exactOfDouble, parseRational } from '../nonlocality/exact/rational';
import {
	rationalOf,
	sharedDigits,
	showBound,
	showEnclosure,
	showExact,
	withMinusSign
} from './figures';

const double = fc.double({ min: -1e6, max: 1e6, noNaN: true });
const places = fc.integer({ min: 0, max: 14 });

describe('showBound', () => {
	it('never shows a bound tighter than the stored one, nor looser by a unit', () => {
		fc.assert(
			fc.property(double, places, fc.constantFrom('lower', 'upper'), (value, digits, side) => {
				const shown = rationalOf(showBound(value, side, digits));
				const stored = exactOfDouble(value);
				const outward = side === 'lower' ? stored.sub(shown) : shown.sub(stored);
				expect(outward.s >= 0n || outward.n === 0n).toBe(true);
				expect(outward.compare(rationalOf(`1e-${digits}`))).toBe(-1);
			})
		);
	});

	it.each([
		['0.250939731', 'upper', 6, '0.250940'],
		['0.250852210', 'lower', 6, '0.250852'],
		['-0.250852210', 'lower', 6, '-0.250853'],
		['4/3', 'lower', 3, '1.333'],
		['4/3', 'upper', 3, '1.334'],
		['2', 'upper', 6, '2'],
		['0.5', 'lower', 6, '0.5']
	] as const)('shows %s as %s bound of %i digits: %s', (value, side, digits, shown) => {
		expect(showBound(value, side, digits)).toBe(shown);
	});

	it('refuses what is no number', () => {
		expect(() => showBound('two', 'lower')).toThrow(RangeError);
		expect(() => showBound(Number.NaN, 'lower')).toThrow(RangeError);
	});
});

describe('showEnclosure', () => {
	it('shows the digits known: one past where the sides part', () => {
		expect(showEnclosure('0.25085221', '0.250939731')).toEqual({
			lower: '0.250852',
			upper: '0.250940',
			value: '0.250'
		});
		expect(showEnclosure(2, 2)).toEqual({ lower: '2', upper: '2', value: '2' });
		expect(showEnclosure('0.25', null)).toEqual({ lower: '0.25', upper: null, value: null });
	});

	it('always contains the stored enclosure, and both sides share the digits it gives as known', () => {
		fc.assert(
			fc.property(double, double, fc.integer({ min: 0, max: 3 }), (a, b, extra) => {
				const [low, high] = a < b ? [a, b] : [b, a];
				const shown = showEnclosure(low, high, extra);
				const [lower, upper] = [parseRational(shown.lower ?? ''), parseRational(shown.upper ?? '')];
				expect(lower?.compare(exactOfDouble(low))).toBeLessThanOrEqual(0);
				expect(upper?.compare(exactOfDouble(high))).toBeGreaterThanOrEqual(0);
				if (shown.value !== null) {
					expect(shown.lower?.startsWith(shown.value)).toBe(true);
					expect(shown.upper?.startsWith(shown.value)).toBe(true);
				}
			})
		);
	});
});

describe('forms for reading', () => {
	it('shows a fraction with its decimal, cut off and marked so', () => {
		expect(showExact('4/3', 6)).toBe('4/3 = 1.333333…');
		expect(showExact('-4/3', 6)).toBe('-4/3 = -1.333333…');
		expect(showExact('1/4')).toBe('0.25');
		expect(showExact('7')).toBe('7');
	});

	it('shares digits only behind the point', () => {
		expect(sharedDigits('2.8284', '2.8291')).toBe('2.82');
		expect(sharedDigits('2.8', '3.1')).toBeNull();
		expect(sharedDigits('2.8', '2.9')).toBeNull();
	});

	it('uses a true minus sign', () => {
		expect(withMinusSign('-0.25 - 1')).toBe('\u22120.25 \u2212 1');
		expect(withMinusSign('to 1e-7')).toBe('to 1e-7');
		expect(withMinusSign('almost-quantum')).toBe('almost-quantum');
	});
});

import fc from 'fast-check';
import { expect, it } from 'vitest';
import { greatestCommonDivisor, nearbyFraction, overCommonDenominator } from './common-denominator';
import { ratio, toDouble } from './rational';

const fraction = fc
	.tuple(fc.integer({ min: -100_000, max: 100_000 }), fc.integer({ min: 1, max: 9_999 }))
	.map(([n, d]) => ratio(BigInt(n), BigInt(d)));

it('writes rationals over their least common denominator', () => {
	fc.assert(
		fc.property(fc.array(fraction, { minLength: 1, maxLength: 8 }), (values) => {
			const { integers, denominator } = overCommonDenominator(values);
			integers.forEach((n, i) => {
				expect(ratio(n, denominator).equals(values[i] ?? 0)).toBe(true);
			});
			expect([...integers, denominator].reduce(greatestCommonDivisor, 0n)).toBe(1n);
		})
	);
});

it('finds a fraction of small denominator again from its double', () => {
	fc.assert(
		fc.property(fraction, (value) => {
			const found = nearbyFraction(toDouble(value), 1e-10, 10_000n);
			expect(found?.equals(value)).toBe(true);
		})
	);
});

it('refuses numbers that are near no small fraction', () => {
	expect(nearbyFraction(Math.SQRT1_2, 1e-10, 10_000n)).toBeNull();
	expect(nearbyFraction(NaN, 1e-10, 10_000n)).toBeNull();
	expect(nearbyFraction(Infinity, 1e-10, 10_000n)).toBeNull();
});

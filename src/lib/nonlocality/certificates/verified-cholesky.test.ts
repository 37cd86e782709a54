import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { scaleDouble, unscaleDown, unscaleUp } from './scaled-integers';
import { provesPositive } from './verified-cholesky';

const rows = (matrix: readonly (readonly number[])[]) =>
	matrix.map((row) => Float64Array.from(row));

describe('verified Cholesky', () => {
	test('what is positive is proved, what is not is refused', () => {
		expect(provesPositive(rows([[2], [1, 2]]), 0)).toBe(true);
		expect(provesPositive(rows([[1], [1, 1 + 1e-12]]), 0)).toBe(true);
		expect(provesPositive(rows([[1], [1.000001, 1]]), 0)).toBe(false);
		expect(provesPositive(rows([[-1]]), 0)).toBe(false);
		expect(provesPositive(rows([[NaN]]), 0)).toBe(false);
		expect(provesPositive(rows([[Infinity]]), 0)).toBe(false);
		expect(provesPositive(rows([[1], [NaN, 1]]), 0)).toBe(false);
	});
	test('a singular matrix is proved only with a shift', () => {
		const singular = rows([[1], [1, 1]]);
		expect(provesPositive(singular, 0)).toBe(false);
		expect(provesPositive(singular, 1e-14)).toBe(true);
	});
	test('never proves more than is true', () => {
		// [[1, b], [b, 1]] has smallest eigenvalue 1 - |b| exactly.
		const near = fc.integer({ min: -40, max: 40 }).map((ulps) => 1 + ulps * 2 ** -52);
		const shift = fc.integer({ min: 0, max: 40 }).map((units) => units * 2 ** -53);
		fc.assert(
			fc.property(near, shift, (b, s) => {
				if (provesPositive(rows([[1], [b, 1]]), s)) expect(1 - b).toBeGreaterThanOrEqual(-s);
			})
		);
		expect(provesPositive(rows([[1], [1 + 2 ** -52, 1]]), 0)).toBe(false);
	});
	test('doubles are integers times 2^-1074', () => {
		fc.assert(
			fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (x) => {
				expect(unscaleDown(scaleDouble(x))).toBe(x + 0);
				expect(unscaleUp(scaleDouble(x))).toBe(x + 0);
			})
		);
		expect(scaleDouble(Number.MIN_VALUE)).toBe(1n);
		expect(scaleDouble(-1)).toBe(-(2n ** 1074n));
		expect(() => scaleDouble(NaN)).toThrow(RangeError);
	});
});

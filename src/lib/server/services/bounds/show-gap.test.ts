import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { exactOfDouble, parseRational, ratio } from '../../../nonlocality/exact/rational';
import { isClosed, showGap } from './show-gap';

describe('a gap', () => {
	it.each([
		['0', '0'],
		['0.00000018', '1.8e-7'],
		['0.000000181', '1.9e-7'],
		['0.000401', '0.00041'],
		['0.25', '0.25'],
		['1/3', '0.34'],
		['12.01', '13']
	])('%s is shown as %s', (text, shown) => {
		expect(showGap(parseRational(text) ?? ratio(0n))).toBe(shown);
	});

	it('is never shown smaller than it is', () => {
		fc.assert(
			fc.property(fc.double({ min: 1e-12, max: 1e4, noNaN: true }), (gap) => {
				const shown = Number(showGap(exactOfDouble(gap)));
				expect(shown).toBeGreaterThanOrEqual(gap * (1 - 1e-9));
				expect(shown).toBeLessThan(gap * 1.11);
			})
		);
	});

	it('of at most 1e-7 of the value is closed', () => {
		const at = (text: string) => parseRational(text) ?? ratio(0n);
		expect(isClosed(at('2.82842712'), at('2.8284272'))).toBe(true);
		expect(isClosed(at('0.25085'), at('0.25094'))).toBe(false);
		expect(isClosed(at('0'), at('0.0000002'))).toBe(false);
	});
});

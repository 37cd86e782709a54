import { describe, expect, it } from 'vitest';
import { beforePoint, knownSides, shownBetween } from './shown-between';

describe('the sides of an enclosure', () => {
	it('keep two digits past the place where they part, rounded outward', () => {
		expect(knownSides({ lower: '2.828427124745619', upper: '2.828427125709381' })).toEqual({
			lower: '2.82842712474',
			upper: '2.82842712571'
		});
		expect(knownSides({ lower: '0.25086180', upper: '0.25087557' })).toEqual({
			lower: '0.250861',
			upper: '0.250876'
		});
	});

	it('keep at least the places asked for, and what is exact or one-sided whole', () => {
		expect(knownSides({ lower: '0.25086180', upper: '0.25087557' }, 7)).toEqual({
			lower: '0.2508618',
			upper: '0.2508756'
		});
		const exact = { lower: '0.3333333333333', upper: '0.3333333333333' };
		expect(knownSides(exact)).toEqual(exact);
		expect(knownSides({ lower: null, upper: '0.291283445' }).upper).toBe('0.291283445');
	});

	it('are one figure where they share enough of it', () => {
		expect(shownBetween('2.828427124', '2.828427125')).toBe('2.82842712');
		expect(shownBetween('0.25', '0.25')).toBe('0.25');
		expect(shownBetween(null, '4')).toBe('≤ 4');
	});

	it('meet on the decimal point', () => {
		expect(['11.59', '\u221212', '0.25 …', '2\\sqrt{2}'].map(beforePoint)).toEqual([2, 3, 1, null]);
	});
});

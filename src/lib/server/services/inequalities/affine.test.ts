import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseRational, ratio } from '../../../nonlocality/exact/rational';
import { mapSide, mapSides, readMap, showSides } from './affine';
import { isIdentity, mapBetween } from './canonical-subject';
import { scenarioLabel, scenarioSentence } from './scenario-words';

describe('an affine map', () => {
	it('moves exact values exactly', () => {
		const map = readMap({ scale: '1/4', shift: '-1/2' });
		const sides = mapSides(map, { lower: 3.9, upper: 4.1, exact: '4' });
		expect(sides.lower?.toFraction()).toBe('1/2');
		expect(showSides(sides)).toEqual({ lower: '0.5', upper: '0.5' });
	});

	it('by an irrational factor is never tighter than what was given', () => {
		const map = readMap({ scale: 'sqrt(2)', shift: 'pi' });
		fc.assert(
			fc.property(fc.integer({ min: -1e6, max: 1e6 }), fc.integer({ min: 1, max: 1e6 }), (n, d) => {
				const value = ratio(BigInt(n), BigInt(d));
				const [low, high] = [mapSide(map, value, 'lower'), mapSide(map, value, 'upper')];
				expect(low.compare(high)).toBeLessThanOrEqual(0);
				const true_ = (n / d) * Math.SQRT2 + Math.PI;
				const slack = Math.abs(true_) * 1e-14 + 1e-14;
				expect(low.valueOf()).toBeLessThanOrEqual(true_ + slack);
				expect(high.valueOf()).toBeGreaterThanOrEqual(true_ - slack);
				expect(high.sub(low).valueOf()).toBeLessThan(1e-15 * Math.max(1, Math.abs(n / d)));
			})
		);
	});

	it('between two forms of one inequality undoes the one and does the other', () => {
		const rational = fc
			.tuple(fc.integer({ min: -50, max: 50 }), fc.integer({ min: 1, max: 20 }))
			.map(([n, d]) => `${n}/${d}`);
		const scale = fc
			.tuple(fc.integer({ min: 1, max: 50 }), fc.integer({ min: 1, max: 20 }))
			.map(([n, d]) => `${n}/${d}`);
		const form = fc.record({ scale, shift: rational });
		fc.assert(
			fc.property(form, form, rational, (from, to, text) => {
				const value = parseRational(text) ?? ratio(0n);
				const there = mapSide(readMap(from), value, 'lower');
				const here = mapSide(readMap(to), value, 'lower');
				expect(mapSide(readMap(mapBetween(from, to)), there, 'lower').equals(here)).toBe(true);
				expect(isIdentity(mapBetween(from, from))).toBe(true);
			})
		);
	});
});

describe('a scenario in words', () => {
	it.each([
		[
			[
				[2, 2],
				[2, 2]
			],
			'2 in, 2 out',
			'2 parties, 2 inputs each, 2 outputs'
		],
		[
			[
				[2, 2, 2],
				[2, 2, 2, 2]
			],
			'3 and 4 in, 2 out',
			'2 parties, 3 and 4 inputs, 2 outputs'
		],
		[
			[
				[2, 3],
				[2, 2]
			],
			'2 in, 2 or 3 out',
			'2 parties, 2 inputs each, 2 or 3 outputs'
		],
		[[[2], [2], [2]], '3 parties, 1 in, 2 out', '3 parties, 1 input each, 2 outputs']
	])('%j', (outputs, label, sentence) => {
		expect(scenarioLabel(outputs)).toBe(label);
		expect(scenarioSentence(outputs)).toBe(sentence);
	});
});

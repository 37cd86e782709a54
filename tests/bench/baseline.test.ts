import { describe, expect, test } from 'vitest';
import { findRegressions, printRegression, unmeasuredRows } from './baseline';
import { fitExponent } from './growth';
import { median } from './measure';
import { ratiosOf } from './ratios';

describe('a regression', () => {
	const baseline = { CHSH: { plain: 0.4, warm: 0.1 }, I3322: { plain: 0.5 } };

	test('is a ratio that grew by more than 30 per cent, and names its row', () => {
		const found = findRegressions(baseline, { CHSH: { plain: 0.54, warm: 0.12 } });
		expect(found).toEqual([{ row: 'CHSH', ratio: 'plain', before: 0.4, now: 0.54 }]);
		expect(found.map(printRegression)).toEqual(['CHSH: plain / csdp was 0.4, is 0.54 (+35 %)']);
	});

	test('is not a ratio that grew by 30 per cent or fell', () => {
		expect(findRegressions(baseline, { CHSH: { plain: 0.52 }, I3322: { plain: 0.1 } })).toEqual([]);
	});

	test('is not a row or ratio without a past', () => {
		expect(findRegressions(baseline, { new: { plain: 9 }, I3322: { cold: 9 } })).toEqual([]);
	});

	test('cannot hide in a row that was not measured', () => {
		expect(unmeasuredRows(baseline, { CHSH: {} })).toEqual(['I3322']);
		expect(unmeasuredRows(baseline, { CHSH: {} }, 'CH')).toEqual([]);
	});
});

describe('ratios', () => {
	const times = { wasm: 5, cold: 2, warm: 1, csdp: 20, csdpStart: 10 };

	test('are ours over theirs, with and without the start of their process', () => {
		expect(ratiosOf(times)).toEqual({
			plain: 0.25,
			'plain without start': 0.5,
			cold: 0.1,
			warm: 0.05
		});
	});

	test('leave out what was not run, and differences that say nothing', () => {
		expect(ratiosOf({ ...times, csdpStart: 19, cold: NaN })).toEqual({ plain: 0.25, warm: 0.05 });
		expect(ratiosOf({ ...times, csdp: NaN })).toEqual({});
	});
});

test('the median of an even number of values is the mean of the two in the middle', () => {
	expect(median([9, 1, 2, 4])).toBe(3);
	expect(median([5, 1, 9])).toBe(5);
});

test('the exponent of a power law is found again', () => {
	const points = [2, 3, 5, 8].map((n) => ({ n, milliseconds: 0.7 * n ** 3.5 }));
	expect(fitExponent(points)).toBeCloseTo(3.5, 12);
});

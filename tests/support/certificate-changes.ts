/** Random single changes of a certificate: each must be caught, or leave a true statement. */
import { expect } from 'vitest';
import type { CheckOutcome } from '../../src/lib/nonlocality/certificates/types';
import {
	exactOfDouble,
	parseRational,
	type Rational
} from '../../src/lib/nonlocality/exact/rational';
import type { Result } from '../../src/lib/nonlocality/problem';
import type { Json } from './changed-json';

export const asResult = (value: Json): Result => JSON.parse(JSON.stringify(value));

export const CHANGES: readonly ((old: Json) => Json)[] = [
	() => null,
	() => 'x',
	() => [],
	() => -1,
	(old) => (typeof old === 'number' ? old + 1 : 'Infinity'),
	(old) => (typeof old === 'number' ? old * (1 + 1e-9) : '1e400'),
	(old) => (typeof old === 'string' ? `-${old}` : NaN),
	(old) => (typeof old === 'string' ? old.replace(/\d/, (d) => String((Number(d) + 1) % 10)) : 0),
	(old) => (typeof old === 'string' ? `${old}1` : '1/3')
];

/** What is proved or printed as a number must be true of the real maximum. */
export function expectTrue(outcome: CheckOutcome, result: Result, truth: Rational) {
	if (!outcome.checked || result.status !== 'done') return;
	for (const { lower, upper } of [outcome, result]) {
		if (lower !== null) expect(exactOfDouble(lower).compare(truth)).toBeLessThanOrEqual(0);
		if (upper !== null) expect(exactOfDouble(upper).compare(truth)).toBeGreaterThanOrEqual(0);
	}
	if (result.exact !== null) expect(parseRational(result.exact)?.equals(truth)).toBe(true);
}

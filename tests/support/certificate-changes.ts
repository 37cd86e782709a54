/** Random single changes of a certificate: each must be caught, or leave a true statement. */
import fc from 'fast-check';
import { expect } from 'vitest';
import type { CheckOutcome } from '../../src/lib/nonlocality/certificates/types';
import {
	exactOfDouble,
	parseRational,
	type Rational
} from '../../src/lib/nonlocality/exact/rational';
import { verifyResult } from '../../src/lib/nonlocality/certificates/verify';
import type { DoneResult, Result } from '../../src/lib/nonlocality/problem';
import { asJson, changedAt, pathsOf, type Json } from './changed-json';

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

/** Makes single changes of the result's certificate; more than `least` of them must be caught. */
export function expectChangesCaught(
	result: DoneResult,
	truth: Rational,
	{ numRuns, seed, least }: { numRuns: number; seed: number; least: number }
) {
	const certificate = asJson(result.certificate);
	const paths = pathsOf(certificate);
	let caught = 0;
	fc.assert(
		fc.property(fc.constantFrom(...paths), fc.constantFrom(...CHANGES), (path, change) => {
			const other = asResult({
				...(asJson(result) as { [key: string]: Json }),
				certificate: changedAt(certificate, path, change)
			});
			const outcome = verifyResult(other);
			if (!outcome.checked) caught++;
			expectTrue(outcome, other, truth);
		}),
		{ numRuns, seed }
	);
	expect(caught).toBeGreaterThan(least);
}

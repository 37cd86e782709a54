/** Random single changes of a certificate: each must be caught, or leave a true statement. */
import { expect } from 'vitest';
import type { CheckOutcome } from '../../src/lib/nonlocality/certificates/types';
import {
	exactOfDouble,
	parseRational,
	type Rational
} from '../../src/lib/nonlocality/exact/rational';
import type { Result } from '../../src/lib/nonlocality/problem';

/** Any JSON: what a stored file may hold. */
export type Json = null | boolean | number | string | Json[] | { [key: string]: Json };

export const asJson = (value: unknown): Json => JSON.parse(JSON.stringify(value));
export const asResult = (value: Json): Result => JSON.parse(JSON.stringify(value));

/** Every place in a JSON value, as its path. */
export function pathsOf(value: Json, path: (string | number)[] = []): (string | number)[][] {
	if (value === null || typeof value !== 'object') return [path];
	const entries = Array.isArray(value) ? [...value.entries()] : Object.entries(value);
	return [path, ...entries.flatMap(([key, inner]) => pathsOf(inner, [...path, key]))];
}

export function changed(
	value: Json,
	path: readonly (string | number)[],
	by: (old: Json) => Json
): Json {
	const [key, ...rest] = path;
	if (key === undefined) return by(value);
	const inside = (list: Json[]) =>
		list.map((inner, i) => (i === key ? changed(inner, rest, by) : inner));
	if (Array.isArray(value)) return inside(value);
	if (value === null || typeof value !== 'object') return value;
	return { ...value, [key]: changed(value[key] ?? null, rest, by) };
}

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

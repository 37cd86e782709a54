import { overCommonDenominator } from '../exact/common-denominator';
import { ZERO, type Rational } from '../exact/rational';
import type { ProblemTerm } from '../problem';
import { eventsKey, type Functional } from '../scenario/functional';
import type { Event, Scenario } from '../scenario/scenario';

/** Collins-Gisin coordinates of a whole scenario, the constant 1 first. */
export interface StrategyCoordinates {
	readonly size: number;
	/** 0 or 1 for every coordinate of a deterministic strategy. */
	vectorOf(strategy: readonly (readonly number[])[]): Float64Array;
	valueAt(coefficients: readonly bigint[], strategy: readonly (readonly number[])[]): bigint;
	/** A multiple of `form - shift`, in integers; the form without last outputs. */
	coefficientsOf(form: Functional, shift: Rational): bigint[];
	termsOf(coefficients: readonly bigint[]): ProblemTerm[];
}

export function strategyCoordinates(scenario: Scenario): StrategyCoordinates {
	const events = scenario.outputs.reduce<Event[][]>(
		(found, counts, p) =>
			found.flatMap((list) => [
				list,
				...counts.flatMap((count, x) =>
					Array.from({ length: count - 1 }, (_, a): Event[] => [...list, [p, x, a]])
				)
			]),
		[[]]
	);
	const places = new Map(events.map((list, i) => [eventsKey(list), i]));
	const occurs = (list: readonly Event[], strategy: readonly (readonly number[])[]) =>
		list.every(([p, x, a]) => strategy[p]?.[x] === a);
	return {
		size: events.length,
		vectorOf: (strategy) => Float64Array.from(events, (list) => (occurs(list, strategy) ? 1 : 0)),
		valueAt: (coefficients, strategy) =>
			events.reduce(
				(sum, list, i) => (occurs(list, strategy) ? sum + (coefficients[i] ?? 0n) : sum),
				0n
			),
		coefficientsOf(form, shift) {
			const values = events.map(() => ZERO);
			for (const { coefficient, events: list } of form.terms)
				values[places.get(eventsKey(list)) ?? 0] = coefficient.exact ?? ZERO;
			values[0] = (values[0] ?? ZERO).sub(shift);
			return [...overCommonDenominator(values).integers];
		},
		termsOf: (coefficients) =>
			events.flatMap((list, i): ProblemTerm[] => {
				const coefficient = coefficients[i] ?? 0n;
				return coefficient === 0n ? [] : [[String(coefficient), list]];
			})
	};
}

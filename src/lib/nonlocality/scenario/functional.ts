import {
	COEFFICIENT_ZERO,
	addCoefficients,
	isZero,
	multiplyCoefficients,
	negateCoefficient,
	type Coefficient
} from '../exact/coefficient';
import { outputCount, type Event, type Scenario } from './scenario';

/** coefficient * P(those outputs | those inputs); no event at all is the constant. */
export interface Term {
	readonly coefficient: Coefficient;
	/** At most one event per party, ordered by party. */
	readonly events: readonly Event[];
}

/**
 * A real linear form on behaviours, constant included: the sum of its terms. Terms with the same
 * events are merged and zero terms dropped; their order is fixed (fewer events first, then by
 * party, input, output), so equal sums of terms are equal as data.
 */
export interface Functional {
	readonly scenario: Scenario;
	readonly terms: readonly Term[];
}

export function eventsKey(events: readonly Event[]): string {
	return events.map((event) => event.join('.')).join(' ');
}

/**
 * Builds a functional: orders events by party, merges repeated ones, drops zeros.
 * @throws RangeError when an event is outside the scenario or a party occurs twice in a term.
 */
export function makeFunctional(scenario: Scenario, terms: Iterable<Term>): Functional {
	const merged = new Map<string, Term>();
	for (const term of terms) {
		const events = [...term.events].sort((a, b) => a[0] - b[0]);
		events.forEach(([party, input, output], i) => {
			const count = outputCount(scenario, party, input);
			if (!Number.isInteger(output) || output < 0 || output >= count)
				throw new RangeError(`party ${party}, input ${input} has no output ${output}`);
			if (i > 0 && events[i - 1]?.[0] === party)
				throw new RangeError(`party ${party} occurs twice in one term`);
		});
		const key = eventsKey(events);
		const before = merged.get(key)?.coefficient ?? COEFFICIENT_ZERO;
		merged.set(key, { events, coefficient: addCoefficients(before, term.coefficient) });
	}
	const kept = [...merged.values()].filter((term) => !isZero(term.coefficient));
	return { scenario, terms: kept.sort((a, b) => compareEvents(a.events, b.events)) };
}

/** Fewer events first, then by party, input, output. */
export function compareEvents(a: readonly Event[], b: readonly Event[]): number {
	if (a.length !== b.length) return a.length - b.length;
	for (let i = 0; i < a.length; i++) {
		for (let part = 0; part < 3; part++) {
			const difference = (a[i]?.[part] ?? 0) - (b[i]?.[part] ?? 0);
			if (difference !== 0) return difference;
		}
	}
	return 0;
}

/**
 * The Collins-Gisin coordinates: the same functional on every no-signalling behaviour, written
 * without the last output of any input (P(last) = 1 - the others). Unique.
 */
export function collinsGisinForm(functional: Functional): Functional {
	const { scenario } = functional;
	const expanded: Term[] = [];
	for (const term of functional.terms) {
		let partial: Term[] = [{ coefficient: term.coefficient, events: [] }];
		for (const event of term.events) {
			const [party, input, output] = event;
			const last = outputCount(scenario, party, input) - 1;
			if (output < last) {
				partial = partial.map((t) => ({ ...t, events: [...t.events, event] }));
				continue;
			}
			partial = partial.flatMap((t) => [
				t,
				...Array.from({ length: last }, (_, other) => ({
					coefficient: negateCoefficient(t.coefficient),
					events: [...t.events, [party, input, other] as const]
				}))
			]);
		}
		expanded.push(...partial);
	}
	return makeFunctional(scenario, expanded);
}

export function scaleFunctional(functional: Functional, by: Coefficient): Functional {
	return makeFunctional(
		functional.scenario,
		functional.terms.map((t) => ({ ...t, coefficient: multiplyCoefficients(t.coefficient, by) }))
	);
}

/** True when every coefficient is an exact rational. */
export function isRational(functional: Functional): boolean {
	return functional.terms.every((term) => term.coefficient.exact !== null);
}

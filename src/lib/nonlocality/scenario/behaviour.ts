import {
	COEFFICIENT_ZERO,
	addCoefficients,
	multiplyCoefficients,
	type Coefficient
} from '../exact/coefficient';
import { parseCoefficient } from '../exact/expression';
import { ZERO, exactOfDouble } from '../exact/rational';
import { marginalEntries, readTable, tableDefect } from './exact-table';
import { collinsGisinForm, eventsKey, type Functional } from './functional';
import type { Event, Scenario } from './scenario';

/** A no-signalling behaviour, as a map from events to their joint probability. */
export interface Behaviour {
	readonly scenario: Scenario;
	/** P(events): at most one event per party, ordered by party; 1 for none. */
	probability(events: readonly Event[]): Coefficient;
}

/** Irrational entries: a table printed with nine decimals or more passes. */
const TABLE_TOLERANCE = 1e-9;

/**
 * A behaviour from its table, `"a,b|x,y"` to a number as a coefficient is written; entries left
 * out are 0. Rational tables must be non-negative, normalised and no-signalling exactly, others to
 * 1e-9; those are then replaced by their Collins-Gisin coordinates (input 0 stands for the parties
 * that are not named), as any functional on behaviours sees only these.
 * @throws RangeError naming the first defect; NotationError for an unreadable number.
 */
export function behaviourOfTable(
	scenario: Scenario,
	probabilities: Readonly<Record<string, string>>
): Behaviour {
	const entries = new Map<string, Coefficient>();
	for (const [key, text] of Object.entries(probabilities)) entries.set(key, parseCoefficient(text));
	const rational = [...entries.values()].every((value) => value.exact);
	const doubles = (text: string) => {
		const value = parseCoefficient(text);
		return value.exact ?? exactOfDouble(value.value);
	};
	const table = readTable(scenario, probabilities, doubles);
	if (typeof table === 'string') throw new RangeError(table);
	const defect = tableDefect(table, rational ? ZERO : exactOfDouble(TABLE_TOLERANCE));
	if (defect) throw new RangeError(defect);
	return {
		scenario,
		probability(events) {
			return marginalEntries(scenario, events).reduce(
				(sum, key) => addCoefficients(sum, entries.get(key) ?? COEFFICIENT_ZERO),
				COEFFICIENT_ZERO
			);
		}
	};
}

/** The value of a functional on a behaviour, through its Collins-Gisin coordinates. */
export function valueOnBehaviour(functional: Functional, behaviour: Behaviour): Coefficient {
	const known = new Map<string, Coefficient>();
	return collinsGisinForm(functional).terms.reduce((sum, { coefficient, events }) => {
		const key = eventsKey(events);
		const probability = known.get(key) ?? behaviour.probability(events);
		known.set(key, probability);
		return addCoefficients(sum, multiplyCoefficients(coefficient, probability));
	}, COEFFICIENT_ZERO);
}

import { exactOfDouble, type Rational } from '../exact/rational';
import { COEFFICIENT_ONE, type Coefficient } from '../exact/coefficient';
import type { ProblemConstraint } from '../problem';
import { collinsGisinForm, makeFunctional, type Functional } from '../scenario/functional';
import { functionalOfTerms } from '../scenario/problem-terms';
import type { Event, Scenario } from '../scenario/scenario';
import { magnitude, scaleDouble } from './scaled-integers';
import { momentName, wordOf } from './operator-words';

/** A linear form on the moments; a feasible point has every |moment| <= 1. */
export interface MomentForm {
	/** Moment number (0 is the identity) to coefficient. */
	readonly coefficients: ReadonlyMap<number, Rational>;
	/** Scaled: how far the true form can be from this one on a feasible point. */
	readonly error: bigint;
}

/** Numbers of the moments of a list of monomials, by name. */
export type MomentNumbers = ReadonlyMap<string, number>;

/** The exact rational where there is one, otherwise the double with its error. */
function exactPart({ exact, value, error }: Coefficient): { part: Rational; error: bigint } {
	if (exact) return { part: exact, error: 0n };
	return { part: exactOfDouble(value), error: magnitude(scaleDouble(error)) };
}

/** Null when a moment of the functional is missing from the list. */
export function formOfFunctional(
	numbers: MomentNumbers,
	functional: Functional
): MomentForm | null {
	const coefficients = new Map<number, Rational>();
	let total = 0n;
	for (const { events, coefficient } of collinsGisinForm(functional).terms) {
		const number = numberOfEvents(numbers, functional.scenario, events);
		if (number === null) return null;
		const { part, error } = exactPart(coefficient);
		coefficients.set(number, part);
		total += error;
	}
	return { coefficients, error: total };
}

function numberOfEvents(
	numbers: MomentNumbers,
	scenario: Scenario,
	events: readonly Event[]
): number | null {
	const name = momentName(
		scenario.outputs.map(() => []),
		wordOf(scenario, events)
	);
	return name === null ? null : (numbers.get(name) ?? null);
}

/** A constraint as a form that is >= 0, or = 0 for `=`. */
export function formOfConstraint(
	numbers: MomentNumbers,
	scenario: Scenario,
	constraint: ProblemConstraint
): MomentForm | null {
	const form = formOfFunctional(numbers, functionalOfTerms(scenario, constraint.terms));
	const limit = functionalOfTerms(scenario, [[constraint.value, []]]).terms[0];
	if (!form) return null;
	const value = limit ? exactPart(limit.coefficient) : null;
	const coefficients = new Map(form.coefficients);
	if (value) coefficients.set(0, (coefficients.get(0) ?? exactOfDouble(0)).sub(value.part));
	if (constraint.relation === '<=')
		for (const [number, coefficient] of coefficients) coefficients.set(number, coefficient.neg());
	return { coefficients, error: form.error + (value?.error ?? 0n) };
}

/** P(outputs | inputs) of some of the parties, or null when the moments do not determine it. */
export function formOfProbability(
	numbers: MomentNumbers,
	scenario: Scenario,
	events: readonly Event[]
): MomentForm | null {
	return formOfFunctional(
		numbers,
		makeFunctional(scenario, [{ coefficient: COEFFICIENT_ONE, events }])
	);
}

/** weight * form.error rounded up, for a weight >= 0. */
export function weightedError(form: MomentForm, weight: number): bigint {
	const { n, d } = exactOfDouble(weight);
	return (form.error * n + d - 1n) / d;
}

/**
 * Check of a no-signalling certificate. Lower side: the primal entries are a no-signalling
 * behaviour, exactly, and g is evaluated on it. Upper side: g + sum of multiplier * P is written in
 * Collins-Gisin coordinates, where what is left over is bounded by its positive entries.
 */
import { exactCoefficient, multiplyCoefficients, negateCoefficient } from '../exact/coefficient';
import {
	ONE,
	ZERO,
	exactOfDouble,
	parseRational,
	printRational,
	toDoubleDown,
	toDoubleUp,
	type Rational
} from '../exact/rational';
import {
	collinsGisinForm,
	makeFunctional,
	type Functional,
	type Term
} from '../scenario/functional';
import type { Problem, ProblemConstraint } from '../problem';
import { functionalOfTerms } from '../scenario/problem-terms';
import type { Event, Scenario } from '../scenario/scenario';
import { readTable, tableDefect, marginalOf, type ExactTable } from '../scenario/exact-table';
import type { CheckOutcome, LinearProgrammeCertificate } from './types';

const refuse = (reason: string): CheckOutcome => ({ checked: false, reason });

/** Proves both sides of the no-signalling maximum of g. */
export function checkLinearProgramme(
	problem: Problem,
	g: Functional,
	certificate: LinearProgrammeCertificate
): CheckOutcome {
	const rational = g.terms.every(({ coefficient }) => coefficient.exact);
	// Every probability is at most 1: the doubles of g are off by no more than this in all.
	const allowance = g.terms.reduce(
		(sum, { coefficient: c }) => (c.exact ? sum : sum.add(exactOfDouble(c.error))),
		ZERO
	);
	const terms = g.terms.map(({ coefficient: c, events }) => ({
		events,
		coefficient: c.exact ? c : exactCoefficient(exactOfDouble(c.value))
	}));

	const primal = readTable(g.scenario, certificate.primal);
	if (typeof primal === 'string') return refuse(`primal: ${primal}`);
	const defect = tableDefect(primal);
	if (defect) return refuse(`primal: ${defect}`);
	const constraints = problem.constraints.map((constraint) =>
		readConstraint(g.scenario, constraint)
	);
	for (const [k, { form, relation }] of constraints.entries()) {
		if (form.some(({ coefficient }) => !coefficient.exact))
			return refuse(`constraint ${k} is irrational`);
		const sign = valueOf(form, primal).compare(0);
		if ((relation !== '<=' && sign < 0) || (relation !== '>=' && sign > 0))
			return refuse(`primal: constraint ${k} is violated`);
	}
	const below = valueOf(terms, primal);

	const above = boundOf(g.scenario, terms, constraints, certificate.dual);
	if (typeof above === 'string') return refuse(`dual: ${above}`);

	if (certificate.value !== null) {
		const stated = parseRational(certificate.value);
		if (!rational || !stated?.equals(below) || !stated.equals(above))
			return refuse(
				`the two sides are ${printRational(below)} and ${printRational(above)}, not ${certificate.value}`
			);
	}
	return {
		checked: true,
		lower: toDoubleDown(below.sub(allowance)),
		upper: toDoubleUp(above.add(allowance)),
		exact: rational && below.equals(above) ? printRational(below) : null,
		method: 'no-signalling behaviour and multipliers evaluated in exact rationals'
	};
}

function valueOf(terms: readonly Term[], table: ExactTable): Rational {
	return terms.reduce(
		(sum, { coefficient, events }) =>
			sum.add((coefficient.exact ?? ZERO).mul(marginalOf(table, events))),
		ZERO
	);
}

function boundOf(
	scenario: Scenario,
	terms: readonly Term[],
	constraints: readonly ReadConstraint[],
	dual: LinearProgrammeCertificate['dual']
): Rational | string {
	const multipliers: Term[] = [];
	for (const [key, text] of Object.entries(dual)) {
		const events = readEvents(key);
		const row = events ? null : readRow(key, constraints);
		const value = parseRational(text);
		if (!events && !row) return `"${key}" names no probability and no constraint`;
		if (!value) return `the multiplier of ${key} is no fraction`;
		if (value.n !== 0n && value.s < 0n) return `the multiplier of ${key} is negative`;
		const coefficient = exactCoefficient(value);
		if (events) multipliers.push({ coefficient, events });
		for (const term of row ?? [])
			multipliers.push({
				...term,
				coefficient: multiplyCoefficients(coefficient, term.coefficient)
			});
	}
	let bound = ZERO;
	// makeFunctional refuses events outside the scenario.
	for (const { coefficient, events } of collinsGisinForm(
		makeFunctional(scenario, [...terms, ...multipliers])
	).terms) {
		const value = coefficient.exact ?? ONE;
		if (events.length === 0 || value.s > 0n) bound = bound.add(value);
	}
	return bound;
}

/** form >= 0, form <= 0 or form = 0. */
interface ReadConstraint {
	readonly form: readonly Term[];
	readonly relation: ProblemConstraint['relation'];
}

function readConstraint(scenario: Scenario, constraint: ProblemConstraint): ReadConstraint {
	const { terms, value, relation } = constraint;
	const form = functionalOfTerms(scenario, [...terms, [`-(${value})`, []] as const]).terms;
	return { form, relation };
}

/** The terms that `constraint 0 >=` or `constraint 0 <=` says are non-negative in sum. */
function readRow(key: string, constraints: readonly ReadConstraint[]): readonly Term[] | null {
	const match = /^constraint (\d+) (>=|<=)$/.exec(key);
	const constraint = constraints[Number(match?.[1])];
	if (!constraint) return null;
	const { form, relation } = constraint;
	if (relation !== '=' && relation !== match?.[2]) return null;
	if (match?.[2] === '>=') return form;
	return form.map((term) => ({ ...term, coefficient: negateCoefficient(term.coefficient) }));
}

/** `"a,b|x,y"` as events. */
function readEvents(key: string): Event[] | null {
	const match = /^(\d+(?:,\d+)*)\|(\d+(?:,\d+)*)$/.exec(key);
	const outputs = match?.[1]?.split(',').map(Number) ?? [];
	const inputs = match?.[2]?.split(',').map(Number) ?? [];
	if (outputs.length === 0 || outputs.length !== inputs.length) return null;
	return outputs.map((output, party) => [party, inputs[party] ?? -1, output]);
}

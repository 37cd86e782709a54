/**
 * Check of a no-signalling certificate. Lower side: the primal entries are a no-signalling
 * behaviour, exactly, and g is evaluated on it. Upper side: g + sum of multiplier * P is written in
 * Collins-Gisin coordinates, where what is left over is bounded by its positive entries.
 */
import { exactCoefficient, multiplyCoefficients, negateCoefficient } from '../exact/coefficient';
import { ONE, ZERO, exactOfDouble, parseRational, type Rational } from '../exact/rational';
import {
	collinsGisinForm,
	makeFunctional,
	type Functional,
	type Term
} from '../scenario/functional';
import type { Problem } from '../problem';
import type { Event, Scenario } from '../scenario/scenario';
import { readTable, tableDefect, marginalOf, type ExactTable } from '../scenario/exact-table';
import { allowanceOf } from './check-deterministic-strategy';
import { firstIrrational, isBroken, readConstraint, type ReadConstraint } from './read-constraint';
import { outcomeOfTwoSides } from './two-sides';
import type { CheckOutcome, LinearProgrammeCertificate } from './types';

const refuse = (reason: string): CheckOutcome => ({ checked: false, reason });

/** Proves both sides of the no-signalling maximum of g. */
export function checkLinearProgramme(
	problem: Problem,
	g: Functional,
	certificate: LinearProgrammeCertificate
): CheckOutcome {
	const rational = g.terms.every(({ coefficient }) => coefficient.exact);
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
	const irrational = firstIrrational(constraints);
	if (irrational >= 0) return refuse(`constraint ${irrational} is irrational`);
	const broken = constraints.findIndex(({ form, relation }) =>
		isBroken(relation, valueOf(form.terms, primal))
	);
	if (broken >= 0) return refuse(`primal: constraint ${broken} is violated`);
	const below = valueOf(terms, primal);

	const above = boundOf(g.scenario, terms, constraints, certificate.dual);
	if (typeof above === 'string') return refuse(`dual: ${above}`);

	return outcomeOfTwoSides(
		certificate.value,
		{ below, above, allowance: allowanceOf(g), rational },
		'no-signalling behaviour and multipliers evaluated in exact rationals'
	);
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

/** The terms that `constraint 0 >=` or `constraint 0 <=` says are non-negative in sum. */
function readRow(key: string, constraints: readonly ReadConstraint[]): readonly Term[] | null {
	const match = /^constraint (\d+) (>=|<=)$/.exec(key);
	const constraint = constraints[Number(match?.[1])];
	if (!constraint) return null;
	const { form, relation } = constraint;
	if (relation !== '=' && relation !== match?.[2]) return null;
	if (match?.[2] === '>=') return form.terms;
	return form.terms.map((term) => ({ ...term, coefficient: negateCoefficient(term.coefficient) }));
}

/** `"a,b|x,y"` as events. */
function readEvents(key: string): Event[] | null {
	const match = /^(\d+(?:,\d+)*)\|(\d+(?:,\d+)*)$/.exec(key);
	const outputs = match?.[1]?.split(',').map(Number) ?? [];
	const inputs = match?.[2]?.split(',').map(Number) ?? [];
	if (outputs.length === 0 || outputs.length !== inputs.length) return null;
	return outputs.map((output, party) => [party, inputs[party] ?? -1, output]);
}

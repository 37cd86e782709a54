/** Check of the value of a box: evaluated again from the problem alone. */
import {
	COEFFICIENT_ONE,
	COEFFICIENT_ZERO,
	addCoefficients,
	multiplyCoefficients,
	negateCoefficient,
	type Coefficient
} from '../exact/coefficient';
import { parseCoefficient } from '../exact/expression';
import { ZERO, exactOfDouble, printRational, toDoubleDown, toDoubleUp } from '../exact/rational';
import type { ProblemOf } from '../problem';
import { marginalEntries, readTable, tableDefect } from '../scenario/exact-table';
import { collinsGisinForm, scaleFunctional, type Functional } from '../scenario/functional';
import { checkStrategy } from './check-quantum-strategy';
import type { CheckOutcome } from './types';

/** Tables with irrational entries are behaviours to this (the problem format's own tolerance). */
const TOLERANCE = exactOfDouble(1e-9);
/** Below any value: asks the strategy check for what it can prove, not for a given number. */
const NO_CLAIM = -Number.MAX_VALUE;

export function checkValue(problem: ProblemOf<'value'>, f: Functional): CheckOutcome {
	return problem.box.kind === 'table' ? checkTable(problem, f) : checkQuantum(problem, f);
}

function checkTable({ box }: ProblemOf<'value'>, f: Functional): CheckOutcome {
	if (box.kind !== 'table') return refuse('the box is no table');
	const entries = new Map<string, Coefficient>();
	for (const [key, text] of Object.entries(box.probabilities))
		entries.set(key, parseCoefficient(text));
	const rational = [...entries.values()].every((value) => value.exact);
	const table = readTable(f.scenario, box.probabilities, (text) => {
		const value = parseCoefficient(text);
		return value.exact ?? exactOfDouble(value.value);
	});
	if (typeof table === 'string') return refuse(table);
	const defect = tableDefect(table, rational ? ZERO : TOLERANCE);
	if (defect) return refuse(defect);
	let sum = COEFFICIENT_ZERO;
	for (const { coefficient, events } of collinsGisinForm(f).terms) {
		for (const key of marginalEntries(f.scenario, events)) {
			const entry = entries.get(key);
			if (entry) sum = addCoefficients(sum, multiplyCoefficients(coefficient, entry));
		}
	}
	const middle = sum.exact ?? exactOfDouble(sum.value);
	const allowance = exactOfDouble(sum.exact ? 0 : sum.error);
	return {
		checked: true,
		lower: toDoubleDown(middle.sub(allowance)),
		upper: toDoubleUp(middle.add(allowance)),
		exact: sum.exact ? printRational(sum.exact) : null,
		method: 'the table checked and the functional evaluated again, entry by entry'
	};
}

const refuse = (reason: string): CheckOutcome => ({ checked: false, reason });

function checkQuantum(problem: ProblemOf<'value'>, f: Functional): CheckOutcome {
	if (problem.box.kind !== 'quantum') return refuse('the box is no strategy');
	const certificate = {
		kind: 'quantum-strategy',
		strategy: problem.box.strategy,
		projective: false,
		bases: null,
		value: NO_CLAIM
	} as const;
	const below = checkStrategy(problem, f, certificate);
	if (!below.checked) return below;
	const minus = scaleFunctional(f, negateCoefficient(COEFFICIENT_ONE));
	const above = checkStrategy(problem, minus, certificate);
	if (!above.checked) return above;
	return {
		checked: true,
		lower: below.lower,
		upper: above.lower === null ? null : 0 - above.lower,
		exact: null,
		method: `${below.method}, for both sides`
	};
}

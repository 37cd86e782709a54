import type { ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import type { Scenario } from '../scenario/scenario';
import {
	formOfConstraint,
	formOfFunctional,
	type MomentForm,
	type MomentNumbers
} from './moment-forms';
import {
	MOST_CHECKED_WORDS,
	isClosed,
	isReduced,
	levelNames,
	momentName,
	nameOf
} from './operator-words';
import type { CheckOutcome, Monomial } from './types';

/** Ends a check from within: its message is the reason of the refusal. */
class Rejected extends Error {}

export function require(condition: boolean, reason: string): asserts condition {
	if (!condition) throw new Rejected(reason);
}

/** What a check found, or why the certificate was refused. @throws what is a defect of ours */
export function outcomeOf(check: () => CheckOutcome): CheckOutcome {
	try {
		return check();
	} catch (error) {
		if (error instanceof Rejected) return { checked: false, reason: error.message };
		if (error instanceof RangeError || error instanceof TypeError || error instanceof SyntaxError)
			return { checked: false, reason: `the certificate is malformed: ${error.message}` };
		throw error;
	}
}

/** The monomial list, and which cell of its matrix (lower triangle) holds which moment. */
export interface Layout {
	readonly scenario: Scenario;
	readonly size: number;
	/** Per lower-triangle cell, row by row: -1 zero, 0 the identity, i the i-th moment. */
	readonly cells: Int32Array;
	readonly numbers: MomentNumbers;
	/** The list is the level's whole list: only then is a feasible matrix one of the level's. */
	readonly complete: boolean;
	/** The functional and the constraints (>= 0, or = 0) as forms on the moments. */
	readonly objective: MomentForm;
	readonly constraints: readonly MomentForm[];
}

/**
 * Rebuilds the moment matrix of a monomial list, which must be part of the problem's level and
 * closed under dropping a left-most operator: that gives |moment| <= 1 and trace <= size.
 * @throws Rejected
 */
export function layOut(
	problem: ProblemOf<'npa'>,
	g: Functional,
	monomials: readonly Monomial[]
): Layout {
	const scenario: Scenario = { outputs: problem.outputs };
	require(monomials.length <= MOST_CHECKED_WORDS, `more than ${MOST_CHECKED_WORDS} monomials`);
	monomials.forEach((word, place) => {
		const fits =
			word.length === scenario.outputs.length &&
			word.every((letters, party) =>
				letters.every(([input, output, ...more]) => {
					if (more.length > 0) return false;
					const count = scenario.outputs[party]?.[input] ?? 0;
					return Number.isInteger(output) && output >= 0 && output < count - 1;
				})
			);
		require(fits, `monomial ${place} is not a word of this scenario`);
		require(isReduced(word), `monomial ${place} is not reduced`);
	});
	const identity: Monomial = scenario.outputs.map(() => []);
	const names = new Set(monomials.map(nameOf));
	require(names.size === monomials.length, 'a monomial occurs twice');
	require(names.has(nameOf(identity)), 'the identity is missing');
	require(isClosed(
		monomials,
		names
	), 'the monomials are not closed under dropping the left-most operator');
	const level = levelNames(scenario, problem.level);
	require(level !== null, `the level has more than ${MOST_CHECKED_WORDS} monomials`);
	require([...names].every((name) => level.has(name)), 'a monomial does not belong to the level');
	const numbers = new Map([[momentName(identity, identity) ?? '', 0]]);
	const cells = new Int32Array((monomials.length * (monomials.length + 1)) / 2);
	let at = 0;
	monomials.forEach((row, i) => {
		for (const column of monomials.slice(0, i + 1)) {
			const name = momentName(row, column);
			const number = name === null ? -1 : (numbers.get(name) ?? numbers.size);
			if (name !== null) numbers.set(name, number);
			cells[at++] = number;
		}
	});
	const objective = formOfFunctional(numbers, g);
	require(objective !== null, 'the monomials lack a moment of the functional');
	const constraints = problem.constraints.map((constraint, place) => {
		const form = formOfConstraint(numbers, scenario, constraint);
		require(form !== null, `the monomials lack a moment of constraint ${place}`);
		return form;
	});
	const complete = names.size === level.size;
	return { scenario, size: monomials.length, cells, numbers, complete, objective, constraints };
}

/** Rows i of a symmetric matrix from its lower triangle. */
export function triangle(size: number, entry: (cell: number) => number): Float64Array[] {
	return Array.from({ length: size }, (_, i) =>
		Float64Array.from({ length: i + 1 }, (_unused, j) => entry((i * (i + 1)) / 2 + j))
	);
}

import { SolverStop, type ProblemOf, type ProblemConstraint } from '../problem';
import type { MomentProgramme, SparseRow } from '../optimization/moment-programme';
import { collinsGisinForm, type Functional } from '../scenario/functional';
import { functionalOfTerms } from '../scenario/problem-terms';
import { makeMomentMatrix, momentOfEvents, type MomentMatrix } from './moment-matrix';
import { printLevel } from './moment-level';
import { mixedStateMoment } from './mixed-state';
import { probabilityRows, type ProbabilityRow } from './probability-rows';

/** One linear constraint of the problem as `form >= 0` or `form = 0`. */
export interface ConstraintRow {
	/** Place in `problem.constraints`. */
	readonly place: number;
	readonly row: SparseRow;
	/** Largest error of the row at a feasible point, from coefficients that are not exact. */
	readonly error: number;
}

/** A relaxation, ready for the solver; `programme.rows` are `probabilities`, then `inequalities`. */
export interface MomentProblem {
	readonly matrix: MomentMatrix;
	readonly programme: MomentProgramme;
	/** Sum of the absolute errors of the objective's coefficients: every |y_i| is at most 1. */
	readonly objectiveError: number;
	readonly probabilities: readonly ProbabilityRow[];
	readonly inequalities: readonly ConstraintRow[];
	readonly equalities: readonly ConstraintRow[];
	/** Moments of the maximally mixed state, a strictly feasible point without constraints. */
	readonly start: Float64Array;
}

/**
 * The moment-matrix relaxation of `problem` with the objective g (maximised).
 * @throws SolverStop when the level lacks a moment (naming one that has it), or past the limit of
 *   rows. How many moments a solve can have is for the solver to say.
 */
export function makeMomentProblem(
	problem: ProblemOf<'npa'>,
	g: Functional,
	poll?: () => void
): MomentProblem {
	const matrix = makeMomentMatrix(g.scenario, problem.level, poll);
	const { form: objective, error } = linearForm(matrix, g);
	const probabilities = problem.nonNegative ? probabilityRows(matrix) : [];
	const inequalities: ConstraintRow[] = [];
	const equalities: ConstraintRow[] = [];
	problem.constraints.forEach((constraint, place) => {
		const row = constraintRow(matrix, constraint, place);
		(constraint.relation === '=' ? equalities : inequalities).push(row);
	});
	let start: Float64Array | null = null;
	return {
		matrix,
		programme: {
			size: matrix.size,
			index: matrix.index,
			unknowns: matrix.moments.length - 1,
			objective,
			rows: [...probabilities, ...inequalities].map(({ row }) => row),
			equalities: equalities.map(({ row }) => row)
		},
		objectiveError: error,
		probabilities,
		inequalities,
		equalities,
		get start() {
			start ??= mixedStateMoments(matrix);
			return start;
		}
	};
}

function mixedStateMoments({ alphabet, moments }: MomentMatrix): Float64Array {
	const cache = new Map<string, number>();
	return Float64Array.from(moments, (word) => mixedStateMoment(alphabet, cache, word));
}

function linearForm(matrix: MomentMatrix, functional: Functional) {
	const form = new Float64Array(matrix.moments.length);
	let error = 0;
	const { terms } = collinsGisinForm(functional);
	for (const { events, coefficient } of terms) {
		const moment = momentOfEvents(matrix, events);
		if (moment === null)
			throw missingMoment(
				matrix,
				events.length,
				Math.max(...terms.map((term) => term.events.length))
			);
		form[moment] = coefficient.value;
		error += coefficient.error;
	}
	return { form, error };
}

/** @param degree of the moment that is missing; @param largest of all that the problem needs */
function missingMoment(matrix: MomentMatrix, degree: number, largest: number): SolverStop {
	const parties = matrix.alphabet.scenario.outputs.length;
	const enough = Math.ceil(largest / 2);
	const local = parties === 2 ? '1+AB' : '1 per party ({"perParty": 1})';
	return new SolverStop(
		'failed',
		`level ${printLevel(matrix.level)} lacks a moment of ${degree === 1 ? 'one party' : `${degree} parties`} that the problem ` +
			`needs; level ${enough} or ${local} has it`
	);
}

function constraintRow(
	matrix: MomentMatrix,
	constraint: ProblemConstraint,
	place: number
): ConstraintRow {
	const { scenario } = matrix.alphabet;
	const bound = functionalOfTerms(scenario, [[constraint.value, []]]);
	const limit = bound.terms[0]?.coefficient;
	const { form, error } = linearForm(matrix, functionalOfTerms(scenario, constraint.terms));
	form[0] = (form[0] ?? 0) - (limit?.value ?? 0);
	const sign = constraint.relation === '<=' ? -1 : 1;
	const columns = [...form.keys()].filter((column) => form[column] !== 0);
	const values = columns.map((column) => sign * (form[column] ?? 0));
	if (columns.every((column) => column === 0))
		throw new SolverStop('failed', `constraint ${place}: it does not depend on the behaviour`);
	// The subtraction above rounds once; twice its size covers it.
	const rounding = 2 ** -52 * Math.abs(form[0]);
	return { place, row: { columns, values }, error: error + (limit?.error ?? 0) + rounding };
}

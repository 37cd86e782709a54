import type { Rational } from '../exact/rational';
import { printRational } from '../exact/rational';
import {
	solveLinearProgramme,
	type LinearProgrammeSolution
} from '../optimization/linear-programme';
import { SolverStop, type Control } from '../problem';
import type { IntegerFunctional } from '../scenario/fixed-point';
import { eventsKey } from '../scenario/functional';
import {
	bestBehaviour,
	bestMultipliers,
	type ExactBehaviour,
	type ExactMultipliers,
	type IntegerObjective
} from './no-signalling-certificate';
import type { NoSignallingRows } from './no-signalling-rows';
import type { WorkClock } from './work-clock';

/** Larger costs are scaled down for the simplex method; multipliers are scaled back. */
const LARGEST_COST = 2 ** 20;

/** Largest coefficient once all are integers: a double holds no more. */
export const COST_LIMIT = 1e300;
export const TOO_FAR_APART =
	'the coefficients are too far apart for the linear programme: as integers they have more than 300 digits';

export interface PolytopeMaximum {
	readonly behaviour: ExactBehaviour;
	readonly multipliers: ExactMultipliers;
	readonly solution: LinearProgrammeSolution;
}

/**
 * Maximum of an integer objective over a no-signalling polytope: the simplex method proposes, both
 * sides are then made exact. They need not meet.
 * @throws SolverStop
 */
export async function maximiseOverPolytope(
	polytope: NoSignallingRows,
	objective: IntegerObjective,
	clock: WorkClock,
	control: Control
): Promise<PolytopeMaximum> {
	const largest = objective.costs.reduce((m, c) => Math.max(m, Math.abs(Number(c))), 0);
	if (largest > COST_LIMIT) throw new SolverStop('failed', TOO_FAR_APART);
	const scale = largest > LARGEST_COST ? largest / LARGEST_COST : 1;
	const solution = await solveLinearProgramme(
		programmeOf(polytope, objective, scale),
		clock.left,
		control
	);
	if (solution.status === 'infeasible')
		throw new SolverStop('infeasible', 'no no-signalling behaviour meets the constraints');
	if (solution.status !== 'optimal')
		throw new SolverStop('failed', `the linear programme came out ${solution.status}`);
	const tick = () => clock.check();
	const behaviour = bestBehaviour(polytope, objective, solution, tick);
	const multipliers = bestMultipliers(polytope, objective, solution, scale, tick);
	return { behaviour, multipliers, solution };
}

export function objectiveOf(
	polytope: NoSignallingRows,
	terms: IntegerFunctional['terms']
): IntegerObjective {
	const costs = polytope.columns.map(() => 0n);
	let constant = 0n;
	for (const { coefficient, events } of terms) {
		const column = polytope.columnOf.get(eventsKey(events));
		if (column === undefined) constant += coefficient;
		else costs[column] = coefficient;
	}
	return { costs, constant };
}

function programmeOf(polytope: NoSignallingRows, objective: IntegerObjective, scale: number) {
	const starts = [0];
	const indices: number[] = [];
	const values: number[] = [];
	for (const { entries } of polytope.rows) {
		for (const [column, value] of entries) {
			indices.push(column);
			values.push(value);
		}
		starts.push(indices.length);
	}
	return {
		costs: Float64Array.from(objective.costs, (c) => Number(c) / scale),
		starts: Int32Array.from(starts),
		indices: Int32Array.from(indices),
		values: Float64Array.from(values),
		lowerBounds: Float64Array.from(polytope.rows, ({ constant }) => 0 - constant)
	};
}

/** Exact rationals by row key; zeros are left out. */
export function recordOfRows(
	polytope: NoSignallingRows,
	values: readonly Rational[]
): Record<string, string> {
	const entries = polytope.rows.flatMap(({ key }, i) => {
		const value = values[i];
		return value && value.n !== 0n ? [[key, printRational(value)] as const] : [];
	});
	return Object.fromEntries(entries);
}

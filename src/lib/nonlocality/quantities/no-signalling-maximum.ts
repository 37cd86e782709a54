import { overCommonDenominator } from '../exact/common-denominator';
import { printRational, ratio, toDouble, toDoubleDown, toDoubleUp } from '../exact/rational';
import { solveLinearProgramme } from '../optimization/linear-programme';
import { SolverStop, type Control, type ProblemOf } from '../problem';
import { integerFunctional } from '../scenario/fixed-point';
import { collinsGisinForm, eventsKey, type Functional } from '../scenario/functional';
import { bestBehaviour, bestMultipliers, type IntegerObjective } from './no-signalling-certificate';
import { noSignallingRows, withConstraints, type NoSignallingRows } from './no-signalling-rows';
import type { Outcome } from './outcome';
import { twiceTheErrors } from './strategy-tensor';
import { WorkClock } from './work-clock';

/** Larger costs are scaled down for the simplex method; multipliers are scaled back. */
const LARGEST_COST = 2 ** 20;

/**
 * Maximum of a functional over the no-signalling polytope {P(a|x) >= 0} in Collins-Gisin
 * coordinates, and under the problem's linear constraints: a linear programme.
 *
 * The simplex method's vertex and multipliers are turned into rationals (by their continued
 * fractions, else by solving the basis exactly) and checked exactly. Guarantee: both sides hold by
 * exact arithmetic; when they meet, `exact` is the maximum. Otherwise (or for irrational
 * coefficients) they enclose it, rounded outward.
 * @throws SolverStop `limit` beyond 20,000 inequalities or the budget, or when told to stop
 * @see Barrett et al., Phys. Rev. A 71, 022101 (2005)
 */
export async function noSignallingMaximum(
	problem: ProblemOf<'no-signalling'>,
	functional: Functional,
	control: Control
): Promise<Outcome> {
	const clock = new WorkClock(control, problem.seconds);
	const { scenario } = functional;
	const polytope = withConstraints(noSignallingRows(scenario), scenario, problem.constraints);
	const form = collinsGisinForm(functional);
	const integers = integerFunctional(form);
	const objective = objectiveOf(polytope, integers.terms);
	control.report({
		stage: 'no-signalling linear programme',
		iteration: 0,
		fraction: null,
		lower: null,
		upper: null
	});
	clock.check();
	const largest = objective.costs.reduce((m, c) => Math.max(m, Math.abs(Number(c))), 0);
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

	const allowance = integers.allowance.add(twiceTheErrors(functional));
	const unit = ratio(1n, integers.denominator);
	const below = behaviour.value.mul(unit);
	const above = multipliers.bound.mul(unit);
	const exact = allowance.n === 0n && below.equals(above) ? printRational(below) : null;
	const lower = toDoubleDown(below.sub(allowance));
	const upper = toDoubleUp(above.add(allowance));
	return {
		lower,
		upper,
		value: exact === null ? (lower + upper) / 2 : toDouble(below),
		tolerance: exact === null ? upper - lower : null,
		optimum: null,
		guaranteed: { lower: true, upper: true },
		exact,
		method: {
			name: 'linear programme over the no-signalling polytope',
			inequalities: polytope.probabilityCount,
			constraints: polytope.rows.length - polytope.probabilityCount,
			coordinates: polytope.columns.length,
			iterations: solution.iterations,
			vertex: behaviour.how,
			multipliers: multipliers.how
		},
		certificate: {
			kind: 'linear-programme',
			primal: record(polytope, behaviour.probabilities),
			dual: record(
				polytope,
				multipliers.multipliers.map((m, i) => m.mul(unit).mul(polytope.rows[i]?.scale ?? 1n))
			),
			value: exact
		}
	};
}

function objectiveOf(
	polytope: NoSignallingRows,
	terms: ReturnType<typeof integerFunctional>['terms']
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
function record(
	polytope: NoSignallingRows,
	values: Parameters<typeof overCommonDenominator>[0]
): Record<string, string> {
	const entries = polytope.rows.flatMap(({ key }, i) => {
		const value = values[i];
		return value && value.n !== 0n ? [[key, printRational(value)] as const] : [];
	});
	return Object.fromEntries(entries);
}

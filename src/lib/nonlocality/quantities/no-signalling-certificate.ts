/** Turns the simplex method's proposal into exact rationals that prove both sides. */
import { nearbyFraction, overCommonDenominator } from '../exact/common-denominator';
import { ONE, ZERO, exactOfDouble, ratio, type Rational } from '../exact/rational';
import { solveExactly } from '../optimization/exact-linear-system';
import type { LinearProgrammeSolution } from '../optimization/linear-programme';
import { SolverStop } from '../problem';
import type { NoSignallingRows, PolytopeRow } from './no-signalling-rows';

/** constant + sum of costs * y, integers. */
export interface IntegerObjective {
	readonly costs: readonly bigint[];
	readonly constant: bigint;
}

export interface ExactBehaviour {
	/** Of each probability, all >= 0. */
	readonly probabilities: readonly Rational[];
	readonly value: Rational;
	readonly how: string;
}

export interface ExactMultipliers {
	/** Of each row, all >= 0. */
	readonly multipliers: readonly Rational[];
	readonly bound: Rational;
	readonly how: string;
}

/** Vertices have small denominators: two fractions below the limit differ by more than twice this. */
const ROUNDING_TOLERANCE = 1e-9;
const LARGEST_DENOMINATOR = 10_000n;
/** Grid of the last resort, where no exact vertex is found. */
const GRID = 2 ** 40;

/** The best no-signalling behaviour found: a vertex where possible, else one close to it. */
export function bestBehaviour(
	polytope: NoSignallingRows,
	objective: IntegerObjective,
	solution: LinearProgrammeSolution,
	tick: () => void
): ExactBehaviour {
	const rounded = roundAll(solution.primal, 1);
	const fromRounding = rounded && behaviourAt(polytope, objective, rounded, 'continued fractions');
	if (fromRounding) return fromRounding;
	const { matrix, rightSide } = activeSystem(polytope, solution);
	const vertex = matrix && solveExactly(matrix, rightSide, tick);
	const fromBasis = vertex && behaviourAt(polytope, objective, vertex, 'exact basis');
	return fromBasis ?? nearVertex(polytope, objective, solution.primal);
}

/** The best multipliers found: exact ones where possible, else rounded ones with a residual. */
export function bestMultipliers(
	polytope: NoSignallingRows,
	objective: IntegerObjective,
	solution: LinearProgrammeSolution,
	scale: number,
	tick: () => void
): ExactMultipliers {
	const approximate = solution.multipliers.map((m) => Math.max(0, m * scale));
	const rounded = scale === 1 ? roundAll(approximate, 1) : null;
	const first = rounded && boundOf(polytope, objective, rounded, 'continued fractions');
	if (first?.tight) return first;
	const exact = multipliersOfBasis(polytope, objective, solution, tick);
	const second = exact && boundOf(polytope, objective, exact, 'exact basis');
	if (second?.tight) return second;
	const step = ratio(1n, BigInt(GRID));
	const grid = [...approximate].map((m) => exactOfDouble(Math.round(m * GRID)).mul(step));
	const last = boundOf(polytope, objective, grid, 'rounded, with a residual');
	return first && first.bound.compare(last.bound) < 0 ? first : last;
}

function roundAll(values: Float64Array, size: number): Rational[] | null {
	const fractions: Rational[] = [];
	for (const value of values) {
		const tolerance = ROUNDING_TOLERANCE * Math.max(size, Math.abs(value));
		const fraction = nearbyFraction(value, tolerance, LARGEST_DENOMINATOR);
		if (!fraction) return null;
		fractions.push(fraction);
	}
	return fractions;
}

/** Null unless every row is >= 0. */
function behaviourAt(
	polytope: NoSignallingRows,
	{ costs, constant }: IntegerObjective,
	coordinates: readonly Rational[],
	how: string
): ExactBehaviour | null {
	const { integers, denominator } = overCommonDenominator(coordinates);
	const probabilities: Rational[] = [];
	for (const [i, row] of polytope.rows.entries()) {
		const numerator = valueOfRow(row, integers, denominator);
		if (numerator < 0n) return null;
		if (i < polytope.probabilityCount) probabilities.push(ratio(numerator, denominator));
	}
	const sum = costs.reduce((s, c, i) => s + c * (integers[i] ?? 0n), constant * denominator);
	return { probabilities, value: ratio(sum, denominator), how };
}

function valueOfRow(row: PolytopeRow, y: readonly bigint[], denominator: bigint): bigint {
	let value = BigInt(row.constant) * denominator;
	for (const [column, factor] of row.entries) value += BigInt(factor) * (y[column] ?? 0n);
	return value;
}

/** Mixes the rounded point with the uniform behaviour until no probability is negative. */
function nearVertex(
	polytope: NoSignallingRows,
	objective: IntegerObjective,
	primal: Float64Array
): ExactBehaviour {
	const step = ratio(1n, BigInt(GRID));
	const point = [...primal].map((y) => exactOfDouble(Math.round(y * GRID)).mul(step));
	const uniform = uniformCoordinates(polytope);
	const { integers, denominator } = overCommonDenominator(point);
	const even = overCommonDenominator(uniform);
	let weight = ZERO; // of the uniform behaviour: -p / (u - p) at the worst row
	for (const row of polytope.rows.slice(0, polytope.probabilityCount)) {
		const p = ratio(valueOfRow(row, integers, denominator), denominator);
		if (p.s > 0n || p.n === 0n) continue;
		const u = ratio(valueOfRow(row, even.integers, even.denominator), even.denominator);
		const needed = p.neg().div(u.sub(p));
		if (needed.compare(weight) > 0) weight = needed;
	}
	const mixed = point.map((y, i) => y.mul(ONE.sub(weight)).add((uniform[i] ?? ZERO).mul(weight)));
	const behaviour = behaviourAt(polytope, objective, mixed, 'near the vertex');
	if (!behaviour) throw new SolverStop('failed', 'no exact behaviour that meets the constraints');
	return behaviour;
}

/** 1 / (product of outputs): rows of one input tuple share their number. */
function uniformCoordinates(polytope: NoSignallingRows): Rational[] {
	const counts = new Map<string, bigint>();
	for (const events of polytope.columns) {
		const [event] = events;
		if (events.length !== 1 || !event) continue;
		const key = `${event[0]}.${event[1]}`;
		counts.set(key, (counts.get(key) ?? 1n) + 1n);
	}
	return polytope.columns.map((events) =>
		ratio(
			1n,
			events.reduce((product, [p, x]) => product * (counts.get(`${p}.${x}`) ?? 1n), 1n)
		)
	);
}

/** The active inequalities as equalities; columns outside the basis are fixed at 0. */
function activeSystem(polytope: NoSignallingRows, solution: LinearProgrammeSolution) {
	const { activeRows, fixedColumns } = solution;
	const rows = activeRows.flatMap((i) => polytope.rows[i] ?? []);
	if (rows.length + fixedColumns.length !== polytope.columns.length)
		return { matrix: null, rightSide: [] };
	return {
		matrix: [...rows.map((row) => row.entries), ...fixedColumns.map((c) => [[c, 1] as const])],
		rightSide: [...rows.map(({ constant }) => BigInt(-constant)), ...fixedColumns.map(() => 0n)]
	};
}

/** costs + sum of multiplier * active row = 0, solved exactly; null unless all are >= 0. */
function multipliersOfBasis(
	polytope: NoSignallingRows,
	objective: IntegerObjective,
	solution: LinearProgrammeSolution,
	tick: () => void
): Rational[] | null {
	const { matrix } = activeSystem(polytope, solution);
	if (!matrix) return null;
	const transposed: [number, number][][] = matrix.map(() => []);
	matrix.forEach((row, i) => row.forEach(([c, value]) => transposed[c]?.push([i, value])));
	const active = solveExactly(
		transposed,
		objective.costs.map((c) => -c),
		tick
	);
	if (!active) return null;
	const all = polytope.rows.map(() => ZERO);
	for (const [k, i] of solution.activeRows.entries()) {
		const multiplier = active[k] ?? ZERO;
		if (multiplier.s < 0n && multiplier.n !== 0n) return null;
		all[i] = multiplier;
	}
	return all;
}

/** constant + sum of multipliers of the rows' constants + the positive residuals (each y <= 1). */
function boundOf(
	polytope: NoSignallingRows,
	{ costs, constant }: IntegerObjective,
	multipliers: readonly Rational[],
	how: string
): ExactMultipliers & { readonly tight: boolean } {
	const { integers, denominator } = overCommonDenominator(multipliers);
	let bound = constant * denominator;
	const residuals = costs.map((c) => c * denominator);
	polytope.rows.forEach((row, i) => {
		const m = integers[i] ?? 0n;
		if (m === 0n) return;
		bound += BigInt(row.constant) * m;
		for (const [column, factor] of row.entries)
			residuals[column] = (residuals[column] ?? 0n) + BigInt(factor) * m;
	});
	const tight = residuals.every((r) => r === 0n);
	for (const residual of residuals) if (residual > 0n) bound += residual;
	return { multipliers, bound: ratio(bound, denominator), how, tight };
}

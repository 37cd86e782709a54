import { ZERO, type Rational } from '../exact/rational';
import { solveExactly, type IntegerRows } from '../optimization/exact-linear-system';
import { solveLinearProgramme } from '../optimization/linear-programme';
import { SolverStop, type Control } from '../problem';
import { COST_LIMIT, TOO_FAR_APART } from './no-signalling-programme';
import type { WorkClock } from './work-clock';

/** A deterministic strategy with its integer values of the objective and of every constraint. */
export interface StrategyColumn {
	readonly strategy: readonly (readonly number[])[];
	readonly objective: bigint;
	readonly constraints: readonly number[];
}

/** Signs that a constraint's multiplier may have: >= 0 for `<=`, <= 0 for `>=`. */
export type MultiplierSign = '>=' | '<=' | 'any';

export interface MixtureSolution {
	/** Least U with U >= objective - sum m_k constraint_k for every listed strategy. */
	readonly bound: Rational;
	readonly multipliers: readonly Rational[];
	/** Of each listed strategy, sum 1, meeting the constraints; null when not found exactly. */
	readonly weights: readonly Rational[] | null;
}

interface Row {
	readonly entries: readonly (readonly [column: number, value: number])[];
	readonly rightSide: bigint;
	/** Place of the strategy, or null for a bound on a multiplier. */
	readonly strategy: number | null;
}

/** Larger right sides are scaled down for the simplex method. */
const LARGEST_SIDE = 2 ** 20;

/**
 * The best mixture of the listed strategies under the constraints, by its dual: minimise U over
 * (U, m) with U + sum m_k constraint_k(s) >= objective(s). The simplex method proposes a basis, which
 * is then solved exactly.
 * @param box bounds every |m_k| (so that an infeasible problem shows as a negative bound), or null
 * @throws SolverStop `failed` when no exact basis is found
 */
export async function bestMixture(
	columns: readonly StrategyColumn[],
	signs: readonly MultiplierSign[],
	box: bigint | null,
	clock: WorkClock,
	control: Control
): Promise<MixtureSolution> {
	const rows = rowsOf(columns, signs, box);
	const sizes = signs.map((_, k) =>
		columns.reduce((most, column) => Math.max(most, Math.abs(column.constraints[k] ?? 0)), 1)
	);
	const scales = [1, ...sizes];
	const largest = columns.reduce((most, c) => Math.max(most, Math.abs(Number(c.objective))), 1);
	if (largest > COST_LIMIT) throw new SolverStop('failed', TOO_FAR_APART);
	const scale = Math.max(1, largest / LARGEST_SIDE);
	const width = signs.length + 1;
	const solution = await solveLinearProgramme(
		{
			costs: Float64Array.from({ length: width }, (_, k) => (k === 0 ? -1 : 0)),
			starts: Int32Array.from(
				rows.reduce<number[]>(
					(starts, { entries }) => [...starts, (starts.at(-1) ?? 0) + entries.length],
					[0]
				)
			),
			indices: Int32Array.from(rows.flatMap(({ entries }) => entries.map(([column]) => column))),
			values: Float64Array.from(
				rows.flatMap(({ entries }) => entries.map(([column, v]) => v / (scales[column] ?? 1)))
			),
			lowerBounds: Float64Array.from(rows, ({ rightSide }) => Number(rightSide) / scale)
		},
		clock.left,
		control
	);
	if (solution.status !== 'optimal')
		throw new SolverStop('failed', `the linear programme came out ${solution.status}`);
	return exactSolution(rows, solution, columns.length, width, () => clock.check());
}

function rowsOf(
	columns: readonly StrategyColumn[],
	signs: readonly MultiplierSign[],
	box: bigint | null
): Row[] {
	const rows = columns.map(({ objective, constraints }, strategy): Row => {
		const entries = constraints.flatMap((value, k) =>
			value === 0 ? [] : [[k + 1, value] as const]
		);
		return { entries: [[0, 1], ...entries], rightSide: objective, strategy };
	});
	signs.forEach((sign, k) => {
		const bounded = (value: 1 | -1, rightSide: bigint) =>
			rows.push({ entries: [[k + 1, value]], rightSide, strategy: null });
		if (sign === '>=') bounded(1, 0n);
		else if (box !== null) bounded(1, -box);
		if (sign === '<=') bounded(-1, 0n);
		else if (box !== null) bounded(-1, -box);
	});
	return rows;
}

function exactSolution(
	rows: readonly Row[],
	basis: { readonly activeRows: readonly number[]; readonly fixedColumns: readonly number[] },
	count: number,
	width: number,
	tick: () => void
): MixtureSolution {
	const active = basis.activeRows.flatMap((i) => rows[i] ?? []);
	const matrix: IntegerRows = [
		...active.map(({ entries }) => entries),
		...basis.fixedColumns.map((column) => [[column, 1] as const])
	];
	const rightSide = [...active.map((row) => row.rightSide), ...basis.fixedColumns.map(() => 0n)];
	const point = matrix.length === width ? solveExactly(matrix, rightSide, tick) : null;
	if (!point) throw new SolverStop('failed', 'the basis of the linear programme is not exact');
	const transposed: [number, number][][] = Array.from({ length: width }, () => []);
	matrix.forEach((row, i) =>
		row.forEach(([column, value]) => transposed[column]?.push([i, value]))
	);
	const dual = solveExactly(
		transposed,
		transposed.map((_, column) => (column === 0 ? 1n : 0n)),
		tick
	);
	const [bound = ZERO, ...multipliers] = point;
	return { bound, multipliers, weights: dual && weightsOf(active, dual, count) };
}

/** Weights of the strategies; a fixed column's share must be 0, and no share negative. */
function weightsOf(
	active: readonly Row[],
	dual: readonly Rational[],
	count: number
): Rational[] | null {
	if (dual.some((share) => share.compare(0) < 0)) return null;
	if (dual.slice(active.length).some((share) => share.n !== 0n)) return null;
	const weights = Array<Rational>(count).fill(ZERO);
	for (const [i, { strategy }] of active.entries())
		if (strategy !== null) weights[strategy] = dual[i] ?? ZERO;
	return weights;
}

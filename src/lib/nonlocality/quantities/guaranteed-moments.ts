import { nextDouble } from '../exact/rational';
import { factorCholesky } from '../linalg/cholesky';
import { evaluateRow, fillMoments, type SparseRow } from '../optimization/moment-programme';
import type { MomentProblem } from './moment-problem';

/** Unit roundoff of doubles. */
const U = 2 ** -53;

/** gamma_k = k u / (1 - k u): relative error of k roundings. Higham, Accuracy and Stability, ch. 3. */
function gamma(k: number): number {
	return (k * U) / (1 - k * U);
}

/** Growth of the trial shift, and how often: past 4^20 rounding errors no bound is worth printing. */
const SHIFT_GROWTH = 4;
const MOST_SHIFTS = 20;

/**
 * A shift d >= 0 with lambda_min(matrix) >= -d, proved by a floating Cholesky factorisation of the
 * matrix moved by a multiple of the identity: completing it proves lambda_min >= -s with
 * s = gamma_{n+1} / (1 - gamma_{n+1}) * trace. Null when none was found.
 * Rump, Verification of positive definiteness, BIT 46, 433 (2006).
 */
export function provenShift(matrix: Float64Array, n: number, work: Float64Array): number | null {
	const error = choleskyError(matrix, n);
	let trial = -error;
	for (let attempt = 0; attempt <= MOST_SHIFTS; attempt++) {
		if (choleskyCompletes(matrix, n, trial, work))
			return attempt === 0 ? 0 : trial + error + gamma(n + 1) * 2 * n * trial;
		trial = attempt === 0 ? 0 : Math.max(error, trial * SHIFT_GROWTH);
	}
	return null;
}

/**
 * Covers the factorisation's own error and the rounding of the shifted diagonal. Twice what is
 * needed, so that another factorisation, rounding differently, completes as well.
 */
function choleskyError(matrix: Float64Array, n: number): number {
	let trace = 0;
	for (let i = 0; i < n; i++) trace += Math.abs(matrix[i * n + i] ?? 0);
	return 2.2 * gamma(n + 3) * trace + 1e-300;
}

function choleskyCompletes(
	matrix: Float64Array,
	n: number,
	shift: number,
	work: Float64Array
): boolean {
	work.set(matrix.subarray(0, n * n));
	for (let i = 0; i < n; i++) work[i * n + i] = (work[i * n + i] ?? 0) + shift;
	return factorCholesky(work, n);
}

/** A guaranteed bound and the shift it contains. */
export interface ProvenBound {
	readonly bound: number;
	readonly shift: number;
}

export interface Multipliers {
	/** Symmetric row-major. */
	readonly matrix: Float64Array;
	readonly rows: Float64Array;
	readonly equalities: Float64Array;
}

/**
 * A guaranteed upper bound on the relaxation from any multipliers, by weak duality and because
 * every feasible y has |y_i| <= 1 and trace Gamma(y) <= size:
 * c_0 + c.y <= c_0 + <F_0,Z> + sum_j z_j p_j0 + sum_i |c_i + <F_i,Z> + sum_j z_j p_ji| + size * d.
 * All roundings are covered by a-priori bounds. Null when Z cannot be proved positive.
 */
export function provenUpperBound(
	problem: MomentProblem,
	multipliers: Multipliers,
	work: Float64Array
): ProvenBound | null {
	const { programme } = problem;
	const n = programme.size;
	const shift = provenShift(multipliers.matrix, n, work);
	if (shift === null) return null;
	const { index, objective } = programme;
	const sums = objective.slice();
	const sizes = sums.map(Math.abs);
	const counts = new Int32Array(sums.length).fill(2);
	const add = (i: number, value: number) => {
		sums[i] = (sums[i] ?? 0) + value;
		sizes[i] = (sizes[i] ?? 0) + Math.abs(value);
		counts[i] = (counts[i] ?? 0) + 1;
	};
	for (let cell = 0; cell < index.length; cell++) {
		const moment = index[cell] ?? -1;
		if (moment >= 0) add(moment, multipliers.matrix[cell] ?? 0);
	}
	const addRow = ({ columns, values }: SparseRow, weight: number) => {
		for (let at = 0; at < columns.length; at++) add(columns[at] ?? 0, weight * (values[at] ?? 0));
	};
	programme.rows.forEach((row, j) => addRow(row, multipliers.rows[j] ?? 0));
	programme.equalities.forEach((row, k) => addRow(row, multipliers.equalities[k] ?? 0));

	let slack = problem.objectiveError + n * shift;
	problem.inequalities.forEach(({ error }, j) => {
		slack += error * (multipliers.rows[problem.probabilities.length + j] ?? 0);
	});
	problem.equalities.forEach(({ error }, k) => {
		slack += error * Math.abs(multipliers.equalities[k] ?? 0);
	});
	for (let i = 0; i < sums.length; i++) {
		const count = counts[i] ?? 0;
		if (i > 0) slack += Math.abs(sums[i] ?? 0);
		slack += gamma(count + 1) * (sizes[i] ?? 0) * (1 + 4 * U * count);
	}
	slack *= 1 + 2 * gamma(sums.length + programme.rows.length + programme.equalities.length + 8);
	const bound = nextDouble(nextDouble((sums[0] ?? 0) + slack, 1), 1);
	return Number.isFinite(bound) ? { bound, shift } : null;
}

/**
 * The objective at y rounded downward, when Gamma(y) and every row are proved feasible; otherwise
 * null. With equalities there is no exactly feasible double vector in general: null.
 */
export function provenFeasibleValue(
	problem: MomentProblem,
	y: Float64Array,
	work: Float64Array,
	gammaOfY: Float64Array
): number | null {
	const { programme } = problem;
	if (programme.equalities.length > 0 || y[0] !== 1) return null;
	const feasible = programme.rows.every((row, j) => {
		const size = row.columns.reduce(
			(sum, column, at) => sum + Math.abs((row.values[at] ?? 0) * (y[column] ?? 0)),
			0
		);
		const error = problem.inequalities[j - problem.probabilities.length]?.error ?? 0;
		return evaluateRow(row, y) > 1.1 * gamma(row.columns.length + 2) * size + error;
	});
	if (!feasible) return null;
	fillMoments(programme, y, gammaOfY);
	if (!choleskyCompletes(gammaOfY, programme.size, -choleskyError(gammaOfY, programme.size), work))
		return null;
	let value = 0;
	let size = 0;
	let count = 2;
	for (let i = 0; i < programme.objective.length; i++) {
		const c = programme.objective[i] ?? 0;
		if (c === 0) continue;
		const product = c * (y[i] ?? 0);
		value += product;
		size += Math.abs(product);
		count++;
	}
	const slack = 1.1 * gamma(count) * size + problem.objectiveError * (1 + 4 * U);
	return nextDouble(nextDouble(value - slack, -1), -1);
}

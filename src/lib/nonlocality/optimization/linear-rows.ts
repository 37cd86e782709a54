import { addScaled, dot } from '../linalg/dense';
import { evaluateRow, type SparseRow } from './moment-programme';

/** How the linear block moves with a direction. */
export interface RowDirection {
	readonly rowSlack: Float64Array;
	readonly rowMultipliers: Float64Array;
}

/** Slack given to a row that the start does not satisfy. */
const FIRST_SLACK = 0.1;

/** The linear block rows(y) >= 0: slacks s > 0, which may differ from rows(y), multipliers z > 0. */
export class LinearRows {
	readonly slack: Float64Array;
	readonly multipliers: Float64Array;
	readonly #rows: readonly SparseRow[];
	/** rows(y) - slack. */
	readonly #residual: Float64Array;

	constructor(rows: readonly SparseRow[]) {
		this.#rows = rows;
		this.slack = new Float64Array(rows.length);
		this.multipliers = new Float64Array(rows.length);
		this.#residual = new Float64Array(rows.length);
	}

	/** A centred start: z s = 1. */
	begin(y: Float64Array): void {
		this.#rows.forEach((row, j) => {
			const value = evaluateRow(row, y);
			const slack = Math.max(value, FIRST_SLACK);
			this.slack[j] = slack;
			this.#residual[j] = value - slack;
			this.multipliers[j] = 1 / slack;
		});
	}

	complementarity(): number {
		return dot(this.multipliers, this.slack);
	}

	/** Products of slacks and multipliers after the steps, added to `sum`. */
	addComplementarityAfter(
		sum: number,
		direction: RowDirection,
		multiplierStep: number,
		slackStep: number
	): number {
		return this.slack.reduce((total, s, j) => {
			const slack = s + slackStep * (direction.rowSlack[j] ?? 0);
			const z = (this.multipliers[j] ?? 0) + multiplierStep * (direction.rowMultipliers[j] ?? 0);
			return total + slack * z;
		}, sum);
	}

	multiplierStep(direction: RowDirection): number {
		return largestRatio(this.multipliers, direction.rowMultipliers);
	}

	slackStep(direction: RowDirection): number {
		return largestRatio(this.slack, direction.rowSlack);
	}

	/**
	 * Seeks slacks for the moments y reached by `step`, rows that start infeasible nearer by as much.
	 * @returns what takes them over; null when one is not positive.
	 */
	moveSlack(y: Float64Array, step: number): (() => void) | null {
		const slacks = this.#rows.map(
			(row, j) => evaluateRow(row, y) - (1 - step) * (this.#residual[j] ?? 0)
		);
		if (slacks.some((slack) => !(slack > 0))) return null;
		return () => {
			this.slack.set(slacks);
			this.#residual.forEach((residual, j) => (this.#residual[j] = (1 - step) * residual));
		};
	}

	/** (target - ds' dz' - z residual) / s: the part of z + dz that is not linear in dy. */
	fixedMultipliers(target: number, predictor: RowDirection | null): Float64Array {
		return this.slack.map((s, j) => {
			const correction = predictor
				? (predictor.rowSlack[j] ?? 0) * (predictor.rowMultipliers[j] ?? 0)
				: 0;
			return (target - correction - (this.multipliers[j] ?? 0) * (this.#residual[j] ?? 0)) / s;
		});
	}

	/** Writes the direction that follows from dy and `fixedMultipliers`. */
	fillDirection(dy: Float64Array, fixed: Float64Array, into: RowDirection): void {
		this.#rows.forEach((row, j) => {
			const linear = evaluateRow(row, dy);
			const z = this.multipliers[j] ?? 0;
			into.rowSlack[j] = linear + (this.#residual[j] ?? 0);
			into.rowMultipliers[j] = (fixed[j] ?? 0) - z - this.#weight(j) * linear;
		});
	}

	/** Changes a direction by what follows from a change of its dy. */
	correctDirection(change: Float64Array, direction: RowDirection): void {
		this.#rows.forEach((row, j) => {
			const linear = evaluateRow(row, change);
			direction.rowMultipliers[j] = (direction.rowMultipliers[j] ?? 0) - this.#weight(j) * linear;
			direction.rowSlack[j] = (direction.rowSlack[j] ?? 0) + linear;
		});
	}

	#weight(j: number): number {
		return (this.multipliers[j] ?? 0) / (this.slack[j] ?? 1);
	}

	/** M += sum_j (z_j / s_j) row_j row_j^T, lower triangle, unknowns by rank. */
	addToSchur(rankOf: Int32Array, matrix: Float64Array, m: number): void {
		this.#rows.forEach(({ columns, values }, j) => {
			const weight = this.#weight(j);
			for (let atA = 0; atA < columns.length; atA++) {
				const a = columns[atA] ?? 0;
				if (a === 0) continue;
				const rankA = rankOf[a] ?? 0;
				const scaled = weight * (values[atA] ?? 0);
				for (let atB = 0; atB < columns.length; atB++) {
					const b = columns[atB] ?? 0;
					const rankB = rankOf[b] ?? 0;
					if (b === 0 || rankB > rankA) continue;
					const at = rankA * m + rankB;
					matrix[at] = (matrix[at] ?? 0) + scaled * (values[atB] ?? 0);
				}
			}
		});
	}

	/** z += step dz, from `before`. */
	moveMultipliers(before: Float64Array, step: number, direction: RowDirection): void {
		this.multipliers.set(before);
		addScaled(this.multipliers, step, direction.rowMultipliers);
	}
}

/** Largest step that keeps every value nonnegative. */
function largestRatio(values: Float64Array, direction: Float64Array): number {
	return values.reduce((step, value, j) => {
		const change = direction[j] ?? 0;
		return change < 0 ? Math.min(step, -value / change) : step;
	}, Infinity);
}

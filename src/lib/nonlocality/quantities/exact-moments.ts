import type { ExactMomentCertificate, MomentCertificate, WholeNumber } from '../certificates/types';
import { overCommonDenominator } from '../exact/common-denominator';
import { numeratorOf, printRational, ratio, toDoubleUp } from '../exact/rational';
import type { ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import { confirmedShift } from './confirmed-shift';
import { provenShift, type Multipliers } from './guaranteed-moments';
import type { MomentProblem } from './moment-problem';
import { rationalForms, type RationalForm, type RationalForms } from './rational-forms';

/** Entries of the multiplier stay below 2^50: exact in doubles, plain numbers in JSON. */
const ENTRY_BITS = 50;
/** Coefficients over a larger common denominator get no exact certificate. */
const MOST_DENOMINATOR_BITS = 160;
/** Multipliers near 0 (of a constant functional) need no finer grid than 2^-160. */
const MOST_SCALE_BITS = 160;
/** A bound worse than the floating one by more than this (of the largest coefficient) is not worth it. */
const NOTICEABLE = 1e-10;
/** A shift that costs more than this (of the largest coefficient) is worth an exact confirmation. */
const DEAR = 2e-10;

export interface ExactBound {
	/** The exact bound rounded outward. */
	readonly upper: number;
	readonly certificate: ExactMomentCertificate;
}

/**
 * Turns floating multipliers into an exact certificate of nearly the same bound: they are rounded to
 * whole numbers over one denominator, what the rounding leaves over of each moment is spread over
 * its off-diagonal cells until every linear equality holds exactly, and the least eigenvalue that
 * this leaves is paid for by a shift. Costs about one Cholesky factorisation; where the a-priori
 * bound on its rounding would be dear (hundreds of rows), the shift is confirmed exactly instead.
 *
 * @param poll called every few milliseconds; may throw
 * Null where a coefficient is irrational, the denominators are too large, or the bound would come
 * out noticeably worse than the floating one.
 */
export function exactMomentBound(
	problem: ProblemOf<'npa'>,
	g: Functional,
	relaxation: MomentProblem,
	multipliers: Multipliers,
	floating: MomentCertificate,
	poll: () => void = () => {}
): ExactBound | null {
	const forms = rationalForms(problem, g, relaxation);
	if (!forms) return null;
	const scale = scaleOf(forms.objective, multipliers);
	if (!scale) return null;
	const { probabilities, programme } = relaxation;
	const weights = roundWeights(forms, scale, multipliers, probabilities.length);
	const entries = roundMatrix(multipliers.matrix, programme.size, scale);

	const rest = new Residuals(relaxation, entries);
	rest.add(forms.objective, scale.denominator);
	probabilities.forEach(({ row }, j) => {
		row.columns.forEach((moment, at) =>
			rest.addAt(moment, BigInt(row.values[at] ?? 0) * (weights.rows[j] ?? 0n))
		);
	});
	forms.constraints.forEach(({ place, form }) => rest.add(form, weights.constraints[place] ?? 0n));
	if (!rest.spread(entries)) return null;

	const n = programme.size;
	const moved = provenShift(symmetric(entries, n), n, new Float64Array(n * n));
	if (moved === null) return null;
	const largest = programme.objective.subarray(1).reduce((a, c) => Math.max(a, Math.abs(c)), 0);
	let shift = BigInt(Math.ceil(moved));
	if ((n * moved) / scale.value > DEAR * largest) shift = confirmedShift(entries, n, poll) ?? shift;
	const bound = ratio(rest.constant + BigInt(n) * shift, scale.denominator);
	const upper = toDoubleUp(bound);
	if (!(upper <= floating.bound + NOTICEABLE * largest)) return null;
	const { monomials, moments, feasibleValue } = floating;
	return {
		upper,
		certificate: {
			kind: 'npa-exact',
			monomials,
			denominator: printWhole(scale.denominator),
			multiplier: entries.map(printWhole),
			rowMultipliers: Object.fromEntries(
				probabilities.map(({ key }, j) => [key, printWhole(weights.rows[j] ?? 0n)])
			),
			constraintMultipliers: weights.constraints.map(printWhole),
			shift: printWhole(shift),
			bound: printRational(bound),
			moments,
			feasibleValue
		}
	};
}

interface Scale {
	/** N: even, and N times the objective is even. */
	readonly denominator: bigint;
	readonly value: number;
}

/** The finest denominator whose entries keep to ENTRY_BITS; null past MOST_DENOMINATOR_BITS. */
function scaleOf(objective: RationalForm, { matrix, rows, equalities }: Multipliers): Scale | null {
	const { denominator } = overCommonDenominator([...objective.values()]);
	const bits = denominator.toString(2).length;
	if (bits > MOST_DENOMINATOR_BITS) return null;
	let largest = Number.MIN_VALUE;
	for (const list of [matrix, rows, equalities])
		for (const value of list) largest = Math.max(largest, Math.abs(value));
	const power = Math.min(MOST_SCALE_BITS, ENTRY_BITS - 1 - bits - Math.ceil(Math.log2(largest)));
	const scaled = denominator << BigInt(Math.max(1, power));
	const value = Number(scaled);
	return Number.isFinite(value * largest) ? { denominator: scaled, value } : null;
}

/** The nearest multiple of a step. */
function nearest(value: number, step: bigint): bigint {
	return step * BigInt(Math.round(value / Number(step)));
}

/** Multipliers that leave an even whole number at every moment. */
function roundWeights(
	{ constraints }: RationalForms,
	scale: Scale,
	multipliers: Multipliers,
	probabilities: number
): { rows: bigint[]; constraints: bigint[] } {
	const rounded = (value: number, step: bigint) => nearest(value * scale.value, step);
	const rows = Array.from(multipliers.rows.subarray(0, probabilities), (value) =>
		rounded(Math.max(0, value), 2n)
	);
	let [inequality, equality] = [probabilities, 0];
	const found = constraints.map(({ free, denominator }) => {
		const value = free
			? (multipliers.equalities[equality++] ?? 0)
			: Math.max(0, multipliers.rows[inequality++] ?? 0);
		return rounded(value, 2n * denominator);
	});
	return { rows, constraints: found };
}

/** Lower triangle, row by row; even on the diagonal, so that every moment's sum is even. */
function roundMatrix(matrix: Float64Array, n: number, scale: Scale): bigint[] {
	const entries: bigint[] = [];
	for (let i = 0; i < n; i++) {
		for (let j = 0; j < i; j++) entries.push(nearest((matrix[i * n + j] ?? 0) * scale.value, 1n));
		entries.push(nearest((matrix[i * n + i] ?? 0) * scale.value, 2n));
	}
	return entries;
}

/** What stands at each moment: the objective, the multiplier's cells and the rows, all times N. */
class Residuals {
	readonly #sums: bigint[];
	/** Cells of the lower triangle below the diagonal, by moment. */
	readonly #cells: number[][];

	constructor({ programme }: MomentProblem, entries: readonly bigint[]) {
		const { size, index, unknowns } = programme;
		this.#sums = Array.from({ length: unknowns + 1 }, () => 0n);
		this.#cells = Array.from({ length: unknowns + 1 }, () => []);
		let at = 0;
		for (let i = 0; i < size; i++) {
			for (let j = 0; j <= i; j++, at++) {
				const moment = index[i * size + j] ?? -1;
				const entry = entries[at] ?? 0n;
				this.addAt(moment, i === j ? entry : 2n * entry);
				if (i > j && moment > 0) this.#cells[moment]?.push(at);
			}
		}
	}

	get constant(): bigint {
		return this.#sums[0] ?? 0n;
	}

	addAt(moment: number, value: bigint): void {
		if (moment >= 0) this.#sums[moment] = (this.#sums[moment] ?? 0n) + value;
	}

	add(form: RationalForm, weight: bigint): void {
		for (const [moment, coefficient] of form)
			this.addAt(moment, (numeratorOf(coefficient) * weight) / coefficient.d);
	}

	/** Takes every moment's sum out of its cells; false when one has no cell off the diagonal. */
	spread(entries: bigint[]): boolean {
		return this.#sums.every((sum, moment) => {
			if (moment === 0 || sum === 0n) return true;
			const cells = this.#cells[moment] ?? [];
			if (cells.length === 0 || sum % 2n !== 0n) return false;
			const count = BigInt(cells.length);
			const share = sum / 2n / count;
			let over = sum / 2n - share * count;
			const unit = over < 0n ? -1n : 1n;
			for (const cell of cells) {
				const extra = over === 0n ? 0n : unit;
				entries[cell] = (entries[cell] ?? 0n) - share - extra;
				over -= extra;
			}
			return true;
		});
	}
}

function symmetric(entries: readonly bigint[], n: number): Float64Array {
	const matrix = new Float64Array(n * n);
	let at = 0;
	for (let i = 0; i < n; i++) {
		for (let j = 0; j <= i; j++, at++) {
			matrix[i * n + j] = Number(entries[at] ?? 0n);
			matrix[j * n + i] = matrix[i * n + j] ?? 0;
		}
	}
	return matrix;
}

const LARGEST_NUMBER = BigInt(Number.MAX_SAFE_INTEGER);

function printWhole(value: bigint): WholeNumber {
	return value <= LARGEST_NUMBER && value >= -LARGEST_NUMBER ? Number(value) : String(value);
}

import type { ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import { proveFeasibleValue } from './feasible-moments';
import { weightedError, type MomentForm } from './moment-forms';
import { layOut, outcomeOf, require, triangle, type Layout } from './moment-layout';
import { weightedForms } from './multiplier-forms';
import { SCALE_BITS, floorDivide, magnitude, scaleDouble, unscaleUp } from './scaled-integers';
import type { CheckOutcome, MomentCertificate } from './types';
import { provesPositive } from './verified-cholesky';

/**
 * Checks the dual multiplier and the feasible moments of a moment-matrix relaxation of g, without
 * solving: sums are exact integers, only positivity uses (verified) floating point.
 *
 * `upper` holds for every relaxation whose monomials contain the certificate's: the list must be
 * part of the level's, which is rebuilt here. `lower` holds for this relaxation alone: the list must
 * be all of the level's.
 */
export function checkMomentCertificate(
	problem: ProblemOf<'npa'>,
	g: Functional,
	certificate: MomentCertificate
): CheckOutcome {
	return outcomeOf(() => {
		const layout = layOut(problem, g, certificate.monomials);
		return {
			checked: true,
			upper: proveUpper(problem, layout, certificate),
			lower: proveFeasibleValue(problem, layout, certificate),
			exact: null,
			method:
				`dual multiplier of ${layout.size} x ${layout.size}: residuals summed exactly, ` +
				'positivity by a verified floating Cholesky factorisation'
		};
	});
}

function proveUpper(
	problem: ProblemOf<'npa'>,
	layout: Layout,
	certificate: MomentCertificate
): number {
	const { size, cells, numbers } = layout;
	const { multiplier, shift = 0 } = certificate;
	require(multiplier.length === cells.length, 'the multiplier has the wrong size');
	require(Number.isFinite(certificate.bound), 'the bound is not finite');
	const z = triangle(size, (cell) => multiplier[cell] ?? NaN);
	require(provesPositive(z, shift), 'the multiplier is not proved positive semidefinite');

	const sums = new ResidualSums(numbers.size);
	sums.add(layout.objective, null);
	let at = 0;
	for (let i = 0; i < size; i++) {
		for (let j = 0; j <= i; j++, at++) {
			const value = scaleDouble(multiplier[at] ?? NaN);
			sums.addAt(cells[at] ?? -1, i === j ? value : 2n * value);
		}
	}
	const { rowMultipliers, constraintMultipliers = [] } = certificate;
	for (const { form, weight } of weightedForms(
		problem,
		layout,
		rowMultipliers,
		constraintMultipliers
	))
		sums.add(form, weight);
	const upper = unscaleUp(sums.bound() + BigInt(size) * scaleDouble(shift));
	require(upper <= certificate.bound, `the certificate proves ${upper}, not the printed bound`);
	return upper;
}

/** Scaled sums per moment, as intervals, and the errors of the forms. */
class ResidualSums {
	readonly #low: bigint[];
	readonly #high: bigint[];
	#errors = 0n;

	constructor(count: number) {
		this.#low = Array.from({ length: count }, () => 0n);
		this.#high = this.#low.slice();
	}

	addAt(moment: number, value: bigint): void {
		if (moment < 0) return;
		this.#low[moment] = (this.#low[moment] ?? 0n) + value;
		this.#high[moment] = (this.#high[moment] ?? 0n) + value;
	}

	/** Adds weight * form (weight null: 1). */
	add(form: MomentForm, weight: number | null): void {
		const scaled = weight === null ? 1n << SCALE_BITS : scaleDouble(weight);
		for (const [moment, { s, n, d }] of form.coefficients) {
			const product = s * n * scaled;
			const low = floorDivide(product, d);
			this.#low[moment] = (this.#low[moment] ?? 0n) + low;
			this.#high[moment] = (this.#high[moment] ?? 0n) + (low * d === product ? low : low + 1n);
		}
		this.#errors += weight === null ? form.error : weightedError(form, Math.abs(weight));
	}

	/** Largest value of the sum over all moments with identity 1 and the others in [-1, 1]. */
	bound(): bigint {
		return this.#high.reduce((total, high, moment) => {
			if (moment === 0) return total + high;
			const low = magnitude(this.#low[moment] ?? 0n);
			return total + (magnitude(high) > low ? magnitude(high) : low);
		}, this.#errors);
	}
}

import { parseRational, printRational, ratio, toDoubleUp, type Rational } from '../exact/rational';
import type { ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import { provePositivity } from './exact-positivity';
import { proveFeasibleValue } from './feasible-moments';
import type { MomentForm } from './moment-forms';
import { layOut, outcomeOf, require, type Layout } from './moment-layout';
import { weightedForms } from './multiplier-forms';
import type { CheckOutcome, ExactMomentCertificate, WholeNumber } from './types';

/** Digits of a whole number in a certificate; solvers write 16. */
const MOST_DIGITS = 200;

/** Past this many rows confirming a factor would take several seconds. */
const MOST_ROWS = 400;

/**
 * Checks an exact dual multiplier without solving: the bound is summed in rationals and positivity
 * proved in whole numbers, so that no rounding enters it. The feasible side, if there is one, is in
 * doubles and checked as for a floating certificate.
 *
 * With M + t >= 0, trace Gamma <= n and |y_i| <= 1, for every feasible y and N g = N c_0 + N c.y:
 * N g <= N c_0 + <F_0, M> + sum m_j p_j0 + sum_i |N c_i + <F_i, M> + sum m_j p_ji| + n t.
 */
export function checkExactMoments(
	problem: ProblemOf<'npa'>,
	g: Functional,
	certificate: ExactMomentCertificate
): CheckOutcome {
	return outcomeOf(() => {
		const layout = layOut(problem, g, certificate.monomials);
		const { bound, positivity } = proveBound(problem, layout, certificate);
		return {
			checked: true,
			upper: toDoubleUp(bound),
			lower: proveFeasibleValue(problem, layout, certificate),
			exact: null,
			exactBound: printRational(bound),
			method:
				`exact dual multiplier of ${layout.size} x ${layout.size}: bound summed in rationals, ` +
				`positivity proved in whole numbers (${positivity})`
		};
	});
}

function proveBound(
	problem: ProblemOf<'npa'>,
	layout: Layout,
	certificate: ExactMomentCertificate
): { bound: Rational; positivity: string } {
	const { size, cells, numbers, objective } = layout;
	require(certificate.multiplier.length === cells.length, 'the multiplier has the wrong size');
	require(size <= MOST_ROWS, `${size} monomials: an exact check takes at most ${MOST_ROWS}`);
	const printed = typeof certificate.bound === 'string' ? parseRational(certificate.bound) : null;
	require(printed !== null, 'the bound is no fraction');
	const denominator = readWhole(certificate.denominator);
	require(denominator > 0n, 'the denominator is not positive');
	const shift = readWhole(certificate.shift);
	require(shift >= 0n, 'the shift is negative');

	const entries = certificate.multiplier.map(readWhole);
	const sums = Array.from({ length: numbers.size }, () => 0n);
	const rows: bigint[][] = [];
	let at = 0;
	for (let i = 0; i < size; i++) {
		const row: bigint[] = [];
		for (let j = 0; j <= i; j++, at++) {
			const entry = entries[at] ?? 0n;
			const moment = cells[at] ?? -1;
			if (moment >= 0) sums[moment] = (sums[moment] ?? 0n) + (i === j ? entry : 2n * entry);
			row.push(i === j ? entry + shift : entry);
		}
		rows.push(row);
	}
	const totals = sums.map((sum) => ratio(sum));
	const add = (form: MomentForm, weight: bigint) => {
		require(form.error === 0n, 'an exact certificate needs rational coefficients');
		for (const [moment, coefficient] of form.coefficients)
			totals[moment] = coefficient.mul(ratio(weight)).add(totals[moment] ?? ratio(0n));
	};
	add(objective, denominator);
	const rowWeights = Object.entries(certificate.rowMultipliers).map(
		([key, weight]) => [key, readWhole(weight)] as const
	);
	for (const { form, weight } of weightedForms(
		problem,
		layout,
		Object.fromEntries(rowWeights),
		certificate.constraintMultipliers.map(readWhole)
	))
		add(form, weight);
	let total = ratio(BigInt(size) * shift);
	totals.forEach((sum, moment) => {
		if (sum.n !== 0n) total = total.add(moment === 0 ? sum : sum.abs());
	});
	const bound = total.div(ratio(denominator));
	require(bound.compare(printed) <=
		0, `the certificate proves ${printRational(bound)}, not the printed bound`);
	const positivity = provePositivity(rows);
	require(positivity !== null, 'the multiplier is not proved positive semidefinite');
	return { bound, positivity };
}

function readWhole(value: WholeNumber): bigint {
	if (typeof value === 'number') {
		require(Number.isSafeInteger(value), `${value} is no whole number below 2^53`);
		return BigInt(value);
	}
	require(typeof value === 'string' &&
		value.length <= MOST_DIGITS &&
		/^-?\d+$/.test(value), `"${String(value).slice(0, 40)}" is no whole number`);
	return BigInt(value);
}

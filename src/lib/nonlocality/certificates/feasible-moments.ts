import type { ProblemOf } from '../problem';
import type { Event } from '../scenario/scenario';
import { formOfProbability, type MomentForm } from './moment-forms';
import { require, triangle, type Layout } from './moment-layout';
import { floorDivide, scaleDouble, unscaleDown } from './scaled-integers';
import { provesPositive } from './verified-cholesky';

/** The feasible side of a certificate of a relaxation: moments and g's value there. */
export interface FeasibleSide {
	readonly moments: readonly number[] | null;
	readonly feasibleValue: number | null;
}

/**
 * The functional at the certificate's moments, rounded down, or null without moments: Gamma(y) >= 0
 * by a verified floating factorisation, rows and constraints in exact arithmetic.
 * @throws Rejected
 */
export function proveFeasibleValue(
	problem: ProblemOf<'npa'>,
	layout: Layout,
	{ moments, feasibleValue }: FeasibleSide
): number | null {
	if (moments === null && feasibleValue === null) return null;
	require(moments !== null && feasibleValue !== null, 'moments and their value come together');
	require(layout.complete, 'a lower side needs every monomial of the level');
	require(moments.length === layout.numbers.size - 1, 'the wrong number of moments');
	const gamma = triangle(layout.size, (cell) => {
		const number = layout.cells[cell] ?? -1;
		return number < 0 ? 0 : number === 0 ? 1 : (moments[number - 1] ?? NaN);
	});
	require(provesPositive(gamma, 0), 'the moment matrix is not proved positive semidefinite');
	const y = [scaleDouble(1), ...moments.map(scaleDouble)];
	layout.constraints.forEach((form, place) => {
		const exactly = problem.constraints[place]?.relation === '=';
		const least = leastValue(form, y);
		const most = exactly ? -leastValue(negated(form), y) : 0n;
		require(exactly
			? least === 0n && most === 0n
			: least >= 0n, `the moments do not satisfy constraint ${place}`);
	});
	if (problem.nonNegative) requireProbabilities(layout, y);
	const value = leastValue(layout.objective, y);
	require(value >=
		scaleDouble(feasibleValue), `the moments reach ${unscaleDown(value)}, not the printed value`);
	return unscaleDown(value);
}

/** The least value of a form at exact moments y, scaled and rounded down. */
function leastValue(form: MomentForm, y: readonly bigint[]): bigint {
	let total = -form.error;
	for (const [moment, { s, n, d }] of form.coefficients)
		total += floorDivide(s * n * (y[moment] ?? 0n), d);
	return total;
}

function negated(form: MomentForm): MomentForm {
	const coefficients = [...form.coefficients].map(([moment, c]) => [moment, c.neg()] as const);
	return { coefficients: new Map(coefficients), error: form.error };
}

/** Every probability and marginal that the moments determine. */
function requireProbabilities(layout: Layout, y: readonly bigint[]): void {
	let events: Event[][] = [[]];
	layout.scenario.outputs.forEach((counts, party) => {
		const own = counts.flatMap((count, input) =>
			Array.from({ length: count }, (_, output) => [party, input, output] as const)
		);
		events = events.flatMap((before) => [before, ...own.map((event) => [...before, event])]);
	});
	for (const list of events) {
		const form = formOfProbability(layout.numbers, layout.scenario, list);
		require(form === null || leastValue(form, y) >= 0n, 'the moments give a negative probability');
	}
}

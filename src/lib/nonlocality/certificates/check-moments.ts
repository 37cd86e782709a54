import type { ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import type { Event, Scenario } from '../scenario/scenario';
import {
	formOfConstraint,
	formOfFunctional,
	formOfProbability,
	weightedError,
	type MomentForm,
	type MomentNumbers
} from './moment-forms';
import {
	MOST_CHECKED_WORDS,
	isClosed,
	isReduced,
	levelNames,
	momentName,
	nameOf
} from './operator-words';
import {
	SCALE_BITS,
	floorDivide,
	magnitude,
	scaleDouble,
	unscaleDown,
	unscaleUp
} from './scaled-integers';
import type { CheckOutcome, MomentCertificate } from './types';
import { provesPositive } from './verified-cholesky';

class Rejected extends Error {}

function require(condition: boolean, reason: string): asserts condition {
	if (!condition) throw new Rejected(reason);
}

/** The monomial list and which cell of its matrix (lower triangle) holds which moment. */
interface Layout {
	readonly scenario: Scenario;
	readonly size: number;
	/** Per lower-triangle cell: -1 zero, 0 the identity, i the i-th moment. */
	readonly cells: readonly number[];
	readonly numbers: MomentNumbers;
	/** The list is the level's whole list: only then is a feasible matrix one of the level's. */
	readonly complete: boolean;
}

/**
 * Checks the dual multiplier and the feasible moments of a moment-matrix relaxation of g, without
 * solving: sums are exact integers, only positivity uses (verified) floating point.
 *
 * `upper` holds for every relaxation whose monomials contain the certificate's: the list must be
 * part of the level's, which is rebuilt here. `lower` holds for this relaxation alone: the list must
 * be all of the level's. The list must be closed under dropping a left-most operator, which gives
 * |moment| <= 1 and trace <= size.
 */
export function checkMomentCertificate(
	problem: ProblemOf<'npa'>,
	g: Functional,
	certificate: MomentCertificate
): CheckOutcome {
	try {
		const layout = layOut(problem, certificate);
		const objective = formOfFunctional(layout.numbers, g);
		require(objective !== null, 'the monomials lack a moment of the functional');
		const constraints = problem.constraints.map((constraint, place) => {
			const form = formOfConstraint(layout.numbers, g.scenario, constraint);
			require(form !== null, `the monomials lack a moment of constraint ${place}`);
			return form;
		});
		const upper = proveUpper(problem, layout, objective, constraints, certificate);
		const lower = proveLower(problem, layout, objective, constraints, certificate);
		return {
			checked: true,
			lower,
			upper,
			exact: null,
			method:
				`dual multiplier of ${layout.size} x ${layout.size}: residuals summed exactly, ` +
				'positivity by a verified floating Cholesky factorisation'
		};
	} catch (error) {
		if (error instanceof Rejected) return { checked: false, reason: error.message };
		if (error instanceof RangeError || error instanceof TypeError)
			return { checked: false, reason: `the certificate is malformed: ${error.message}` };
		throw error;
	}
}

function layOut(problem: ProblemOf<'npa'>, certificate: MomentCertificate): Layout {
	const scenario: Scenario = { outputs: problem.outputs };
	const { monomials } = certificate;
	require(monomials.length <= MOST_CHECKED_WORDS, `more than ${MOST_CHECKED_WORDS} monomials`);
	monomials.forEach((word, place) => {
		const fits =
			word.length === scenario.outputs.length &&
			word.every((letters, party) =>
				letters.every(([input, output]) => {
					const count = scenario.outputs[party]?.[input] ?? 0;
					return Number.isInteger(output) && output >= 0 && output < count - 1;
				})
			);
		require(fits, `monomial ${place} is not a word of this scenario`);
		require(isReduced(word), `monomial ${place} is not reduced`);
	});
	const names = new Set(monomials.map(nameOf));
	require(names.size === monomials.length, 'a monomial occurs twice');
	require(names.has(nameOf(scenario.outputs.map(() => []))), 'the identity is missing');
	require(isClosed(
		monomials,
		names
	), 'the monomials are not closed under dropping the left-most operator');
	const level = levelNames(scenario, problem.level);
	require(level !== null, `the level has more than ${MOST_CHECKED_WORDS} monomials`);
	require([...names].every((name) => level.has(name)), 'a monomial does not belong to the level');
	const identity = momentName(
		scenario.outputs.map(() => []),
		scenario.outputs.map(() => [])
	);
	const numbers = new Map([[identity ?? '', 0]]);
	const cells = monomials.flatMap((row, i) =>
		monomials.slice(0, i + 1).map((column) => {
			const name = momentName(row, column);
			if (name === null) return -1;
			const number = numbers.get(name) ?? numbers.size;
			numbers.set(name, number);
			return number;
		})
	);
	return { scenario, size: monomials.length, cells, numbers, complete: names.size === level.size };
}

/** Rows i of a symmetric matrix from its lower triangle. */
function triangle(size: number, entry: (cell: number) => number): Float64Array[] {
	return Array.from({ length: size }, (_, i) =>
		Float64Array.from({ length: i + 1 }, (_unused, j) => entry((i * (i + 1)) / 2 + j))
	);
}

function proveUpper(
	problem: ProblemOf<'npa'>,
	layout: Layout,
	objective: MomentForm,
	constraints: readonly MomentForm[],
	certificate: MomentCertificate
): number {
	const { size, cells, numbers } = layout;
	const { multiplier, shift = 0 } = certificate;
	require(multiplier.length === cells.length, 'the multiplier has the wrong size');
	require(Number.isFinite(certificate.bound), 'the bound is not finite');
	const z = triangle(size, (cell) => multiplier[cell] ?? NaN);
	require(provesPositive(z, shift), 'the multiplier is not proved positive semidefinite');

	const sums = new ResidualSums(numbers.size);
	sums.add(objective, null);
	let at = 0;
	for (let i = 0; i < size; i++) {
		for (let j = 0; j <= i; j++, at++) {
			const value = scaleDouble(multiplier[at] ?? NaN);
			sums.addAt(cells[at] ?? -1, i === j ? value : 2n * value);
		}
	}
	for (const [key, weight] of Object.entries(certificate.rowMultipliers)) {
		require(problem.nonNegative, 'a row multiplier although P >= 0 is not imposed');
		require(weight >= 0, `the multiplier of P(${key}) is negative`);
		const form = formOfProbability(numbers, layout.scenario, readRowKey(key));
		require(form !== null, `the moments do not determine P(${key})`);
		sums.add(form, weight);
	}
	const weights = certificate.constraintMultipliers ?? [];
	require(weights.length <= constraints.length, 'a multiplier of no constraint');
	weights.forEach((weight, place) => {
		const form = constraints[place];
		require(form !== undefined, 'a multiplier of no constraint');
		const free = problem.constraints[place]?.relation === '=';
		require(free || weight >= 0, `the multiplier of constraint ${place} is negative`);
		sums.add(form, weight);
	});
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

/** `"a,b|x,y"`, `-` for a party that is not measured. */
function readRowKey(key: string): Event[] {
	const [outputs, inputs] = key.split('|').map((side) => side.split(','));
	require(outputs !== undefined && inputs?.length === outputs.length, `"${key}" is no row`);
	return outputs.flatMap((output, party) => {
		const input = inputs[party] ?? '';
		if (output === '-' && input === '-') return [];
		require(/^\d{1,3}$/.test(output) && /^\d{1,3}$/.test(input), `"${key}" is no row`);
		return [[party, Number(input), Number(output)] as const];
	});
}

/** The least value of a form at exact moments y, scaled and rounded down. */
function leastValue(form: MomentForm, y: readonly bigint[]): bigint {
	let total = -form.error;
	for (const [moment, { s, n, d }] of form.coefficients)
		total += floorDivide(s * n * (y[moment] ?? 0n), d);
	return total;
}

function proveLower(
	problem: ProblemOf<'npa'>,
	layout: Layout,
	objective: MomentForm,
	constraints: readonly MomentForm[],
	certificate: MomentCertificate
): number | null {
	const { moments, feasibleValue } = certificate;
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
	constraints.forEach((form, place) => {
		const exactly = problem.constraints[place]?.relation === '=';
		const least = leastValue(form, y);
		const most = exactly ? -leastValue(negated(form), y) : 0n;
		require(exactly
			? least === 0n && most === 0n
			: least >= 0n, `the moments do not satisfy constraint ${place}`);
	});
	if (problem.nonNegative) requireProbabilities(layout, y);
	const value = leastValue(objective, y);
	require(value >=
		scaleDouble(feasibleValue), `the moments reach ${unscaleDown(value)}, not the printed value`);
	return unscaleDown(value);
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

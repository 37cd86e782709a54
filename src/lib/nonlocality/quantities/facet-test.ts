import { overCommonDenominator } from '../exact/common-denominator';
import { printRational, ratio, type Rational } from '../exact/rational';
import { solveExactly } from '../optimization/exact-linear-system';
import { ModularBasis } from '../optimization/modular-rank';
import { SolverStop, type Control, type ProblemOf } from '../problem';
import { collinsGisinForm, isRational, type Functional } from '../scenario/functional';
import type { Scenario } from '../scenario/scenario';
import {
	enumerateStrategies,
	forEachBestStrategy,
	type OutputChoices
} from './enumerate-strategies';
import { reportProgress } from './local-maximum';
import type { Outcome } from './outcome';
import { strategyCoordinates, type StrategyCoordinates } from './strategy-coordinates';
import { strategyTensor, type StrategyTensor } from './strategy-tensor';
import { WorkClock } from './work-clock';

/** Coordinates of the scenario: a dense rank of this size takes some seconds. */
const COORDINATE_LIMIT = 800;
/**
 * Strategies of all parties but one times the terms of the functional and of a second one, as the
 * check enumerates them again in BigInt: some seconds.
 */
export const FACET_WORK_LIMIT = 2 ** 24;

/**
 * Whether f <= (its local maximum) is a facet of the local polytope: the deterministic strategies
 * that reach the maximum must contain as many affinely independent ones as the polytope has
 * dimensions (those of the no-signalling space).
 *
 * Guarantee: value 1 rests on that many strategies, independent modulo a prime and so over the
 * rationals; value 0 on a second functional that vanishes at all strategies that reach the maximum,
 * exactly. Its `rank` counts the independent strategies found: a lower bound, and the rank unless the
 * prime divides one of their minors.
 * @throws SolverStop `failed` for irrational coefficients, `limit` past the limits
 * @see Masanes, Quantum Inf. Comput. 3, 345 (2003); Pironio, J. Math. Phys. 46, 062112 (2005)
 */
export function facetTest(
	problem: ProblemOf<'facet'>,
	functional: Functional,
	control: Control
): Outcome {
	const clock = new WorkClock(control, problem.seconds);
	const coordinates = readSizes(functional);
	const tensor = strategyTensor(functional);
	const tick = (enumerated: number) => {
		clock.check();
		const stage = 'strategies that reach the local maximum';
		reportProgress(control, stage, enumerated, tensor.count);
	};
	const best = enumerateStrategies(tensor, tick);
	const constant = tensor.entries.slice(1).every((entry) => entry === 0n);
	const dimension = coordinates.size - 1;

	const basis = new ModularBasis();
	const strategies: number[][][] = [];
	let saturating = 0n;
	const forEachChoice = (visit: (choices: OutputChoices) => void) =>
		forEachBestStrategy(tensor, best.value, tick, (digits) =>
			visit(wholeChoices(functional.scenario, tensor, digits))
		);
	forEachChoice((choices) => {
		saturating += choices.flat().reduce((product, list) => product * BigInt(list.length), 1n);
		if (basis.rank >= dimension && !constant) return;
		for (const strategy of spanningStrategies(choices)) {
			clock.check();
			if (basis.add(coordinates.vectorOf(strategy))) strategies.push(strategy);
		}
	});
	const facet = !constant && basis.rank === dimension;
	const maximum = ratio(best.value, tensor.denominator);
	const vanishing =
		facet || constant
			? null
			: vanishingFunctional(functional, maximum, coordinates, basis, strategies, clock);
	if (vanishing)
		forEachChoice((choices) => {
			clock.check();
			for (const strategy of spanningStrategies(choices))
				if (coordinates.valueAt(vanishing, strategy) !== 0n)
					throw new SolverStop('failed', 'the strategies found span less than those there are');
		});
	return {
		lower: facet ? 1 : 0,
		upper: facet ? 1 : 0,
		value: facet ? 1 : 0,
		tolerance: null,
		optimum: null,
		guaranteed: { lower: true, upper: true },
		exact: facet ? '1' : '0',
		method: {
			name: 'rank of the strategies that reach the local maximum',
			localMaximum: printRational(maximum),
			dimension,
			rank: basis.rank,
			saturating: String(saturating),
			facet
		},
		certificate: {
			kind: 'facet',
			maximum: printRational(maximum),
			strategies,
			vanishing: vanishing && coordinates.termsOf(vanishing)
		}
	};
}

function readSizes(functional: Functional): StrategyCoordinates {
	const { outputs } = functional.scenario;
	if (!isRational(functional))
		throw new SolverStop(
			'failed',
			'the facet test is exact and needs rational coefficients; divide out a common irrational factor'
		);
	const size = outputs.reduce(
		(product, counts) => product * counts.reduce((sum, count) => sum + count - 1, 1),
		1
	);
	if (size > COORDINATE_LIMIT)
		throw new SolverStop(
			'limit',
			`the local polytope has ${size - 1} dimensions, more than the limit of ${COORDINATE_LIMIT - 1}`
		);
	const counts = outputs.map((row) => row.reduce((product, count) => product * count, 1));
	const others = counts.reduce((product, count) => product * count, 1) / Math.max(...counts);
	const work = others * (functional.terms.length + size);
	if (work > FACET_WORK_LIMIT)
		throw new SolverStop(
			'limit',
			`the check would look at ${work} terms (${others} strategies), more than the limit of ${FACET_WORK_LIMIT}`
		);
	return strategyCoordinates(functional.scenario);
}

/** Choices of every party and input: any output where the functional does not look. */
function wholeChoices(
	scenario: Scenario,
	tensor: StrategyTensor,
	digits: OutputChoices
): OutputChoices {
	return scenario.outputs.map((counts, p) => {
		const k = tensor.parties.findIndex(({ party }) => party === p);
		const inputs = tensor.parties[k]?.inputs ?? [];
		return counts.map((count, x) => {
			const place = inputs.indexOf(x);
			if (place < 0) return Array.from({ length: count }, (_, a) => a);
			return digits[k]?.[place] ?? [];
		});
	});
}

/**
 * Strategies among the choices whose span contains all of them: per party one strategy and every
 * change of a single output, as its coordinates are a sum over its inputs.
 */
function spanningStrategies(choices: OutputChoices): number[][][] {
	return choices.reduce<number[][][]>(
		(found, inputs) => {
			const first = inputs.map((list) => list[0] ?? 0);
			const single = inputs.flatMap((list, x) =>
				list.slice(1).map((output) => first.map((a, y) => (y === x ? output : a)))
			);
			return found.flatMap((parties) => [first, ...single].map((own) => [...parties, own]));
		},
		[[]]
	);
}

/** Integers h, no multiple of f - maximum, with h . v = 0 for all collected strategies. */
function vanishingFunctional(
	functional: Functional,
	maximum: Rational,
	coordinates: StrategyCoordinates,
	basis: ModularBasis,
	strategies: readonly (readonly number[][])[],
	clock: WorkClock
): bigint[] {
	const vectors = strategies.map((strategy) => coordinates.vectorOf(strategy));
	const { pivots } = basis;
	const free = Array.from({ length: coordinates.size }, (_, i) => i).filter(
		(i) => !pivots.includes(i)
	);
	const own = coordinates.coefficientsOf(collinsGisinForm(functional), maximum);
	const matrix = vectors.map((vector) =>
		pivots.flatMap((column, k) => (vector[column] === 0 ? [] : [[k, vector[column] ?? 0] as const]))
	);
	// Two different free coordinates give two functionals that are no multiples of each other.
	for (const column of free.slice(0, 2)) {
		const right = vectors.map((vector) => -BigInt(vector[column] ?? 0));
		const solution = solveExactly(matrix, right, () => clock.check());
		if (!solution) break;
		const { integers, denominator } = overCommonDenominator(solution);
		const found = Array<bigint>(coordinates.size).fill(0n);
		found[column] = denominator;
		pivots.forEach((pivot, k) => (found[pivot] = integers[k] ?? 0n));
		if (!isMultiple(found, own)) return found;
	}
	throw new SolverStop('failed', 'no second functional was found for what seems no facet');
}

function isMultiple(a: readonly bigint[], b: readonly bigint[]): boolean {
	const k = b.findIndex((x) => x !== 0n);
	const [scale, base] = [a[k] ?? 0n, b[k] ?? 0n];
	return a.every((x, i) => x * base === (b[i] ?? 0n) * scale);
}

import type { StrategyCertificate } from '../certificates/types';
import { seededRandom } from '../linalg/seeded-random';
import { SolverStop, type Control, type ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import type { Outcome } from './outcome';
import { BudgetSpent, pollWithin } from './search-budget';
import { climb } from './see-saw-climb';
import { fixedState } from './see-saw-fixed-state';
import { arrangeForSeeSaw } from './see-saw-functional';
import { guaranteedValue } from './see-saw-guarantee';
import { randomStrategy, type SeeSawStrategy } from './see-saw-strategy';

/** Entries of the state: 64 x 64, some 50 MB of work space. */
export const STATE_LIMIT = 4096;
/** A gap to the target below this share of the scale is closed: the allowance is about as large. */
const TARGET_CLOSED = 1e-11;

export interface StrategySearch {
	readonly dimensions: readonly number[];
	readonly starts: number;
	/** Starts of one search are the streams `firstStart`, `firstStart + 1` ... of the seed. */
	readonly firstStart: number;
	readonly seed: number;
	readonly seconds: number;
	readonly state: ProblemOf<'see-saw'>['state'];
	/** An upper bound, or a value that is enough: no further start once it is reached. */
	readonly target: number | null;
	/** The best value known from elsewhere: starts that will not reach it are given up early. */
	readonly known: number | null;
}

export interface SearchResult {
	readonly certificate: StrategyCertificate;
	/** As computed, before the allowance. */
	readonly value: number;
	readonly strategy: SeeSawStrategy;
	readonly bestStart: number;
	readonly startsDone: number;
	readonly iterations: number;
	readonly converged: boolean;
	readonly targetReached: boolean;
}

/**
 * Best of many alternating maximisations from seeded random strategies, real and complex in turn,
 * and by twos with projective and with general measurements where there are more than two outputs. Null when the budget ended before the first step.
 * @throws SolverStop `cancelled` when told to stop, `limit` for a state of more than 4096 entries
 */
export function searchStrategies(
	g: Functional,
	search: StrategySearch,
	control: Control
): SearchResult | null {
	const { dimensions } = search;
	const total = dimensions.reduce((product, d) => product * d, 1);
	if (total > STATE_LIMIT)
		throw new SolverStop(
			'limit',
			`a state in dimensions ${dimensions.join(' x ')} has ${total} entries; the limit is ${STATE_LIMIT}`
		);
	const functional = arrangeForSeeSaw(g);
	const given = fixedState(search.state, dimensions);
	const poll = pollWithin(control, search.seconds);
	let best: Omit<
		SearchResult,
		'certificate' | 'startsDone' | 'targetReached' | 'iterations'
	> | null = null;
	let startsDone = 0;
	let iterations = 0;
	let targetReached = false;
	while (startsDone < search.starts && !targetReached) {
		const start = search.firstStart + startsDone;
		const random = seededRandom(search.seed, start);
		const real = start % 2 === 0 && !given?.im;
		const kind = { real, general: start % 4 > 1 };
		const strategy = randomStrategy(g.scenario.outputs, dimensions, kind, random);
		if (given) strategy.state.re.set(given.re);
		if (given?.im) strategy.state.im?.set(given.im);
		else if (given) strategy.state.im?.fill(0);
		let stopped = false;
		let value: number;
		let converged = false;
		try {
			const options = { moveState: given === null, random, poll };
			const threshold = Math.max(best?.value ?? -Infinity, search.known ?? -Infinity);
			const done = climb(functional, strategy, { ...options, best: threshold });
			({ value, converged } = done);
			iterations += done.iterations;
		} catch (error) {
			if (!(error instanceof BudgetSpent)) throw error;
			stopped = true;
			value = valueWhereStopped(g, strategy);
		}
		startsDone++;
		if (!best || value > best.value) best = { value, strategy, bestStart: start, converged };
		targetReached =
			search.target !== null && best.value >= search.target - TARGET_CLOSED * functional.scale;
		control.report({
			stage: `see-saw, dimension ${printDimensions(dimensions)}`,
			iteration: startsDone,
			fraction: startsDone / search.starts,
			lower: best.value,
			upper: search.target
		});
		if (stopped) break;
	}
	if (!best) return null;
	const certificate = guaranteedValue(g, best.strategy);
	return { ...best, certificate, startsDone, iterations, targetReached };
}

function valueWhereStopped(g: Functional, strategy: SeeSawStrategy): number {
	return guaranteedValue(g, strategy).value;
}

export function printDimensions(dimensions: readonly number[]): string {
	const [first] = dimensions;
	return dimensions.every((d) => d === first) ? String(first) : dimensions.join(' x ');
}

/**
 * Largest value found for quantum strategies of the given local dimensions: a lower bound on the
 * quantum maximum. Measurements are projective; for the given state (`state`) only they move.
 *
 * Guarantee: `lower` is the re-evaluated value of the strategy in the certificate, less the
 * allowance for rounding. That no better strategy exists is not claimed.
 * @param target an upper bound known already: the search ends when it is reached
 * @throws SolverStop `failed` for constraints or a state that does not fit, `limit` for a state of
 *   more than 4096 entries, `cancelled` when told to stop
 */
export function seeSaw(
	problem: ProblemOf<'see-saw'>,
	g: Functional,
	control: Control,
	target: number | null = null
): Outcome {
	if (problem.constraints.length > 0)
		throw new SolverStop(
			'failed',
			'see-saw under additional constraints has no solver yet; leave out "constraints"'
		);
	const dimensions = partyDimensions(problem.dimension, g.scenario.outputs.length);
	const { starts, seed, seconds, state } = problem;
	const found = searchStrategies(
		g,
		{ dimensions, starts, firstStart: 0, seed, seconds, state, target, known: null },
		control
	);
	if (!found) throw new SolverStop('limit', `no start was possible within ${seconds} s`);
	return {
		lower: found.certificate.value,
		upper: null,
		value: null,
		tolerance: null,
		optimum: found.value,
		guaranteed: { lower: true, upper: false },
		exact: null,
		method: {
			name: 'see-saw',
			dimension: dimensions,
			starts: found.startsDone,
			bestStart: found.bestStart,
			real: found.strategy.real,
			projective: found.certificate.projective,
			iterations: found.iterations,
			converged: found.converged
		},
		certificate: found.certificate
	};
}

/** One dimension for all parties, or one per party. @throws SolverStop `failed` */
export function partyDimensions(given: readonly number[], parties: number): number[] {
	const list =
		given.length === 1 ? Array.from({ length: parties }, () => given[0] ?? 1) : [...given];
	if (list.length !== parties)
		throw new SolverStop(
			'failed',
			`dimension: ${given.length} numbers for ${parties} parties; give one, or one per party`
		);
	const wrong = list.find((d) => !Number.isInteger(d) || d < 1);
	if (wrong !== undefined)
		throw new SolverStop('failed', `dimension: ${wrong} is no whole number of at least 1`);
	return list;
}

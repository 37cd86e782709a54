import type { StrategyCertificate } from '../certificates/types';
import { setComplex } from '../linalg/complex-dense';
import { seededRandom } from '../linalg/seeded-random';
import type { Control, ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import { expectBudgetSpent, pollWithin } from './search-budget';
import { climb } from './see-saw-climb';
import { checkStateSize, printDimensions } from './see-saw-dimensions';
import { fixedState } from './see-saw-fixed-state';
import { arrangeForSeeSaw } from './see-saw-functional';
import { guaranteedValue } from './see-saw-guarantee';
import { randomStrategy, type SeeSawStrategy } from './see-saw-strategy';

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
	/** How near to the target is enough (default: rounding). */
	readonly gap?: number;
	/** The best value known from elsewhere: starts that will not reach it are given up early. */
	readonly known: number | null;
	/** Start 0, in place of a random one. */
	readonly from?: SeeSawStrategy | null;
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
 * and by twos with projective and with general measurements where there are more than two outputs.
 * @throws SolverStop `cancelled` when told to stop, `limit` for a state of more than 4096 entries
 */
export function searchStrategies(
	g: Functional,
	search: StrategySearch,
	control: Control
): SearchResult {
	const { dimensions } = search;
	checkStateSize(dimensions, 'dimension');
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
	const closed = Math.max(search.gap ?? 0, TARGET_CLOSED * functional.scale);
	while (startsDone < search.starts && !targetReached) {
		const start = search.firstStart + startsDone;
		const random = seededRandom(search.seed, start);
		const real = start % 2 === 0 && !given?.im;
		const kind = { real, general: start % 4 > 1 };
		const from = start === 0 ? search.from : null;
		const strategy = from ?? randomStrategy(g.scenario.outputs, dimensions, kind, random);
		if (given) setComplex(strategy.state, given);
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
			expectBudgetSpent(error);
			stopped = true;
			value = valueWhereStopped(g, strategy);
		}
		startsDone++;
		if (!best || value > best.value) best = { value, strategy, bestStart: start, converged };
		targetReached = search.target !== null && best.value >= search.target - closed;
		control.report({
			stage: `see-saw, dimension ${printDimensions(dimensions)}`,
			iteration: startsDone,
			fraction: startsDone / search.starts,
			lower: best.value,
			upper: search.target
		});
		if (stopped) break;
	}
	if (!best) throw new RangeError('a search has at least one start');
	const certificate = guaranteedValue(g, best.strategy);
	return { ...best, certificate, startsDone, iterations, targetReached };
}

function valueWhereStopped(g: Functional, strategy: SeeSawStrategy): number {
	return guaranteedValue(g, strategy).value;
}

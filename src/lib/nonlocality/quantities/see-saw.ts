import { SolverStop, type Control, type ProblemOf } from '../problem';
import { constraintForm } from '../scenario/constraint-form';
import type { Functional } from '../scenario/functional';
import { largestDimensions } from '../scenario/local-dimensions';
import { givenStrategy } from './given-strategy';
import type { Outcome } from './outcome';
import { searchUnderConstraints } from './see-saw-constrained';
import { quickUpperBound } from './quick-upper-bound';
import { checkStateSize, partyDimensions } from './see-saw-dimensions';
import { StrategyGrowth } from './see-saw-growth';
import { searchStrategies, type SearchResult } from './strategy-search';

/** Share of the budget for starts in the given dimensions, where the strategy is to grow. */
const START_SHARE = 0.25;

/** A search that comes so near to an upper bound is over, as for the quantum maximum. */
const GAP = 1e-8;

/**
 * Largest value found for quantum strategies of the given local dimensions: a lower bound on the
 * quantum maximum. For the given state (`state`) only the measurements move; with `grow` the best
 * strategy is grown up to that dimension; with `start` the search begins at that strategy.
 *
 * Guarantee: `lower` is the re-evaluated value of the strategy in the certificate, less the
 * allowance for rounding. That no better strategy exists is not claimed. Under constraints `lower`
 * is guaranteed only where all of them are inequalities that provably hold: equations hold to
 * rounding at best, so what a strategy near them reaches is numerical, with its violation beside it.
 * Where a relaxation takes no time, its bound ends the search as soon as a strategy meets it.
 * @param known an upper bound, or a value that is enough: the search ends when it is reached
 * @throws SolverStop `failed` for a state or start that does not fit or when no strategy meets the
 *   constraints, `limit` for a state of more than 4096 entries, `cancelled` when told to stop
 */
export function seeSaw(
	problem: ProblemOf<'see-saw'>,
	g: Functional,
	control: Control,
	known: number | null = null
): Outcome {
	const parties = g.scenario.outputs.length;
	const dimensions = partyDimensions(problem.dimension, parties);
	const largest = largestDimensions(problem, parties);
	checkStateSize(largest, problem.grow === undefined ? 'dimension' : 'grow');
	if (problem.grow !== undefined && (problem.state !== 'free' || problem.constraints.length > 0))
		throw new SolverStop('failed', 'grow: has no part with a given state or with constraints');
	const { starts, seed, seconds, state, start, grow, constraints } = problem;
	if (start && state !== 'free')
		throw new SolverStop('failed', 'start: has no part with a given state');
	const from = start
		? givenStrategy(g.scenario, start, startDimensions(start, dimensions, largest))
		: null;
	const common = { dimensions, starts, seed, state, from };
	if (constraints.length > 0) {
		const forms = constraints.map((constraint) => constraintForm(g.scenario, constraint));
		return searchUnderConstraints(g, forms, { ...common, seconds }, control);
	}
	const began = control.now();
	const worthwhile = known === null && state === 'free' && (starts > 1 || grow !== undefined);
	const target = worthwhile ? quickUpperBound(problem, g, control) : known;
	const search = {
		...common,
		// a start beyond the given dimensions is only to be grown
		from: from?.dimensions.every((d, party) => d === dimensions[party]) ? from : null,
		firstStart: 0,
		seconds: grow === undefined ? seconds : START_SHARE * seconds,
		target,
		gap: worthwhile ? GAP : 0,
		known: null
	};
	const found = searchStrategies(g, search, control);
	if (grow === undefined || found.targetReached) return outcomeOf(found, dimensions);
	const growth = new StrategyGrowth(g, { seed, largest: grow, start: from });
	growth.growFrom(found.strategy);
	const left = seconds - (control.now() - began) / 1000;
	const lower = found.certificate.value;
	const enough = target === null ? Infinity : target - search.gap;
	const grown = left > 0 ? growth.run(left, lower, control, enough) : null;
	const certificate = grown ?? found.certificate;
	return {
		...plainOutcome(certificate.value, growth.value),
		method: {
			...outcomeOf(found, dimensions).method,
			projective: certificate.projective,
			grown: { dimensions: certificate.strategy.dimensions, tries: growth.tries }
		},
		certificate
	};
}

/** A start in the given dimensions where it fits into them, else in its own, to be grown. */
function startDimensions(
	{ dimensions: own }: { readonly dimensions: readonly number[] },
	dimensions: readonly number[],
	largest: readonly number[]
): readonly number[] {
	if (own.every((d, party) => d <= (dimensions[party] ?? 0))) return dimensions;
	const excess = own.find((d, party) => d > (largest[party] ?? 0));
	if (excess === undefined) return own;
	throw new SolverStop(
		'failed',
		`start: its dimensions ${own.join(' x ')} exceed the problem's ${largest.join(' x ')}`
	);
}

function outcomeOf(found: SearchResult, dimensions: readonly number[]): Outcome {
	return {
		...plainOutcome(found.certificate.value, found.value),
		method: {
			name: 'see-saw',
			dimension: dimensions,
			starts: found.startsDone,
			bestStart: found.bestStart,
			real: found.strategy.real,
			projective: found.certificate.projective,
			targetReached: found.targetReached,
			iterations: found.iterations,
			converged: found.converged
		},
		certificate: found.certificate
	};
}

function plainOutcome(lower: number, optimum: number): Omit<Outcome, 'method' | 'certificate'> {
	return {
		lower,
		upper: null,
		value: null,
		tolerance: null,
		optimum,
		guaranteed: { lower: true, upper: false },
		exact: null
	};
}

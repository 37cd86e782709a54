import { parseRational, printRational } from '../exact/rational';
import {
	FORMAT,
	SolverStop,
	type Control,
	type DoneResult,
	type Problem,
	type Result,
	type UnfinishedResult
} from '../problem';
import type { Functional } from '../scenario/functional';
import { functionalToMaximise, turnsSigns } from '../scenario/problem-functional';
import { constrainedLocalMaximum } from './constrained-local-maximum';
import { facetTest } from './facet-test';
import { hybridMaximum } from './hybrid-maximum';
import { localMaximum } from './local-maximum';
import { noSignallingMaximum } from './no-signalling-maximum';
import { npaBound } from './npa-bound';
import { momentProblemSdpa } from './moment-problem-sdpa';
import type { Outcome } from './outcome';
import { quantumMaximum } from './quantum-maximum';
import { seeSaw } from './see-saw';
import { SOLVER } from './solver-version';
import { boxValue } from './value';

/**
 * Recomputes the quantity of a problem. Never throws and never returns NaN: what could not be
 * finished comes back with its reason.
 * @example const result = await solve(problem, { now: () => performance.now(), shouldStop: () => false, report: () => {} });
 */
export async function solve(problem: Problem, control: Control): Promise<Result> {
	const start = control.now();
	const common = () =>
		({
			format: FORMAT,
			quantity: problem.quantity,
			seconds: (control.now() - start) / 1000,
			seed: problem.seed,
			solver: SOLVER,
			problem
		}) as const;
	const unfinished = (status: UnfinishedResult['status'], reason: string): Result => ({
		...common(),
		status,
		reason,
		method: {}
	});
	try {
		const negated = turnsSigns(problem);
		const g = functionalToMaximise(problem);
		const outcome = await dispatch(problem, g, negated ? withSignsTurned(control) : control);
		const numbers = [outcome.lower, outcome.upper, outcome.value, outcome.optimum];
		if (numbers.some((x) => x !== null && !Number.isFinite(x)))
			return unfinished('failed', 'the solver met a number that is not finite');
		return { ...common(), status: 'done', ...(negated ? turnSigns(outcome) : outcome) };
	} catch (error) {
		if (error instanceof SolverStop) return unfinished(error.status, error.message);
		const what = error instanceof Error ? error.message : String(error);
		return unfinished('failed', `the solver ended unexpectedly: ${what}`);
	}
}

/**
 * The semidefinite programme behind an NPA bound in the SDPA sparse format, to solve it elsewhere.
 * @throws SolverStop for another quantity, or past the limits of the relaxation
 */
export function sdpaText(problem: Problem): string {
	if (problem.quantity !== 'npa')
		throw new SolverStop('failed', `"${problem.quantity}" is no single semidefinite programme`);
	return momentProblemSdpa(problem);
}

async function dispatch(problem: Problem, g: Functional, control: Control): Promise<Outcome> {
	switch (problem.quantity) {
		case 'value':
			return boxValue(problem, g);
		case 'local':
			return problem.constraints.length > 0
				? constrainedLocalMaximum(problem, g, control)
				: localMaximum(problem, g, control);
		case 'no-signalling':
			return noSignallingMaximum(problem, g, control);
		case 'hybrid':
			return hybridMaximum(problem, g, control);
		case 'facet':
			return facetTest(problem, g, control);
		case 'npa':
			return npaBound(problem, g, control);
		case 'see-saw':
			return seeSaw(problem, g, control);
		case 'quantum':
			return quantumMaximum(problem, g, control);
	}
}

type Sides = Pick<DoneResult, 'lower' | 'upper' | 'value' | 'optimum' | 'guaranteed' | 'exact'>;

/** From g to f = -g: the sides change places and signs. */
function turnSigns<T extends Sides>(outcome: T): T {
	return {
		...outcome,
		lower: negated(outcome.upper),
		upper: negated(outcome.lower),
		value: negated(outcome.value),
		optimum: negated(outcome.optimum),
		guaranteed: { lower: outcome.guaranteed.upper, upper: outcome.guaranteed.lower },
		exact: negatedExact(outcome.exact)
	};
}

function negated(value: number | null): number | null {
	return value === null ? null : 0 - value; // 0 - 0 is 0, not -0
}

function negatedExact(exact: string | null): string | null {
	const value = exact === null ? null : parseRational(exact);
	return value ? printRational(value.neg()) : null;
}

function withSignsTurned(control: Control): Control {
	return {
		now: () => control.now(),
		shouldStop: () => control.shouldStop(),
		report: (progress) =>
			control.report({
				...progress,
				lower: negated(progress.upper),
				upper: negated(progress.lower)
			})
	};
}

import { SolverStop, type Control, type ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import { chooseReduction } from './choose-reduction';
import { MomentBoundSearch, refuseWhenCancelled, type Route } from './moment-bound-search';
import { makeMomentProblem } from './moment-problem';
import type { Outcome } from './outcome';
import { levelOneRoute } from './level-one-route';
import { plainRoute } from './plain-route';
import { reducedRoute } from './reduced-route';
import { preparedRelaxation, type PreparedRelaxation } from './relaxation-cache';

/**
 * Optimum of the moment-matrix relaxation for the functional g, from both sides.
 * Guarantee: `upper` is proved from the dual multiplier, `lower` is g at moments proved feasible
 * (a bound on this relaxation only); both rounded outward. `optimum` is the solver's own.
 * The route that is predicted to be fastest proposes, the proofs are about the problem as it stands:
 * symmetries of g (then `method.symmetry` is the order of the group used and `method.blocks` the
 * sizes of the blocks), at level 1 with two-outcome inputs the dual in n variables, or the plain
 * relaxation, which also steps in where another route fails. Rational problems of moderate size get
 * an exact certificate.
 * Cost: plain, about n^4 + m^3/6 operations an iteration, n rows and m moments; 8 to 20 iterations.
 * What was prepared is kept for the next solve of the same problem.
 * @throws SolverStop `limit` past the size limits or where the budget allows no bound, `failed` for
 *   a level that lacks a moment, `cancelled` when told to stop. When the budget runs out the bounds proved so far are returned.
 * Source: Navascues, Pironio, Acin, Phys. Rev. Lett. 98, 010401 (2007).
 */
export function npaBound(problem: ProblemOf<'npa'>, g: Functional, control: Control): Outcome {
	const started = control.now();
	const prepared = preparedRelaxation(problem, () => prepare(problem, g, control));
	const relaxation = prepared.problem;
	const search = new MomentBoundSearch(relaxation, control, started + 1000 * problem.seconds);
	let route = firstRoute(prepared);
	let run = search.run(route);
	if (run.ending !== 'budget' && !search.isClose && !route.isPlain) {
		route = plainRoute(relaxation);
		run = search.run(route);
	}
	const { matrix, programme } = relaxation;
	if (!Number.isFinite(search.upper) && run.ending === 'budget')
		throw new SolverStop('limit', `no bound was proved within ${problem.seconds} s`);
	if (!Number.isFinite(search.upper))
		throw new SolverStop('failed', 'the interior-point method found no bound');
	const exact = search.exactBound(problem, g);
	const upper = exact?.upper ?? search.upper;
	return {
		lower: search.lower,
		upper,
		value: null,
		tolerance: null,
		optimum: search.clippedOptimum(upper),
		guaranteed: { lower: search.lower !== null, upper: true },
		exact: null,
		method: {
			level: problem.level,
			nonNegative: problem.nonNegative,
			size: matrix.size,
			moments: programme.unknowns,
			rows: programme.rows.length,
			...route.method,
			iterations: run.iterations,
			residual: search.residual,
			ending: run.ending,
			...(run.ending === 'budget' && {
				note: `stopped after ${problem.seconds} s; the bounds are those proved by then`
			}),
			...(programme.equalities.length > 0 && {
				equalities:
					'an equality leaves no moments that are exactly feasible in doubles: no lower side'
			})
		},
		certificate: exact?.certificate ?? search.certificate()
	};
}

function prepare(problem: ProblemOf<'npa'>, g: Functional, control: Control): PreparedRelaxation {
	const poll = () => refuseWhenCancelled(control);
	const relaxation = makeMomentProblem(problem, g, poll);
	return { problem: relaxation, reduction: chooseReduction(problem, g, relaxation, poll) };
}

function firstRoute({ problem, reduction }: PreparedRelaxation): Route {
	if (reduction) return reducedRoute(reduction);
	return levelOneRoute(problem) ?? plainRoute(problem);
}

import { MomentCone } from '../optimization/moment-cone';
import { SemidefiniteSolver } from '../optimization/semidefinite-solver';
import type { Route } from './moment-bound-search';
import { refuseManyMoments } from './moment-matrix';
import type { MomentProblem } from './moment-problem';

/** The solver's own end, where rounding keeps the guaranteed gap from closing. */
export const SOLVER_TOLERANCE = 1e-11;
export const MOST_ITERATIONS = 80;

/**
 * The relaxation as it stands. @throws SolverStop `limit` when it has too many moments.
 */
export function plainRoute(problem: MomentProblem): Route {
	const { matrix, programme } = problem;
	refuseManyMoments(matrix.level, programme.unknowns);
	return {
		method: {},
		isPlain: true,
		run: (scaled, _scale, hooks) =>
			new SemidefiniteSolver(new MomentCone(scaled), problem.start, hooks).run({
				tolerance: SOLVER_TOLERANCE,
				mostIterations: MOST_ITERATIONS
			})
	};
}

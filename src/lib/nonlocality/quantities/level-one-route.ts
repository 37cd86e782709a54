import { LevelOneDual } from '../optimization/level-one-dual';
import type { Route } from './moment-bound-search';
import type { MomentProblem } from './moment-problem';
import { MOST_ITERATIONS, SOLVER_TOLERANCE } from './plain-route';

/** Level 1 with two-outcome inputs by its dual in n variables; null for any other relaxation. */
export function levelOneRoute({ programme }: MomentProblem): Route | null {
	if (!LevelOneDual.suits(programme)) return null;
	return {
		method: { form: 'dual in one variable per observable' },
		run: (scaled, _scale, hooks) =>
			new LevelOneDual(scaled, hooks).run({
				tolerance: SOLVER_TOLERANCE,
				mostIterations: MOST_ITERATIONS
			})
	};
}

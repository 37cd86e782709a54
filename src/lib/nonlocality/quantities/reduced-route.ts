import { BlockCone } from '../optimization/block-cone';
import type { Iterate } from '../optimization/interior-point-loop';
import {
	addInnerProducts,
	addRows,
	countCells,
	subtractAverages,
	type MomentProgramme
} from '../optimization/moment-programme';
import { SemidefiniteSolver } from '../optimization/semidefinite-solver';
import type { Route } from './moment-bound-search';
import { MOST_ITERATIONS, SOLVER_TOLERANCE } from './plain-route';
import type { SymmetryReduction } from './symmetry-reduction';

/** Relative gap and residual of the reduced programme from which an iterate is worth its proof ... */
const WORTH_A_PROOF = 2e-9;
/** ... or from here on, where they are not this much smaller than before. */
const NEARLY = 1e-6;
const WORTHWHILE = 0.8;

/** How many passed iterates are remembered. */
const MOST_PASSED = 5;

/** The relaxation on its invariant moments; iterates are lifted back where they are visited. */
export function reducedRoute(reduction: SymmetryReduction): Route {
	const { programme, order } = reduction;
	let lift: (() => Iterate) | null = null;
	return {
		method: {
			symmetry: order,
			blocks: programme.sizes.toSorted((a, b) => b - a),
			invariantMoments: programme.unknowns
		},
		run(scaled, scale, hooks) {
			const own = { ...programme, objective: programme.objective.map((c) => c / scale) };
			const start = new Float64Array(programme.unknowns + 1);
			start[0] = 1; // the maximally mixed state: every block is the unit matrix
			let best = Infinity;
			const passed: Iterate[] = [];
			function* earlier(): Iterable<Iterate> {
				for (const iterate of passed.toReversed()) yield lifted(scaled, reduction, iterate);
			}
			const solver = new SemidefiniteSolver(new BlockCone(own), start, {
				poll: hooks.poll,
				visit: (iterate) => {
					lift = () => lifted(scaled, reduction, iterate);
					const error =
						(Math.abs(iterate.dual - iterate.primal) + iterate.residual) /
						(1 + Math.abs(iterate.primal));
					const improves = error <= WORTHWHILE * best;
					best = Math.min(best, error);
					if (error > NEARLY || (error > WORTH_A_PROOF && improves)) {
						passed.push(copied(iterate));
						if (passed.length > MOST_PASSED) passed.shift();
						hooks.pass(iterate.iteration);
						return false;
					}
					const visited = lift();
					lift = null;
					return hooks.visit(visited, earlier);
				}
			});
			const end = solver.run({ tolerance: SOLVER_TOLERANCE, mostIterations: MOST_ITERATIONS });
			if (lift) hooks.visit(lift(), earlier);
			return end;
		},
		unvisited: () => lift?.() ?? null
	};
}

function copied(iterate: Iterate): Iterate {
	return {
		...iterate,
		moments: iterate.moments.slice(),
		multiplier: iterate.multiplier.slice(),
		rowMultipliers: iterate.rowMultipliers.slice()
	};
}

/** The iterate of the original programme; its multiplier meets the linear equalities there. */
function lifted(
	programme: MomentProgramme,
	reduction: SymmetryReduction,
	iterate: Iterate
): Iterate {
	const multiplier = reduction.liftMultiplier(iterate.multiplier);
	const rowMultipliers = reduction.liftRowMultipliers(iterate.rowMultipliers);
	const residuals = programme.objective.slice();
	addInnerProducts(programme, multiplier, residuals);
	addRows(programme.rows, rowMultipliers, residuals);
	subtractAverages(programme, countCells(programme), residuals, multiplier);
	return {
		...iterate,
		multiplier,
		rowMultipliers,
		moments: reduction.liftMoments(iterate.moments)
	};
}

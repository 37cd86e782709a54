import { solve, type Control, type ProblemOf } from '../../src/lib/nonlocality';
import { forceKernels, type KernelKind } from '../../src/lib/nonlocality/linalg/kernels/kernels';
import { MomentBoundSearch } from '../../src/lib/nonlocality/quantities/moment-bound-search';
import { makeMomentProblem } from '../../src/lib/nonlocality/quantities/moment-problem';
import { plainRoute } from '../../src/lib/nonlocality/quantities/plain-route';
import { clearPreparedRelaxations } from '../../src/lib/nonlocality/quantities/relaxation-cache';
import { functionalToMaximise } from '../../src/lib/nonlocality/scenario/problem-functional';
import { inProcess, type Contender } from './measure';

export const benchControl: Control = {
	now: () => performance.now(),
	shouldStop: () => false,
	report: () => undefined
};

/** Guaranteed bounds of the relaxation as it stands: no symmetry, nothing kept from before. */
function plainBounds(problem: ProblemOf<'npa'>, kind: KernelKind): void {
	forceKernels(kind);
	const relaxation = makeMomentProblem(problem, functionalToMaximise(problem));
	const deadline = benchControl.now() + 1000 * problem.seconds;
	const search = new MomentBoundSearch(relaxation, benchControl, deadline);
	search.run(plainRoute(relaxation));
	forceKernels(null);
	if (!Number.isFinite(search.upper)) throw new Error('no bound was found');
}

async function solveOnce(problem: ProblemOf<'npa'>): Promise<void> {
	const result = await solve(problem, benchControl);
	if (result.status !== 'done') throw new Error(result.reason);
}

/** How we solve an npa problem; `solve` includes the certificate. */
export const OURS = {
	js: 'JS',
	wasm: 'WASM',
	cold: 'cold',
	warm: 'warm'
} as const;

export function ourContenders(problem: ProblemOf<'npa'>, long: boolean): Contender[] {
	return [
		...(long ? [] : [inProcess(OURS.js, () => plainBounds(problem, 'plain'))]),
		inProcess(OURS.wasm, () => plainBounds(problem, 'wasm')),
		inProcess(OURS.cold, () => {
			clearPreparedRelaxations();
			return solveOnce(problem);
		}),
		inProcess(OURS.warm, () => solveOnce(problem))
	];
}

import { controlOf, runTask, solveAndCheck, type PrintedProgramme } from '../../../worker/task';
import type { CanonicalPlace } from '../../nonlocality/scenario/canonical-place';
import type { CheckOutcome } from '../../nonlocality/certificates/types';
import type { SolverPool } from './pool';

/** The same solvers in this thread: for tests and the seed, where nothing else has to go on. */
export function createInProcessPool(): SolverPool {
	return {
		threads: 1,
		async solve(problem, { signal, onProgress } = {}) {
			const stop = new Int32Array(1);
			const tell = () => Atomics.store(stop, 0, 1);
			if (signal?.aborted) tell();
			signal?.addEventListener('abort', tell);
			return solveAndCheck(
				problem,
				controlOf(stop, (progress) => onProgress?.(progress))
			);
		},
		verify: async (result) => (await runTask({ kind: 'verify', result })) as CheckOutcome,
		sdpa: async (problem) => (await runTask({ kind: 'sdpa', problem })) as PrintedProgramme,
		place: async (functional) => (await runTask({ kind: 'place', functional })) as CanonicalPlace,
		close: async () => undefined
	};
}

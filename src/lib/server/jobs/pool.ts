import { statSync } from 'node:fs';
import { cpus, totalmem } from 'node:os';
import { pathToFileURL } from 'node:url';
import { MessageChannel } from 'node:worker_threads';
import { Piscina } from 'piscina';
import type { CheckOutcome } from '../../nonlocality/certificates/types';
import type { Problem, Progress, Result } from '../../nonlocality/problem';
import type { CanonicalPlace, PlacedFunctional } from '../../nonlocality/scenario/canonical-place';
import type { PrintedProgramme, SolvedTask, SolverTask } from '../../../worker/task';
import { findWorkerFile } from './worker-file';

export interface SolveOptions {
	/** Aborting stops the solver; a solver that does not stop loses its thread. */
	readonly signal?: AbortSignal;
	onProgress?(progress: Progress): void;
}

/** Where solvers run: threads in production, this very thread in unit tests. */
export interface SolverPool {
	/** How many problems it solves at the same time. */
	readonly threads: number;
	/** @throws SolverKilled when the thread had to be ended. */
	solve(problem: Problem, options?: SolveOptions): Promise<SolvedTask>;
	verify(result: Result): Promise<CheckOutcome>;
	sdpa(problem: Problem): Promise<PrintedProgramme>;
	/** Where a functional belongs, by its canonical form. */
	place(functional: PlacedFunctional): Promise<CanonicalPlace>;
	close(): Promise<void>;
}

const KILL_WORDS = {
	cancelled: 'cancelled',
	time: 'the solver did not keep its time limit',
	memory: 'the solver took more memory than this server has to give'
} as const;

/** The thread was ended from outside, so there is no result. */
export class SolverKilled extends Error {
	constructor(readonly why: keyof typeof KILL_WORDS) {
		super(KILL_WORDS[why]);
		this.name = 'SolverKilled';
	}
}

/** A told solver ends within 100 ms, a call into HiGHS does not: after this the thread is ended. */
export const STOP_GRACE_MS = 2_000;
/** A solver keeps its own budget; the check afterwards takes time too. Past this it is stuck. */
export const hardLimitMs = (problem: Problem) => problem.seconds * 2_000 + 30_000;
/** Checks and SDPA texts are short; one that is not is ended. */
const CHECK_LIMIT_MS = 60_000;
/** The canonical search bounds its own work to seconds, also on a busy machine. */
const PLACE_LIMIT_MS = 30_000;
const HEAP_LIMIT_MB = 2_048;
/** A thread's own limits do not count typed arrays, so the whole process is watched. */
const MEMORY_LIMIT = Math.max(1.5e9, totalmem() * 0.75);
const MEMORY_LOOK_MS = 500;

export const threadCount = () => Math.max(1, cpus().length - 1);

/**
 * Threads are made when there is first work for them, and made anew when their bundle has changed,
 * as it does while developing.
 */
function lazyThreads(maxThreads: number) {
	let made: { readonly pool: Piscina; readonly builtAt: number } | null = null;
	return {
		/** @throws Error when the threads' bundle has not been built */
		get(): Piscina {
			const file = findWorkerFile('solver');
			if (!file) throw new Error('The solver threads are not built: run `npm run build` first.');
			const builtAt = statSync(file).mtimeMs;
			if (made && made.builtAt !== builtAt) {
				void made.pool.destroy();
				made = null;
			}
			made ??= {
				builtAt,
				pool: new Piscina({
					filename: pathToFileURL(file).href,
					minThreads: 0,
					maxThreads,
					idleTimeout: 60_000,
					concurrentTasksPerWorker: 1,
					resourceLimits: { maxOldGenerationSizeMb: HEAP_LIMIT_MB }
				})
			};
			return made.pool;
		},
		async close(): Promise<void> {
			await made?.pool.destroy();
			made = null;
		}
	};
}

export function createThreadPool(threads = threadCount()): SolverPool {
	// One more thread than solvers, so that a re-check never waits for a long computation.
	const pool = lazyThreads(threads + 1);
	// A form waits for its answer while it is typed: neither behind solvers nor behind checks.
	const places = lazyThreads(1);

	async function short<T>(task: SolverTask): Promise<T> {
		return pool.get().run(task, { signal: AbortSignal.timeout(CHECK_LIMIT_MS) });
	}

	return {
		threads,
		verify: (result) => short<CheckOutcome>({ kind: 'verify', result }),
		sdpa: (problem) => short<PrintedProgramme>({ kind: 'sdpa', problem }),
		async place(functional) {
			const task: SolverTask = { kind: 'place', functional };
			return places.get().run(task, { signal: AbortSignal.timeout(PLACE_LIMIT_MS) });
		},
		async close() {
			await Promise.all([pool.close(), places.close()]);
		},
		async solve(problem, { signal, onProgress } = {}) {
			const stop = new Int32Array(new SharedArrayBuffer(4));
			const { port1, port2 } = new MessageChannel();
			port1.on('message', (progress: Progress) => onProgress?.(progress));
			const kill = new AbortController();
			let why: SolverKilled['why'] = 'cancelled';
			let grace: NodeJS.Timeout | undefined;
			const tell = () => {
				Atomics.store(stop, 0, 1);
				grace ??= setTimeout(() => kill.abort(), STOP_GRACE_MS);
			};
			const limit = setTimeout(() => {
				why = 'time';
				tell();
			}, hardLimitMs(problem));
			const memory = setInterval(() => {
				if (process.memoryUsage.rss() < MEMORY_LIMIT) return;
				why = 'memory';
				kill.abort();
			}, MEMORY_LOOK_MS);
			if (signal?.aborted) tell();
			signal?.addEventListener('abort', tell);
			const task: SolverTask = { kind: 'solve', problem, stop, port: port2 };
			try {
				return await pool.get().run(task, { transferList: [port2], signal: kill.signal });
			} catch (error) {
				if (kill.signal.aborted) throw new SolverKilled(why);
				throw error;
			} finally {
				clearTimeout(limit);
				clearTimeout(grace);
				clearInterval(memory);
				signal?.removeEventListener('abort', tell);
				port1.close();
			}
		}
	};
}

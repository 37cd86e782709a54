import type { Logger } from 'pino';
import type { Progress } from '../../nonlocality/problem';
import type { Database } from '../db/client';
import { deriveTouchedClaims } from '../services/claims/derive-claim';
import { finishRun, type RunOutcome } from './finish-run';
import { HEARTBEAT_MS, extendLease, giveBack, takeNext, type Lease } from './lease';
import { SolverKilled, type SolverPool } from './pool';

export type JobLog = Pick<Logger, 'info' | 'warn' | 'error'>;

export interface RunnerOptions {
	readonly db: Database;
	readonly pool: SolverPool;
	readonly log: JobLog;
	now(): Date;
	/** How often it looks for work that nobody announced. */
	readonly pollMs?: number;
}

export interface Runner {
	/** Work was queued: look now. */
	wake(): void;
	/** Stops the run of that recomputation, if it runs here. */
	cancel(id: string): void;
	/** Resolves when nothing is queued or running. */
	idle(): Promise<void>;
	/** Takes no more, puts what runs back into the queue. */
	stop(): Promise<void>;
}

interface Running {
	readonly lease: Lease;
	readonly abort: AbortController;
	progress: Progress | null;
	done: Promise<void>;
}

const POLL_MS = 2_000;
/** Progress reaches the database at most this often. */
const PROGRESS_MS = 1_000;

export function startRunner(options: RunnerOptions): Runner {
	const { db, pool, log, now } = options;
	const running = new Map<string, Running>();
	const served = new Map<string, number>();
	let stopping = false;
	let looking: Promise<void> | null = null;
	let again = false;

	async function fill(): Promise<void> {
		do {
			again = false;
			while (!stopping && running.size < pool.threads) {
				const lease = await takeNext(db, now(), served, (tx, id) =>
					deriveTouchedClaims(tx, id, now(), { ownOnly: true })
				);
				if (!lease) break;
				start(lease);
			}
		} while (again && !stopping);
	}

	function wake(): void {
		if (looking) {
			again = true;
			return;
		}
		looking = fill()
			.catch((error: unknown) => log.error({ err: error }, 'taking work failed'))
			.finally(() => {
				looking = null;
			});
	}

	function start(lease: Lease): void {
		const run: Running = {
			lease,
			abort: new AbortController(),
			progress: null,
			done: Promise.resolve()
		};
		running.set(lease.id, run);
		run.done = work(run)
			.catch((error: unknown) => log.error({ err: error, recomputation: lease.id }, 'run lost'))
			.finally(() => {
				running.delete(lease.id);
				wake();
			});
	}

	async function work(run: Running): Promise<void> {
		const { lease } = run;
		let written: Progress | null = null;
		let beat = performance.now();
		const timer = setInterval(() => {
			const progress = run.progress === written ? null : run.progress;
			if (!progress && performance.now() - beat < HEARTBEAT_MS) return;
			beat = performance.now();
			written = run.progress;
			extendLease(db, lease, now(), progress)
				.then((held) => {
					if (!held) run.abort.abort(); // cancelled, or taken away
				})
				.catch((error: unknown) => log.warn({ err: error }, 'progress was not stored'));
		}, PROGRESS_MS);
		let outcome: RunOutcome;
		try {
			const { result, check } = await pool.solve(lease.problem, {
				signal: run.abort.signal,
				onProgress: (progress) => (run.progress = progress)
			});
			outcome = { kind: 'solved', result, check };
		} catch (error) {
			outcome = failureOf(error);
		} finally {
			clearInterval(timer);
		}
		const cut =
			outcome.kind === 'cancelled' ||
			(outcome.kind === 'solved' && outcome.result.status === 'cancelled');
		if (stopping && (cut || outcome.kind === 'crashed')) return giveBack(db, lease);
		await finishRun({ db, log, lease, outcome, now: now() });
	}

	const poll = setInterval(wake, options.pollMs ?? POLL_MS);
	wake();

	return {
		wake,
		cancel: (id) => running.get(id)?.abort.abort(),
		async idle() {
			for (;;) {
				wake();
				while (looking) await looking;
				if (running.size === 0) return;
				await Promise.all([...running.values()].map(({ done }) => done));
			}
		},
		async stop() {
			stopping = true;
			clearInterval(poll);
			if (looking) await looking;
			for (const { abort } of running.values()) abort.abort();
			await Promise.all([...running.values()].map(({ done }) => done));
		}
	};
}

function failureOf(error: unknown): RunOutcome {
	if (error instanceof SolverKilled) {
		return error.why === 'cancelled'
			? { kind: 'cancelled' }
			: { kind: 'failed', reason: error.message };
	}
	const what = error instanceof Error ? error.message : String(error);
	const memory = /out of memory|ERR_WORKER_OUT_OF_MEMORY|heap/i.test(
		`${what} ${String(Reflect.get(Object(error), 'code'))}`
	);
	return {
		kind: 'crashed',
		reason: memory ? 'the solver ran out of memory' : 'the solver thread ended unexpectedly'
	};
}

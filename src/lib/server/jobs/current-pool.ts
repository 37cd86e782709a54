import { ServiceError } from '../errors';
import { createThreadPool, type SolverPool } from './pool';

/** On globalThis, because the development server evaluates this module anew after a change. */
const holder: { merestonePool?: SolverPool | undefined } = globalThis as never;

/** The pool of this process; threads start when there is work for them. */
export async function solverPool(): Promise<SolverPool> {
	holder.merestonePool ??= createThreadPool();
	return holder.merestonePool;
}

/** Checks and texts that visitors ask for, waiting or running; more are turned away. */
const MOST_SHORT_TASKS = 12;
const RETRY_AFTER_SECONDS = 10;
let shortTasks = 0;

/** @throws ServiceError rate-limited when too many are asked for at the same time */
export async function runShortTask<T>(work: (pool: SolverPool) => Promise<T>): Promise<T> {
	if (shortTasks >= MOST_SHORT_TASKS) {
		const message = 'Many checks are running just now; try again in a few seconds.';
		throw new ServiceError('rate-limited', message, [], RETRY_AFTER_SECONDS);
	}
	shortTasks++;
	try {
		return await work(await solverPool());
	} finally {
		shortTasks--;
	}
}

/** Tests and the seed bring their own; the application one with the configured threads. */
export function setSolverPool(pool: SolverPool): void {
	holder.merestonePool = pool;
}

export async function closeSolverPool(): Promise<void> {
	const pool = holder.merestonePool;
	holder.merestonePool = undefined;
	await pool?.close();
}

import { createThreadPool, type SolverPool } from './pool';

/** On globalThis, because the development server evaluates this module anew after a change. */
const holder: { merestonePool?: SolverPool | undefined } = globalThis as never;

/** The pool of this process; threads start when there is work for them. */
export async function solverPool(): Promise<SolverPool> {
	holder.merestonePool ??= createThreadPool();
	return holder.merestonePool;
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

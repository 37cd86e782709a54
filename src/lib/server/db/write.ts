import { AsyncLocalStorage } from 'node:async_hooks';

/** Waits between tries while another process holds the file: about 6 s in all, then it gives up. */
const RETRY_DELAYS_MS = [5, 10, 20, 40, 80, 160, 320, 640, 1_000, 1_000, 1_000, 2_000] as const;

interface Turn {
	active: boolean;
}

const sleep = (ms: number) => new Promise((resolve) => setTimeout(resolve, ms));

/** True when the error, or one it was caused by, says that another connection holds the lock. */
export function isBusy(error: unknown): boolean {
	return hasCode(error, (code) => code === 'SQLITE_BUSY' || code.startsWith('SQLITE_BUSY_'));
}

/** True when the error, or one it was caused by, says that a unique index refused a row. */
export function isUniqueViolation(error: unknown): boolean {
	return hasCode(
		error,
		(code) => code === 'SQLITE_CONSTRAINT_UNIQUE' || code === 'SQLITE_CONSTRAINT_PRIMARYKEY'
	);
}

/** Drizzle wraps the driver's error; the code stands on a cause, as `code` or `extendedCode`. */
function hasCode(error: unknown, matches: (code: string) => boolean): boolean {
	for (let cause = error, depth = 0; cause instanceof Error && depth < 5; depth++) {
		for (const name of ['extendedCode', 'code'] as const) {
			const code: unknown = Reflect.get(cause, name);
			if (typeof code === 'string' && matches(code)) return true;
		}
		cause = cause.cause;
	}
	return false;
}

/**
 * One queue for every write of the process. After a statement failed with SQLITE_BUSY, libSQL's
 * local connection reports later writes as done without committing them, until it is reopened
 * (libsql-client-ts issue 352; write.test.ts reproduces it). So writes never overlap inside the
 * process, and when another process holds the lock the connection is dropped before the next try.
 */
export function createWriteQueue(
	reconnect: () => Promise<void> | void,
	delays: readonly number[] = RETRY_DELAYS_MS
) {
	const turns = new AsyncLocalStorage<Turn>();
	let last: Promise<unknown> = Promise.resolve();

	async function attempt<T>(work: () => Promise<T>): Promise<T> {
		for (const delay of delays) {
			try {
				return await work();
			} catch (error) {
				if (!isBusy(error)) throw error;
				await reconnect();
				await sleep(delay);
			}
		}
		try {
			return await work();
		} catch (error) {
			if (isBusy(error)) await reconnect();
			throw error;
		}
	}

	/** @throws when called from inside another write: it would wait for itself for ever. */
	return async function enqueue<T>(work: () => Promise<T>): Promise<T> {
		if (turns.getStore()?.active) {
			throw new Error('A write was started inside a write: hand `tx` on instead.');
		}
		const turn: Turn = { active: true };
		const mine = last.then(async () => {
			try {
				return await turns.run(turn, () => attempt(work));
			} finally {
				turn.active = false;
			}
		});
		last = mine.catch(() => undefined);
		return mine;
	};
}

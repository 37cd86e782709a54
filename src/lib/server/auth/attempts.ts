import { config } from '../config';
import { rateLimit, refuse } from '../rate-limit';

/** Wrong passwords for one account before the waits begin; NIST SP 800-63B-4 allows 100. */
const FREE_FAILURES = 10;
const FIRST_WAIT_SECONDS = 30;
const LONGEST_WAIT_SECONDS = 3_600;

/** Accounts remembered at most; beyond it the oldest are forgotten. */
const REMEMBERED = 10_000;

interface Failures {
	count: number;
	waitUntil: number;
}

const failures = new Map<string, Failures>();
const signIns = rateLimit('signIn', 20, 60, 'tries');
const signUps = rateLimit('signUp', 10, 3_600, 'tries');

/** @throws ServiceError rate-limited */
export async function countSignUp(address: string): Promise<void> {
	await signUps.count(address);
}

/**
 * Counts a try before the password is checked, without a pause in between, so that many at once
 * gain nothing; a right password takes the count back. Waits grow from half a minute to an hour
 * and never lock for good.
 * @param address of the caller; null where there is none to limit, as in the seed
 * @throws ServiceError rate-limited
 */
export async function countSignIn(address: string | null, account: string): Promise<void> {
	if (address !== null) await signIns.count(address);
	const now = Date.now();
	const { count, waitUntil } = failures.get(account) ?? { count: 0, waitUntil: 0 };
	if (waitUntil > now) refuse('account', account, waitUntil - now);
	const over = count + 1 - Math.ceil(FREE_FAILURES * config().rateFactor);
	const wait = over < 0 ? 0 : Math.min(FIRST_WAIT_SECONDS * 2 ** over, LONGEST_WAIT_SECONDS);
	failures.delete(account);
	failures.set(account, { count: count + 1, waitUntil: now + wait * 1000 });
	for (const oldest of failures.keys()) {
		if (failures.size <= REMEMBERED) break;
		failures.delete(oldest);
	}
}

export function forgetFailures(account: string): void {
	failures.delete(account);
}

/** For tests of the limits themselves. */
export function resetAttempts(): void {
	signIns.reset();
	signUps.reset();
	failures.clear();
}

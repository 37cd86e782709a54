import { RateLimiterMemory, RateLimiterRes } from 'rate-limiter-flexible';
import { config } from './config';
import { ServiceError } from './errors';
import { pseudonym, securityEvent } from './log';

export interface RateLimit {
	/** Counts one more (or so many) of that key. @throws ServiceError rate-limited */
	count(key: string, times?: number): Promise<void>;
	/** Forgets what was counted, for tests. */
	reset(): void;
}

/**
 * So many in so many seconds for each key, times the configured factor.
 * @param kind for the log
 * @param what there were too many of: `tries`
 */
export function rateLimit(kind: string, points: number, duration: number, what: string): RateLimit {
	let limiter: RateLimiterMemory | undefined;
	return {
		async count(key, times = 1) {
			limiter ??= new RateLimiterMemory({
				points: Math.ceil(points * config().rateFactor),
				duration
			});
			try {
				await limiter.consume(key, times);
			} catch (refused) {
				if (!(refused instanceof RateLimiterRes)) throw refused;
				refuse(kind, key, refused.msBeforeNext, what);
			}
		},
		reset() {
			limiter = undefined;
		}
	};
}

/** @throws ServiceError rate-limited, that says when another try makes sense */
export function refuse(kind: string, key: string, milliseconds: number, what = 'tries'): never {
	const seconds = Math.max(1, Math.ceil(milliseconds / 1000));
	securityEvent('rate-limited', { kind, key: pseudonym(key), seconds });
	const wait = seconds < 90 ? `${seconds} seconds` : `${Math.ceil(seconds / 60)} minutes`;
	throw new ServiceError('rate-limited', `Too many ${what}. Try again in ${wait}.`, [], seconds);
}

import { createHmac } from 'node:crypto';
import { pino, type Logger } from 'pino';
import { config } from './config';

let logger: Logger | undefined;

/** JSON lines on standard output, times in UTC; pino escapes line breaks in values. */
export function log(): Logger {
	logger ??= pino({
		level: config().logLevel,
		base: null,
		timestamp: pino.stdTimeFunctions.isoTime,
		redact: ['password', 'token', 'cookie', 'authorization', '*.password', '*.token']
	});
	return logger;
}

/** The same short word for the same address, so that failures can be told apart without it. */
export function pseudonym(value: string): string {
	return createHmac('sha256', config().secret).update(value).digest('base64url').slice(0, 12);
}

/** What an operator must be able to find again: who tried what, and whether it was let through. */
export function securityEvent(
	event:
		| 'sign-in'
		| 'sign-in-failed'
		| 'sign-up'
		| 'sign-out'
		| 'denied'
		| 'rate-limited'
		| 'cross-site'
		| 'honeypot',
	details: Readonly<Record<string, string | number | null>>
): void {
	log().info({ security: event, ...details });
}

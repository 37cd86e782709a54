import { createHmac, timingSafeEqual } from 'node:crypto';
import { config } from './config';

/**
 * A secret that an id and MERESTONE_SECRET give back at any time: a mail rendered hours after the
 * change, or a second showing of a calendar's address, needs no token kept in the database.
 * 256 bits of HMAC-SHA256 (RFC 2104) in base64url; who knows one learns nothing of another.
 * @param purpose keeps tokens of different uses apart: `invitation`, `unsubscribe`, `calendar`
 */
export function derivedToken(purpose: string, id: string): string {
	return createHmac('sha256', config().secret).update(`${purpose}:${id}`).digest('base64url');
}

/** Whether a token is that id's, in a time that does not tell how far it matches. */
export function isDerivedToken(purpose: string, id: string, token: string): boolean {
	const expected = Buffer.from(derivedToken(purpose, id));
	const given = Buffer.from(token);
	return given.length === expected.length && timingSafeEqual(given, expected);
}

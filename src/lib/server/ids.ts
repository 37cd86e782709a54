import { createHash, randomBytes } from 'node:crypto';

/**
 * A UUID of version 7 (RFC 9562): milliseconds since 1970, then a 12-bit counter so that ids of
 * one millisecond keep their order, then 62 random bits. An id is no secret.
 */
export function newId(now = Date.now()): string {
	if (now > latest) {
		latest = now;
		counter = randomBytes(2).readUInt16BE() & 0x7ff;
	} else if (++counter > 0xfff) {
		// The counter ran out: borrow the next millisecond.
		latest++;
		counter = 0;
	}
	const bytes = randomBytes(16);
	bytes.writeUIntBE(latest, 0, 6);
	bytes.writeUInt16BE(0x7000 | counter, 6);
	bytes.writeUInt8((bytes.readUInt8(8) & 0x3f) | 0x80, 8);
	const hex = bytes.toString('hex');
	return [
		hex.slice(0, 8),
		hex.slice(8, 12),
		hex.slice(12, 16),
		hex.slice(16, 20),
		hex.slice(20)
	].join('-');
}

let latest = 0;
let counter = 0;

/** 160 random bits, safe in an address. */
export function newToken(): string {
	return randomBytes(20).toString('base64url');
}

/** What the database keeps of a token. */
export function hashToken(token: string): string {
	return createHash('sha256').update(token).digest('hex');
}

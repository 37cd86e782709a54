import { createHash } from 'node:crypto';
import { describe, expect, it, vi } from 'vitest';
import { derivedToken, isDerivedToken } from './derived-token';

const secret = 'Jefe-and-thirty-one-more-letters';
vi.mock('./config', () => ({ config: () => ({ secret }) }));

/** HMAC as RFC 2104 section 2 defines it, from SHA-256 alone; its blocks have 64 bytes. */
function hmacByDefinition(key: string, text: string): Buffer {
	const block = Buffer.alloc(64);
	block.write(key);
	const sha256 = (...parts: (Uint8Array | string)[]) => {
		const hash = createHash('sha256');
		for (const part of parts) hash.update(part);
		return hash.digest();
	};
	const inner = sha256(
		block.map((byte) => byte ^ 0x36),
		text
	);
	return sha256(
		block.map((byte) => byte ^ 0x5c),
		inner
	);
}

describe('derivedToken', () => {
	it('is the HMAC of purpose and id', () => {
		// From: printf 'invitation:0192' | openssl dgst -sha256 -hmac "$secret" -binary | basenc --base64url
		expect(derivedToken('invitation', '0192')).toBe('0-I6tQmbx9kdR0RSCEXdFKzZ4jP3SaWs785Aat3I5zA');
		// RFC 4231, test case 2, holds the definition itself to a published value.
		expect(hmacByDefinition('Jefe', 'what do ya want for nothing?').toString('hex')).toBe(
			'5bdcc146bf60754e6a042426089575c75a003f089d2739839dec58b964ec3843'
		);
		expect(derivedToken('calendar', '7')).toBe(
			hmacByDefinition(secret, 'calendar:7').toString('base64url')
		);
	});

	it('differs by purpose and by id', () => {
		const tokens = [
			derivedToken('invitation', '1'),
			derivedToken('invitation', '2'),
			derivedToken('unsubscribe', '1')
		];
		expect(new Set(tokens).size).toBe(3);
	});
});

describe('isDerivedToken', () => {
	it('accepts that token and no other', () => {
		const token = derivedToken('invitation', '1');
		expect(isDerivedToken('invitation', '1', token)).toBe(true);
		expect(isDerivedToken('invitation', '2', token)).toBe(false);
		expect(isDerivedToken('calendar', '1', token)).toBe(false);
		expect(isDerivedToken('invitation', '1', token.slice(0, -1))).toBe(false);
		expect(isDerivedToken('invitation', '1', '')).toBe(false);
		// Longer in bytes than in characters.
		expect(isDerivedToken('invitation', '1', `${token.slice(0, -1)}é`)).toBe(false);
	});
});

import fc from 'fast-check';
import { expect, it } from 'vitest';
import { sha256 } from './sha256';

it('agrees with the examples of FIPS 180-2, appendix B', () => {
	expect(sha256('abc')).toBe('ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad');
	expect(sha256('abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq')).toBe(
		'248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1'
	);
});

it('agrees with the platform on any text', async () => {
	const text = fc.string({ unit: 'binary', maxLength: 300 });
	await fc.assert(
		fc.asyncProperty(text, async (message) => {
			const bytes = new TextEncoder().encode(message);
			const digest = new Uint8Array(await crypto.subtle.digest('SHA-256', bytes));
			const hex = [...digest].map((byte) => byte.toString(16).padStart(2, '0')).join('');
			expect(sha256(message)).toBe(hex);
		})
	);
});

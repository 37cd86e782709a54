import { describe, expect, it } from 'vitest';
import { hashPassword, needsRehash, verifyPassword } from './password';

describe('passwords', () => {
	it('verify against their own hash only', async () => {
		const stored = await hashPassword('seven boundary stones');
		expect(stored).toMatch(/^\$argon2id\$v=19\$m=19456,t=3,p=1\$/);
		expect(await verifyPassword(stored, 'seven boundary stones')).toBe(true);
		expect(await verifyPassword(stored, 'seven boundary stonez')).toBe(false);
		expect(await hashPassword('seven boundary stones')).not.toBe(stored);
	});

	it('are the same composed and decomposed, and are never cut', async () => {
		const stored = await hashPassword('caf\u00e9 '.repeat(20));
		expect(await verifyPassword(stored, 'cafe\u0301 '.repeat(20))).toBe(true);
		expect(await verifyPassword(stored, 'caf\u00e9 '.repeat(19))).toBe(false);
	});

	it('take as long for an address without an account', async () => {
		const stored = await hashPassword('seven boundary stones');
		const time = async (hash: string | null) => {
			const start = performance.now();
			expect(await verifyPassword(hash, 'another long password')).toBe(false);
			return performance.now() - start;
		};
		await time(null);
		const median = async (hash: string | null) => {
			const times: number[] = [];
			for (let i = 0; i < 9; i++) times.push(await time(hash));
			return times.sort((a, b) => a - b)[4] ?? 0;
		};
		const ratio = (await median(null)) / (await median(stored));
		// Wide, since other work shares the machine; without the dummy it would be below 0.01.
		expect(ratio).toBeGreaterThan(0.3);
		expect(ratio).toBeLessThan(3);
	});

	it('are hashed again when the parameters rose', async () => {
		expect(needsRehash(await hashPassword('seven boundary stones'))).toBe(false);
		expect(needsRehash('$argon2id$v=19$m=4096,t=3,p=1$c2FsdA$aGFzaA')).toBe(true);
		expect(needsRehash('$2b$10$abcdefghijklmnopqrstuv')).toBe(true);
	});
});

import { beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { countSignIn, countSignUp, forgetFailures, resetAttempts } from './attempts';

beforeAll(() => {
	process.env.MERESTONE_DEMO = '1';
	process.env.MERESTONE_LOG = 'silent';
});
beforeEach(() => resetAttempts());

const limited = { code: 'rate-limited' };
const place = (i: number) => `192.0.2.${i}`;

describe('attempts', () => {
	it('of one account wait after ten wrong passwords, from wherever they come', async () => {
		for (let i = 0; i < 10; i++) await countSignIn(place(i), 'wren@harrow.example');
		await expect(countSignIn(place(10), 'wren@harrow.example')).rejects.toMatchObject({
			...limited,
			retryAfterSeconds: 30
		});
		await expect(countSignIn(place(10), 'pia@harrow.example')).resolves.toBeUndefined();
	});

	it('counted at the same time do not slip through', async () => {
		const tries = await Promise.allSettled(
			Array.from({ length: 40 }, (_, i) => countSignIn(place(i), 'wren@harrow.example'))
		);
		expect(tries.filter(({ status }) => status === 'fulfilled').length).toBe(10);
	});

	it('wait longer each time, and start afresh after the right password', async () => {
		vi.useFakeTimers({ now: 0 });
		for (let i = 0; i < 10; i++) await countSignIn(place(i), 'wren@harrow.example');
		vi.advanceTimersByTime(31_000);
		await countSignIn(place(11), 'wren@harrow.example');
		await expect(countSignIn(place(12), 'wren@harrow.example')).rejects.toMatchObject({
			retryAfterSeconds: 60
		});
		forgetFailures('wren@harrow.example');
		await expect(countSignIn(place(13), 'wren@harrow.example')).resolves.toBeUndefined();
		vi.useRealTimers();
	});

	it('from one address are limited by the minute, sign-ups by the hour', async () => {
		for (let i = 0; i < 20; i++) await countSignIn(place(1), `reader-${i}@harrow.example`);
		await expect(countSignIn(place(1), 'reader-20@harrow.example')).rejects.toMatchObject(limited);
		for (let i = 0; i < 10; i++) await countSignUp(place(2));
		await expect(countSignUp(place(2))).rejects.toMatchObject(limited);
	});
});

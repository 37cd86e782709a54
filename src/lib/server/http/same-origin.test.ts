import { describe, expect, it } from 'vitest';
import { mayChangeState } from './same-origin';

const url = new URL('https://merestone.example/g/new');
const given = { origin: 'https://merestone.example', originGiven: true };

const allowed = (method: string, headers: Record<string, string>, config = given) =>
	mayChangeState(new Request(url, { method, headers }), url, config);

describe('mayChangeState', () => {
	it.each(['POST', 'PUT', 'PATCH', 'DELETE'])('takes %s from this site only', (method) => {
		expect(allowed(method, { origin: 'https://merestone.example' })).toBe(true);
		expect(allowed(method, { 'sec-fetch-site': 'same-origin' })).toBe(true);
		expect(allowed(method, { origin: 'null', 'sec-fetch-site': 'same-origin' })).toBe(true);
		for (const headers of [
			{},
			{ origin: 'https://elsewhere.example' },
			{ origin: 'http://merestone.example' },
			{ origin: 'https://merestone.example.elsewhere.example' },
			{ origin: 'null' },
			{ 'sec-fetch-site': 'cross-site' },
			{ 'sec-fetch-site': 'same-site', origin: 'https://merestone.example' },
			{ 'sec-fetch-site': 'none' },
			{ origin: 'https://elsewhere.example', 'sec-fetch-site': 'same-origin' }
		]) {
			expect(allowed(method, headers as Record<string, string>), JSON.stringify(headers)).toBe(
				false
			);
		}
	});

	it.each(['text/plain', 'application/json', 'application/x-www-form-urlencoded'])(
		'does not care that the body is %s',
		(type) => {
			expect(allowed('POST', { 'content-type': type })).toBe(false);
		}
	);

	it('lets anyone read', () => {
		expect(allowed('GET', { origin: 'https://elsewhere.example' })).toBe(true);
		expect(allowed('HEAD', { 'sec-fetch-site': 'cross-site' })).toBe(true);
	});

	it('goes by the host asked for when no address was configured', () => {
		const guess = { origin: 'http://localhost:3000', originGiven: false };
		expect(allowed('POST', { origin: 'http://merestone.example' }, guess)).toBe(true);
		expect(allowed('POST', { origin: 'http://localhost:3000' }, guess)).toBe(true);
		expect(allowed('POST', { origin: 'http://elsewhere.example' }, guess)).toBe(false);
	});
});

import type { RequestEvent } from '@sveltejs/kit';
import { beforeAll, describe, expect, it } from 'vitest';
import { countRequest } from './request-limits';

beforeAll(() => {
	process.env.MERESTONE_DEMO = '1';
	process.env.MERESTONE_LOG = 'silent';
});

/** As much of a request as is counted: who sent it, and from where. */
function request(person: string | null, address = '192.0.2.1') {
	const headers: Record<string, string> = {};
	const actor = person === null ? null : { id: person };
	const event = {
		locals: { actor },
		getClientAddress: () => address,
		setHeaders: (set: Record<string, string>) => Object.assign(headers, set)
	} as unknown as RequestEvent;
	return { event, headers };
}

async function send(
	times: number,
	person: string | null,
	kind: Parameters<typeof countRequest>[1]
) {
	for (let i = 0; i < times; i++) await countRequest(request(person).event, kind);
}

describe('a limit on requests', () => {
	it.each([
		['reading', 'wren', 240, 60],
		['change', 'wren', 240, 3_600],
		['anonymous', null, 600, 3_600]
	] as const)(
		'%s: lets as many through as it says, then names the wait',
		async (kind, who, n, s) => {
			await send(n, who, kind);
			const { event, headers } = request(who);
			await expect(countRequest(event, kind)).rejects.toMatchObject({ status: 429 });
			const wait = Number(headers['Retry-After']);
			expect(wait).toBeGreaterThan(0);
			expect(wait).toBeLessThanOrEqual(s);
		}
	);

	it('counts as many as one request asks for', async () => {
		const invite = (times: number) => countRequest(request('ines').event, 'invitation', times);
		await invite(20);
		await invite(20);
		await invite(10);
		await expect(invite(1)).rejects.toMatchObject({ status: 429 });
	});

	it('is each person’s own, and each address’s', async () => {
		await send(1, 'pia', 'reading');
		await expect(
			countRequest(request(null, '192.0.2.2').event, 'anonymous')
		).resolves.toBeUndefined();
	});
});

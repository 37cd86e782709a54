import { render } from '@testing-library/svelte';
import { afterEach, beforeEach, expect, it, vi } from 'vitest';
import ReadOnOpening from './ReadOnOpening.svelte';

const { invalidate, replaceState, page } = vi.hoisted(() => ({
	invalidate: vi.fn(() => Promise.resolve()),
	replaceState: vi.fn(),
	page: { url: new URL('https://merestone.example/'), state: {} }
}));
vi.mock('$app/navigation', () => ({
	afterNavigate: (arrived: () => void) => arrived(),
	invalidate,
	replaceState
}));
vi.mock('$app/state', () => ({ page }));

const sent = vi.fn((_address: string, _request: { method: string; body: FormData }) =>
	Promise.resolve(new Response('{}'))
);
beforeEach(() => vi.stubGlobal('fetch', sent));
afterEach(() => {
	vi.unstubAllGlobals();
	vi.clearAllMocks();
});

const arrive = (path: string, signedIn = true) => {
	page.url = new URL(path, 'https://merestone.example');
	render(ReadOnOpening, { signedIn });
};

it('marks what a mail led to as read, and takes it out of the address', async () => {
	arrive('/g/a/tasks/4?news=n1#comment-c1');
	await vi.waitFor(() => expect(replaceState).toHaveBeenCalled());
	const [address, request] = sent.mock.calls[0] ?? [];
	expect([address, request?.method, request?.body.get('id')]).toEqual([
		'/news?/read',
		'POST',
		'n1'
	]);
	expect(invalidate).toHaveBeenCalledWith('merestone:news');
	expect(String(replaceState.mock.calls[0]?.[0])).toBe(
		'https://merestone.example/g/a/tasks/4#comment-c1'
	);
});

it.each([
	['no news', '/g/a/tasks/4', true],
	['nobody signed in', '/sign-in?news=n1', false]
])('sends nothing with %s', (_, path, signedIn) => {
	arrive(path, signedIn);
	expect(sent).not.toHaveBeenCalled();
});

it('leaves it unread, and the page as it is, when the server does not answer', async () => {
	sent.mockRejectedValueOnce(new TypeError('Failed to fetch'));
	arrive('/g/a/tasks/4?news=n1');
	await vi.waitFor(() => expect(sent).toHaveBeenCalled());
	expect(replaceState).not.toHaveBeenCalled();
});

import { fireEvent, waitFor, within } from '@testing-library/dom';
import { afterEach, beforeEach, expect, it, vi } from 'vitest';
import { invalidateAll } from '$app/navigation';
import { keepTyped, type KeepTyped } from './keep-typed';

vi.mock('$app/navigation', () => ({ invalidateAll: vi.fn(() => Promise.resolve()) }));

let answer: (response: Response) => void;
let sent: ReturnType<typeof vi.fn>;
beforeEach(() => {
	// Not laid out here, so there is nothing to scroll.
	Element.prototype.scrollIntoView = vi.fn();
	sent = vi.fn(() => new Promise<Response>((resolve) => (answer = resolve)));
	vi.stubGlobal('fetch', sent);
});
afterEach(() => {
	vi.unstubAllGlobals();
	vi.mocked(invalidateAll).mockClear();
	document.body.replaceChildren();
});

/** A form of another page: its answer is not this page's, which is not running here. */
function form(options?: KeepTyped) {
	document.body.innerHTML =
		'<form method="POST" action="/elsewhere?/return"><input name="reason" aria-label="Reason">' +
		'<div><button>Return it</button></div></form>';
	const element = document.querySelector('form');
	if (!element) throw new Error('no form');
	keepTyped(element, options);
	const find = within(element);
	const field = find.getByLabelText<HTMLInputElement>('Reason');
	field.value = 'The level is missing.';
	return { find, field, button: find.getByRole<HTMLButtonElement>('button') };
}

const refusal = (type: 'error' | 'failure', status: number, message: string) =>
	new Response(JSON.stringify(type === 'error' ? { type, error: { message } } : { type, status }), {
		status: type === 'error' ? status : 200
	});

it('keeps what was typed when signed out, and leads to signing in beside the button', async () => {
	const onanswer = vi.fn();
	const { find, field, button } = form({ onanswer });
	button.focus();
	await fireEvent.click(button);
	await waitFor(() => expect(sent).toHaveBeenCalledOnce());
	answer(refusal('error', 401, 'Sign in first.'));
	const alert = await find.findByRole('alert');
	expect(alert.textContent).toMatch(
		/You are signed out\. Sign in in another tab,\s+then press again/
	);
	const link = within(alert).getByRole('link');
	expect([link.getAttribute('href'), link.getAttribute('target')]).toEqual(['/sign-in', '_blank']);
	expect(field.value).toBe('The level is missing.');
	await waitFor(() => expect(button.disabled).toBe(false));
	expect(document.activeElement).toBe(button);
	expect(onanswer).toHaveBeenCalledWith(expect.objectContaining({ type: 'error', status: 401 }));

	// Pressed again once signed in: the sentence goes, and so does the form.
	await fireEvent.click(button);
	await waitFor(() => expect(find.queryByRole('alert')).toBeNull());
	await waitFor(() => expect(sent).toHaveBeenCalledTimes(2));
});

it('says so when the server is not reached or fails', async () => {
	const { find, button } = form();
	sent.mockRejectedValueOnce(new TypeError('Failed to fetch'));
	await fireEvent.click(button);
	expect((await find.findByRole('alert')).textContent).toContain('the server can’t be reached');
	await waitFor(() => expect(button.disabled).toBe(false));
	await fireEvent.click(button);
	await waitFor(() => expect(sent).toHaveBeenCalledTimes(2));
	answer(refusal('error', 500, 'Something went wrong on our side.'));
	await waitFor(() =>
		expect(find.getByRole('alert').textContent).toContain('Something went wrong on our side. What')
	);
});

it('sends once, however often it is pressed, and asks again only after the answer', async () => {
	const { find, button, field } = form({ reset: false });
	await fireEvent.click(button);
	await fireEvent.click(button);
	await fireEvent.submit(field);
	await waitFor(() => expect(sent).toHaveBeenCalled());
	expect(button.disabled).toBe(true);
	expect(sent).toHaveBeenCalledTimes(1);
	answer(refusal('failure', 400, ''));
	await waitFor(() => expect(button.disabled).toBe(false));
	expect(find.queryByRole('alert')).toBeNull();
	expect(invalidateAll).not.toHaveBeenCalled();
});

it('shows what stands after a conflict', async () => {
	const { button, field } = form();
	await fireEvent.click(button);
	await waitFor(() => expect(sent).toHaveBeenCalled());
	answer(refusal('failure', 409, ''));
	await waitFor(() => expect(invalidateAll).toHaveBeenCalledOnce());
	expect(field.value).toBe('The level is missing.');
});

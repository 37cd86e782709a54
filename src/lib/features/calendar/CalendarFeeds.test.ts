import { render, screen } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import CalendarFeeds from './CalendarFeeds.svelte';

const own = {
	id: 'f1',
	groupSlug: null,
	groupName: null,
	address: 'https://stones.example/calendar/abc.ics',
	createdAt: '2026-12-01T09:00:00.000Z'
};
const ofGroup = { ...own, id: 'f2', groupSlug: 'quarry', groupName: 'Quarry group', address: null };
const group = { slug: 'quarry', name: 'Quarry group' };
const fields = () =>
	Object.fromEntries(
		[...document.querySelectorAll('form input')].map((input) => [
			input.getAttribute('name'),
			input.getAttribute('value')
		])
	);
const action = () => document.querySelector('form')?.getAttribute('action');

describe('the calendar of a page', () => {
	it('is offered where there is none, and leads back to the page', () => {
		render(CalendarFeeds, { feeds: [own], group, back: '/g/quarry/tasks?state=all' });
		expect(screen.getByText(/due dates of all tasks of Quarry group/)).toBeTruthy();
		expect(screen.getByText(/without signing in/)).toBeTruthy();
		expect(screen.getByRole('button', { name: 'Make a calendar address' })).toBeTruthy();
		expect(action()).toBe('/home/tasks?/makeCalendar');
		expect(fields()).toEqual({ group: 'quarry', back: '/g/quarry/tasks?state=all' });
		expect(screen.queryByText(own.address)).toBeNull();
	});

	it('is shown to be copied, and revoked only after asking', () => {
		render(CalendarFeeds, { feeds: [ofGroup, own], back: '/home/tasks' });
		expect(screen.getByText(own.address)).toBeTruthy();
		expect(screen.getByText('Copy the address')).toBeTruthy();
		expect(screen.queryByText('Make a calendar address')).toBeNull();
		expect(action()).toBe('/home/tasks?/revokeCalendar');
		expect(fields()).toEqual({ id: 'f1', back: '/home/tasks' });
		const submit = screen.getByText('Revoke the address').closest('button');
		expect(submit?.getAttribute('type')).toBe('submit');
		expect(submit?.closest('details')?.open).toBe(false);
	});

	it('says why an address can’t be shown again', () => {
		render(CalendarFeeds, { feeds: [ofGroup], group, back: '/g/quarry/tasks' });
		expect(screen.getByText(/can’t be shown again/)).toBeTruthy();
		expect(screen.queryByText('Copy the address')).toBeNull();
	});
});

import { render, screen, within } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import SiteHeader from './SiteHeader.svelte';

const quarry = { slug: 'quarry', name: 'Quarry group' };
const person = { name: 'Ada Merrin', isAdmin: false };

function header(over: object = {}) {
	render(SiteHeader, {
		path: '/g/quarry',
		person,
		groups: [quarry],
		group: quarry,
		...over
	});
	return {
		main: within(screen.getByRole('navigation', { name: 'Main' })),
		/** The person's menu: its button's words and its links. */
		you: screen.getByText('You:').closest('details') as HTMLElement
	};
}

describe('the header inside a group', () => {
	it('leads to its pages and marks the one that is open', () => {
		const { main } = header({ path: '/g/quarry/tasks/4' });
		expect(main.getAllByRole('link').map((link) => link.textContent?.trim())).toEqual([
			'Ledger',
			'Inequalities',
			'References',
			'Tasks',
			'Activity',
			'Members'
		]);
		expect(main.getByRole('link', { current: 'page' })).toHaveProperty(
			'pathname',
			'/g/quarry/tasks'
		);
	});

	it.each([
		[3, 'Tasks, 3 wait for you'],
		[1, 'Tasks, 1 waits for you'],
		[200, 'Tasks, 200 wait for you']
	])('says that %s tasks wait for the viewer', (waiting, words) => {
		const { main } = header({ group: { ...quarry, waiting } });
		expect(main.getByRole('link', { name: words })).toBeTruthy();
	});

	it('says nothing of tasks where none waits', () => {
		const { main } = header({ group: { ...quarry, waiting: 0 } });
		expect(main.getByRole('link', { name: 'Tasks' })).toBeTruthy();
	});
});

describe('the menu of a person', () => {
	const links = (you: HTMLElement) =>
		within(you)
			.getAllByRole('link', { hidden: true })
			.map((link) => [link.firstChild?.textContent?.trim(), link.getAttribute('href')]);

	it('holds what is theirs, with what is unread on its button too', () => {
		const { you } = header({ group: null, path: '/home', unread: 12 });
		expect(you.querySelector('summary')?.textContent).toMatch(/You:.*Ada Merrin.*, 12 unread/s);
		expect(links(you)).toEqual([
			['Home', '/home'],
			['What is new', '/news'],
			['My tasks', '/home/tasks'],
			['Account', '/account'],
			['Notifications', '/account/notifications']
		]);
		const name = 'What is new, 12 unread';
		expect(within(you).getByRole('link', { name, hidden: true })).toBeTruthy();
		expect(within(you).getByText('Sign out')).toBeTruthy();
	});

	it('shows no number when all is read', () => {
		const { you } = header({ unread: 0 });
		expect(you.querySelector('summary')?.textContent).not.toMatch(/\d|unread/);
	});

	it('holds the mail for administrators only', () => {
		const { you } = header({ person: { ...person, isAdmin: true } });
		expect(links(you)).toContainEqual(['Mail', '/admin/mail']);
	});
});

it('offers a visitor to sign in, and no menu', () => {
	render(SiteHeader, { path: '/', person: null, groups: [], group: null });
	expect(screen.getByRole('link', { name: 'Sign in' })).toBeTruthy();
	expect(screen.queryByText('You:')).toBeNull();
});

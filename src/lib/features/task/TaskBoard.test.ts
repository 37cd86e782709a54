import { fireEvent, render, within } from '@testing-library/svelte';
import { tick } from 'svelte';
import { describe, expect, it } from 'vitest';
import { makeTaskRow } from '../../../../tests/factories/task-views';
import TaskBoard from './TaskBoard.svelte';

const mo = { id: 'mo', name: 'Mo Member' };
const rows = [
	makeTaskRow({ id: '1', number: 1, state: 'open', assignee: null, kind: 'find-code' }),
	makeTaskRow({ id: '2', number: 2, state: 'assigned', assignee: mo, kind: 'ask-authors' }),
	makeTaskRow({ id: '3', number: 3, state: 'assigned', assignee: mo, overdue: true }),
	makeTaskRow({ id: '4', number: 4, state: 'submitted', assignee: mo, kind: 'other' })
];
const props = { rows, base: '/g/a/tasks', state: 'active', role: 'member', self: 'mo' } as const;

describe('TaskBoard', () => {
	it('has a column per state under way, with its cards', () => {
		const { getAllByRole, getByRole } = render(TaskBoard, props);
		const names = getAllByRole('heading').map((heading) => heading.textContent?.trim());
		expect(names).toEqual([
			'Open to all 1',
			'Assigned 2',
			'In progress 0',
			'Submitted 1',
			'Returned 0'
		]);
		const assigned = getByRole('region', { name: 'Assigned 2' });
		expect(within(assigned).getAllByRole('listitem')).toHaveLength(2);
		expect(assigned.textContent).toContain('overdue since 14 Dec');
	});

	it('is one tab stop that arrow keys move', async () => {
		const { container, getByRole } = render(TaskBoard, props);
		await tick();
		const cards = () => [...container.querySelectorAll<HTMLElement>('[data-card]')];
		const stops = () => cards().filter((card) => card.tabIndex === 0);
		expect(stops().map((card) => card.dataset.card)).toEqual(['1']);
		const first = getByRole('link', { name: 'Find the code' });
		first.focus();
		await fireEvent.keyDown(first, { key: 'ArrowRight' });
		expect(document.activeElement?.getAttribute('data-card')).toBe('2');
		await fireEvent.keyDown(document.activeElement ?? first, { key: 'ArrowDown' });
		expect(document.activeElement?.getAttribute('data-card')).toBe('3');
		await fireEvent.keyDown(document.activeElement ?? first, { key: 'ArrowRight' });
		expect(document.activeElement?.getAttribute('data-card')).toBe('4');
		expect(stops().map((card) => card.dataset.card)).toEqual(['4']);
		expect(document.activeElement?.getAttribute('href')).toBe('/g/a/tasks/4');
	});

	it('offers in a menu what this person may do, at the doors of the task’s page', () => {
		const { container } = render(TaskBoard, props);
		const doors = [...container.querySelectorAll('form')].map((form) =>
			form.getAttribute('action')
		);
		expect(doors).toEqual([
			'/g/a/tasks/1?/take',
			'/g/a/tasks/2?/start',
			'/g/a/tasks/2?/release',
			'/g/a/tasks/3?/start',
			'/g/a/tasks/3?/release'
		]);
	});

	it('offers a maintainer to decide what somebody else submitted, not their own', () => {
		const doorsOf = (self: string) => {
			const { container, unmount } = render(TaskBoard, { ...props, role: 'maintainer', self });
			const doors = [...container.querySelectorAll('form')].map((f) => f.getAttribute('action'));
			unmount();
			return doors.filter((door) => door?.includes('/4?'));
		};
		expect(doorsOf('mae')).toEqual([
			'/g/a/tasks/4?/accept',
			'/g/a/tasks/4?/return',
			'/g/a/tasks/4?/cancel'
		]);
		expect(doorsOf('mo')).toEqual(['/g/a/tasks/4?/cancel']);
	});
});

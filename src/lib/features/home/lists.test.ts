import { render, screen, within } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import { makeTaskRow } from '../../../../tests/factories/task-views';
import { makeLedgerRow, makeVerdict } from '../../../../tests/factories/views';
import ClaimList from './ClaimList.svelte';
import TaskList from './TaskList.svelte';

const href = (name: string | RegExp) => screen.getByRole('link', { name }).getAttribute('href');
const group = { groupSlug: 'quarry', groupName: 'Quarry group' };

describe('tasks of several groups', () => {
	it('lead to the task, its claim and its group, and mark what is overdue in words', () => {
		const tasks = [
			makeTaskRow({ ...group, id: 't1', dueOn: '2020-12-14', overdue: true }),
			makeTaskRow({ ...group, id: 't2', number: 5, kind: 'find-code', dueOn: null })
		];
		render(TaskList, { tasks, caption: 'My tasks' });
		expect(screen.getByRole('table', { name: 'My tasks' })).toBeTruthy();
		expect(href('Recompute elsewhere')).toBe('/g/quarry/tasks/4');
		expect(href('Find the code')).toBe('/g/quarry/tasks/5');
		expect(screen.getByText('14 Dec 2020, overdue')).toBeTruthy();
		expect(screen.getByText('no date')).toBeTruthy();
		expect(screen.getAllByRole('link', { name: /Quantum maximum/ })[0]).toHaveProperty(
			'pathname',
			'/g/quarry/claims/12'
		);
	});

	it('say why one was returned, or who submitted it', () => {
		const task = makeTaskRow({ ...group, state: 'returned', reason: 'Which level was it?' });
		const { unmount } = render(TaskList, { tasks: [task], caption: 'My tasks' });
		expect(screen.getByText('Which level was it?')).toBeTruthy();
		unmount();
		render(TaskList, { tasks: [task], caption: 'To decide', people: true });
		expect(screen.getByRole('columnheader', { name: 'Submitted by' })).toBeTruthy();
		expect(screen.getByText('Mo Member')).toBeTruthy();
	});
});

describe('claims of several groups', () => {
	const row = makeLedgerRow({ number: 7, verdict: makeVerdict({ status: 'agreement' }) });

	it('show the verdict before and now, and when it turned', () => {
		const at = '2026-11-20T10:00:00.000Z';
		render(ClaimList, {
			entries: [{ row, ...group, at, before: 'discrepancy' }],
			caption: 'Changed',
			groups: true
		});
		const [first] = within(screen.getByRole('table', { name: 'Changed' })).getAllByRole('cell');
		expect(first?.textContent?.replace(/\s+/g, ' ')).toMatch(
			/Discrepancy.*now.*Agreement.*20 Nov 2026/
		);
		expect(href('Quantum maximum')).toBe('/g/quarry/claims/7');
		expect(href('Quarry group')).toBe('/g/quarry');
	});

	it('show the verdict alone where it is the first or has not turned', () => {
		render(ClaimList, { entries: [{ row, ...group }], caption: 'Standing' });
		expect(screen.getByRole('columnheader', { name: 'Verdict' })).toBeTruthy();
		expect(screen.getAllByText('Agreement')).toHaveLength(1);
	});
});

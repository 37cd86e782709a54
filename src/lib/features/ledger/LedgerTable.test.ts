import { fireEvent, render, within } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import { makeTaskMark } from '../../../../tests/factories/task-views';
import { makeLedgerRow, makeVerdict } from '../../../../tests/factories/views';
import { parseLedgerQuery } from '../../schemas/ledger-query';
import { ledgerHref, sortLink } from './ledger-url';
import LedgerTable from './LedgerTable.svelte';

const query = (text = '') => parseLedgerQuery(new URLSearchParams(text));
const props = {
	base: '/g/a',
	caption: 'Claims',
	claimHref: (row: { number: number }) => `/g/a/claims/${row.number}`,
	referenceHref: (id: string) => `/g/a/references/${id}`
};

describe('LedgerTable', () => {
	it('shows a row with status, claim, both values and the reference', () => {
		const { getAllByRole } = render(LedgerTable, {
			...props,
			query: query(),
			rows: [makeLedgerRow()]
		});
		const row = getAllByRole('row')[1];
		const text = row?.textContent?.replace(/\s+/g, ' ') ?? '';
		for (const part of ['Agreement', 'Quantum maximum', 'CHSH', '2.8284', 'Arden & Voss 2004'])
			expect(text).toContain(part);
		expect(text).toContain('2.82842712');
	});

	it('leads from a row to its claim and its paper', () => {
		const { getByRole } = render(LedgerTable, {
			...props,
			query: query(),
			rows: [makeLedgerRow({ number: 7 })]
		});
		expect(getByRole('link', { name: 'Quantum maximum' }).getAttribute('href')).toBe(
			'/g/a/claims/7'
		);
		expect(getByRole('link', { name: /Arden/ }).getAttribute('href')).toBe('/g/a/references/r1');
	});

	it('sorts by links in the headings and marks the sorted column', () => {
		const { getByRole } = render(LedgerTable, {
			...props,
			query: query('sort=value'),
			rows: [makeLedgerRow()]
		});
		const heading = getByRole('columnheader', { name: /Claimed/ });
		expect(heading.getAttribute('aria-sort')).toBe('ascending');
		expect(within(heading).getByRole('link').getAttribute('href')).toBe(
			'/g/a?sort=value-descending'
		);
		expect(getByRole('columnheader', { name: /Where it stands/ }).querySelector('a')).toBeNull();
	});

	it('shows why an open claim has no figure', () => {
		const verdict = makeVerdict({ status: 'open', reasonCode: 'no-solver', enclosure: null });
		const { container } = render(LedgerTable, {
			...props,
			rows: [makeLedgerRow({ verdict, stations: null, recomputedBy: '' })]
		});
		expect(container.textContent).toContain('no solver for this quantity');
	});

	it('follows rows that change', async () => {
		const { container, rerender } = render(LedgerTable, { ...props, rows: [makeLedgerRow()] });
		await rerender({
			rows: [makeLedgerRow({ verdict: makeVerdict({ status: 'discrepancy' }) })]
		});
		expect(container.textContent).toContain('Discrepancy');
	});
});

describe('tasks in the ledger', () => {
	const tasks = { href: '/g/a/tasks', mayOpen: true };

	it('have a column only where a group works', () => {
		const rows = [makeLedgerRow({ task: makeTaskMark() })];
		const shown = render(LedgerTable, { ...props, rows, tasks });
		expect(shown.getByRole('columnheader', { name: 'Task' })).toBeTruthy();
		shown.unmount();
		const open = render(LedgerTable, { ...props, rows });
		expect(open.queryByRole('columnheader', { name: 'Task' })).toBeNull();
		expect(open.container.textContent).not.toContain('Mo Member');
	});

	it('are linked, and marked by word when overdue', () => {
		const task = makeTaskMark({ dueOn: '2020-12-14', overdue: true, more: 2 });
		const { getByRole, container } = render(LedgerTable, {
			...props,
			rows: [makeLedgerRow({ task })],
			tasks
		});
		const link = getByRole('link', { name: /Task 4: Overdue since 14 Dec 2020, Mo Member/ });
		expect(link.getAttribute('href')).toBe('/g/a/tasks/4');
		expect(container.textContent).toContain('and 2 more');
	});

	it('are offered where a claim wants one, to those who open them', () => {
		const rows = [makeLedgerRow({ number: 12, wantsTask: true })];
		const maintainer = render(LedgerTable, { ...props, rows, tasks });
		const offer = maintainer.getByRole('link', { name: 'Assign a task on claim 12' });
		expect(offer.getAttribute('href')).toBe('/g/a/tasks/new?claims=12');
		maintainer.unmount();
		const member = render(LedgerTable, { ...props, rows, tasks: { ...tasks, mayOpen: false } });
		expect(member.queryByRole('link', { name: /Assign a task/ })).toBeNull();
		expect(member.queryByRole('checkbox')).toBeNull();
	});
});

describe('selecting claims', () => {
	const tasks = { href: '/g/a/tasks', mayOpen: true };
	const rows = [3, 5, 8].map((number) => makeLedgerRow({ id: `c${number}`, number }));
	const sent = (container: HTMLElement) => {
		const form = container.querySelector('form');
		return form ? new FormData(form).getAll('claims') : null;
	};

	it('sends the ticked numbers to where tasks are opened', async () => {
		const { container, getByRole } = render(LedgerTable, { ...props, rows, tasks });
		const form = container.querySelector('form');
		expect(form?.getAttribute('action')).toBe('/g/a/tasks/new');
		expect(form?.method).toBe('get');
		await fireEvent.click(getByRole('checkbox', { name: 'Select claim 5' }));
		await fireEvent.click(getByRole('checkbox', { name: 'Select claim 8' }));
		expect(sent(container)).toEqual(['5', '8']);
		expect(getByRole('status').textContent).toBe('2 selected');
	});

	it('leads from a ticked box to the selection, which takes the focus', async () => {
		const { getByRole, queryByRole } = render(LedgerTable, { ...props, rows, tasks });
		expect(queryByRole('link', { name: 'Go to the selection' })).toBeNull();
		await fireEvent.click(getByRole('checkbox', { name: 'Select claim 5' }));
		const link = getByRole('link', { name: 'Go to the selection' });
		const target = document.querySelector(link.getAttribute('href') ?? 'none');
		expect(target).toBe(getByRole('form', { name: 'Selection' }));
		expect(target?.getAttribute('tabindex')).toBe('-1');
	});

	it('ticks the page at once and clears it', async () => {
		const { container, getByRole } = render(LedgerTable, { ...props, rows, tasks });
		const all = getByRole('checkbox', { name: 'Select all claims on this page' });
		await fireEvent.click(all);
		expect(sent(container)).toEqual(['3', '5', '8']);
		await fireEvent.click(getByRole('checkbox', { name: 'Select claim 3' }));
		expect(all).toHaveProperty('indeterminate', true);
		await fireEvent.click(getByRole('button', { name: 'Clear' }));
		expect(sent(container)).toEqual([]);
	});
});

describe('ledger addresses', () => {
	it('keep the other filters and go back to page 1', () => {
		const state = query('q=chsh&status=open&page=3');
		expect(ledgerHref('/g/a', state, { status: 'agreement' })).toBe('/g/a?q=chsh&status=agreement');
		expect(ledgerHref('/g/a', state, { page: 4 })).toBe('/g/a?q=chsh&status=open&page=4');
		expect(ledgerHref('/g/a', query(), {})).toBe('/g/a');
	});

	it('step a column through its sorts and back to newest first', () => {
		expect(sortLink('/g/a', query(), 'claimed')?.href).toBe('/g/a?sort=value');
		expect(sortLink('/g/a', query('sort=value-descending'), 'claimed')).toMatchObject({
			href: '/g/a',
			direction: 'descending'
		});
		expect(sortLink('/g/a', query(), 'recomputed')).toBeNull();
	});
});

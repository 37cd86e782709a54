import { render, within } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
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

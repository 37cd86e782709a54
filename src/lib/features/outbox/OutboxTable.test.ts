import { render, screen } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import type { OutboxRow } from '../../schemas/talk-views';
import { outboxAddress } from './outbox-words';
import OutboxTable from './OutboxTable.svelte';

const row: OutboxRow = {
	id: 'a',
	kind: 'digest',
	to: 'mo.member@reading.example',
	state: 'dead',
	attempts: 10,
	lastError: '421 <b>the lights are off</b>',
	createdAt: '2026-12-01T06:00:00.000Z',
	notBefore: '2026-12-02T06:00:00.000Z'
};

describe('the table of mails', () => {
	it('says to whom, what, how often and why not, and offers what can be done', () => {
		render(OutboxTable, { rows: [row], shown: 'dead' });
		const header = screen.getByRole('rowheader');
		expect(header.textContent).toContain('mo.member@reading.example');
		expect(header.textContent).toContain('Daily digest');
		expect(screen.getByText('421 <b>the lights are off</b>', { exact: false })).toBeTruthy();
		const again = 'Try the mail to mo.member@reading.example again';
		expect(screen.getByRole('button', { name: again })).toBeTruthy();
		expect(screen.queryByRole('columnheader', { name: 'Next try' })).toBeNull();
	});

	it('offers nothing for what was sent', () => {
		render(OutboxTable, { rows: [{ ...row, state: 'sent', lastError: null }], shown: 'sent' });
		expect(screen.queryByRole('button')).toBeNull();
	});
});

describe('the address of a state', () => {
	it('leaves out what goes without saying', () => {
		expect(outboxAddress('dead')).toBe('/admin/mail');
		expect(outboxAddress('waiting', 2)).toBe('/admin/mail?state=waiting&page=2');
	});
});

import { render } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import { VERDICT_STATUSES } from '../../ledger/claim';
import VerdictBadge from './VerdictBadge.svelte';
import { VERDICT_LOOKS } from './verdict-looks';

describe('VerdictBadge', () => {
	it.each([
		['agreement', '≈', 'Agreement'],
		['discrepancy', '≠', 'Discrepancy'],
		['open', '?', 'Open']
	] as const)('shows %s by sign and word', (status, sign, word) => {
		const { container } = render(VerdictBadge, { status });
		expect(container.textContent?.replace(/\s+/g, '')).toBe(sign + word);
	});

	it('keeps the sign from screen readers, which hear the word', () => {
		const { getByText } = render(VerdictBadge, { status: 'agreement' });
		expect(getByText('≈').getAttribute('aria-hidden')).toBe('true');
	});

	it('tells the verdicts apart without colour', () => {
		const looks = VERDICT_STATUSES.map((status) => VERDICT_LOOKS[status]);
		expect(new Set(looks.map(({ sign }) => sign)).size).toBe(3);
		expect(new Set(looks.map(({ word }) => word)).size).toBe(3);
	});
});

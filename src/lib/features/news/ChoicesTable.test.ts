import { render, screen, within } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import ChoicesTable from './ChoicesTable.svelte';

describe('the table of choices', () => {
	it('has a row for each kind with one button chosen, named by kind and way', () => {
		render(ChoicesTable, {
			choices: [
				{ kind: 'mention', label: 'Somebody mentions me', delivery: 'never' },
				{ kind: 'comment', label: 'Somebody comments', delivery: 'daily' }
			]
		});
		const table = screen.getByRole('table', { name: 'How each kind of news comes by mail' });
		expect(within(table).getAllByRole('rowheader')).toHaveLength(2);
		const checked = within(table)
			.getAllByRole<HTMLInputElement>('radio')
			.filter((radio) => radio.checked);
		expect(
			checked.map((radio) => [radio.getAttribute('aria-label'), radio.name, radio.value])
		).toEqual([
			['Somebody mentions me: No mail', 'mention', 'never'],
			['Somebody comments: Daily digest', 'comment', 'daily']
		]);
	});
});

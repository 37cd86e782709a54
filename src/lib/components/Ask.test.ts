import { fireEvent, render } from '@testing-library/svelte';
import { createRawSnippet } from 'svelte';
import { describe, expect, it } from 'vitest';
import Ask from './Ask.svelte';

const props = {
	label: 'Remove',
	purpose: 'Remove Wren Adeyo',
	confirm: 'Remove Wren Adeyo',
	children: createRawSnippet(() => ({ render: () => '<p>It ends at once.</p>' }))
};

describe('Ask', () => {
	it('does nothing by itself: the button that does it is folded away', () => {
		const { container } = render(Ask, props);
		expect(container.querySelector('details')?.open).toBe(false);
		const button = container.querySelector('details > div button');
		expect(button?.getAttribute('type')).toBe('submit');
	});

	it('takes the question back and gives the focus back', async () => {
		const { container, getByText } = render(Ask, props);
		const details = container.querySelector('details');
		if (details) details.open = true;
		await fireEvent.click(getByText('Cancel'));
		expect(details?.open).toBe(false);
		expect(document.activeElement?.tagName).toBe('SUMMARY');
	});
});

import { createRawSnippet } from 'svelte';
import { fireEvent, render, screen } from '@testing-library/svelte';
import { expect, it } from 'vitest';
import Menu from './Menu.svelte';

const children = createRawSnippet(() => ({
	render: () => `<div><a href="#one">One</a><button type="button">Two</button></div>`
}));

function opened() {
	render(Menu, { label: 'Things', children });
	const details = screen.getByText('Things').closest('details') as HTMLDetailsElement;
	details.open = true;
	return details;
}

it('closes once one of its links is followed, and on a click elsewhere', async () => {
	const details = opened();
	await fireEvent.click(screen.getByText('Two'));
	expect(details.open).toBe(true);
	await fireEvent.click(screen.getByText('One'));
	expect(details.open).toBe(false);
	details.open = true;
	await fireEvent.click(document.body);
	expect(details.open).toBe(false);
});

it('closes on Escape and gives the focus back to its button', async () => {
	const details = opened();
	await fireEvent.keyDown(screen.getByText('Two'), { key: 'Escape' });
	expect(details.open).toBe(false);
	expect(document.activeElement).toBe(details.querySelector('summary'));
});

import { render } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import Digits from './Digits.svelte';

describe('Digits', () => {
	const runs = [
		{ text: '0.25', tone: 'same' },
		{ text: '15', tone: 'differs' }
	] as const;

	it('keeps the figure whole and underlines only what differs', () => {
		const { container } = render(Digits, { runs });
		const visible = container.querySelector('.figure')?.firstElementChild;
		expect(visible?.textContent).toBe('0.25');
		const underlined = container.querySelector('.border-discrepancy');
		expect(underlined?.textContent).toBe('15');
	});

	it('says to a screen reader that digits differ, and only then', () => {
		const differing = render(Digits, { runs });
		expect(differing.container.querySelector('.sr-only')?.textContent).toContain('differs');
		const agreeing = render(Digits, { runs: [{ text: '2.8284', tone: 'same' }] });
		expect(agreeing.container.querySelector('.sr-only')).toBeNull();
	});

	it('moves a figure right by whole digits, so that decimal points meet', () => {
		const { container } = render(Digits, { runs, pad: 2 });
		expect(container.querySelector<HTMLElement>('.figure')?.style.paddingLeft).toBe('2ch');
	});
});

import { render } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import { makeVerdict } from '../../../../tests/factories/views';
import DigitByDigit from './DigitByDigit.svelte';

const rowsOf = (container: HTMLElement) =>
	[...container.querySelectorAll('dl > div')].map((row) =>
		(row.textContent ?? '').replace(/\s+/g, ' ').trim()
	);

describe('DigitByDigit', () => {
	it('puts the recomputed value, rounded alike, under a claim in Agreement', () => {
		// CGLMP d=3: 2.914854..., printed 2.9149 (Acin, Durt, Gisin, Latorre 2002).
		const verdict = makeVerdict({
			reading: {
				printed: '2.9149',
				low: '2.91485',
				high: '2.91495',
				exact: false,
				text: 'Read as 2.91485 to 2.91495'
			},
			enclosure: {
				lower: '2.9148542155',
				upper: '2.9148542160',
				exact: null,
				worth: 'guaranteed',
				lowerLabel: 'an explicit quantum strategy',
				upperLabel: 'NPA level 2'
			}
		});
		const { container } = render(DigitByDigit, { printed: '2.9149', relation: '=', verdict });
		const rows = rowsOf(container);
		expect(rows[0]).toContain('Claimed 2.9149');
		expect(rows[1]).toContain('Recomputed 2.9149');
		expect(rows[2]).toContain('At most (guaranteed) 2.9148542160');
		expect(rows[3]).toContain('At least (guaranteed) 2.9148542155');
		expect(container.querySelector('.border-discrepancy')).toBeNull();
		expect(container.querySelectorAll('.font-semibold')).toHaveLength(2);
	});

	it('underlines from the first digit that no recomputed value shares', () => {
		const verdict = makeVerdict({
			status: 'discrepancy',
			enclosure: {
				lower: '0.25085',
				upper: '0.25094',
				exact: null,
				worth: 'guaranteed',
				lowerLabel: 'an explicit quantum strategy',
				upperLabel: 'NPA level 2'
			}
		});
		const { container } = render(DigitByDigit, { printed: '0.2515', relation: '=', verdict });
		expect(container.querySelector('.border-discrepancy')?.textContent).toBe('15');
		expect(rowsOf(container)).toHaveLength(3);
	});

	it('says that a figure is numerical, not guaranteed', () => {
		const whole = makeVerdict();
		const verdict = makeVerdict({
			enclosure: whole.enclosure && { ...whole.enclosure, worth: 'numerical' }
		});
		const { container } = render(DigitByDigit, { printed: '2.8284', relation: '=', verdict });
		expect(rowsOf(container).join(' ')).toContain('At most (numerical)');
	});

	it('shows an exact value once', () => {
		const verdict = makeVerdict({
			reading: { printed: '2', low: '2', high: '2', exact: true, text: 'Read as exactly 2' },
			enclosure: {
				lower: '2',
				upper: '2',
				exact: '2',
				worth: 'guaranteed',
				lowerLabel: 'a deterministic strategy',
				upperLabel: 'all deterministic strategies'
			}
		});
		const { container } = render(DigitByDigit, { printed: '2', relation: '=', verdict });
		expect(rowsOf(container)).toHaveLength(2);
	});

	it('shows a fraction as the fraction, its digits cut where they go on', () => {
		const verdict = makeVerdict({
			status: 'discrepancy',
			reading: { printed: '33.3', low: '33.25', high: '33.35', exact: false, text: '' },
			enclosure: {
				lower: '0.33333333333333',
				upper: '0.33333333333334',
				exact: '1/3',
				worth: 'guaranteed',
				lowerLabel: 'an exact linear programme',
				upperLabel: 'an exact linear programme'
			}
		});
		const { container } = render(DigitByDigit, { printed: '33.3', relation: '=', verdict });
		const rows = rowsOf(container);
		expect(rows[1]).toContain('Recomputed (exact) 0.333333333… = 1/3');
		expect(container.textContent).not.toContain('34');
	});

	it('shows a fraction that ends whole, beside it', () => {
		const verdict = makeVerdict({
			reading: { printed: '0.75', low: '0.745', high: '0.755', exact: false, text: '' },
			enclosure: {
				lower: '0.75',
				upper: '0.75',
				exact: '3/4',
				worth: 'guaranteed',
				lowerLabel: 'a deterministic strategy',
				upperLabel: 'all deterministic strategies'
			}
		});
		const { container } = render(DigitByDigit, { printed: '0.75', relation: '=', verdict });
		expect(rowsOf(container)).toHaveLength(2);
		expect(rowsOf(container)[1]).toContain('Recomputed 0.75 = 3/4');
	});
});

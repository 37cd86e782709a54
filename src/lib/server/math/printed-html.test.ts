import { describe, expect, it } from 'vitest';
import { printedHtml } from './printed-html';

describe('a printed value', () => {
	it.each(['2\\sqrt{2}', '$2\\sqrt{2}$', '\\frac{1}{4}', '2^{1/2}'])('%s is typeset', (printed) => {
		expect(printedHtml(printed)).toContain('<math');
	});

	it.each(['2.8284', '1/4', '0.2508(2)', '82.8 %', '2 sqrt(2)', '\\frac{1'])(
		'%s is not',
		(printed) => {
			expect(printedHtml(printed)).toBeNull();
		}
	);

	it('makes no element of its own out of what was typed', () => {
		expect(printedHtml('\\href{javascript:alert(1)}{2}') ?? '').not.toMatch(/href=|<a /);
	});
});

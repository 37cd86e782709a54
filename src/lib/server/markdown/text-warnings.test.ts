import { describe, expect, it } from 'vitest';
import { handlesOf } from '../../ledger/mentions';
import { textWarnings } from './text-warnings';

const handles = handlesOf([
	{ id: 'w', name: 'Wren Aldous' },
	{ id: 'b', name: 'Bo Tarn' }
]);

describe('textWarnings', () => {
	it.each([
		'@wren and @bo-tarn see $2\\sqrt{2}$',
		'mail wren@lab.example, or `@nobody` in code',
		'@wren@elsewhere.example',
		'costs 5 dollars'
	])('says nothing of %j', (text) => {
		expect(textWarnings(text, handles)).toEqual([]);
	});

	it('names each mention of nobody once', () => {
		const [warning, ...more] = textWarnings('@mira, **@mira** and @wren', handles);
		expect(warning).toContain('Nobody in this group is called @mira');
		expect(more).toEqual([]);
	});

	it('names formulas that can’t be set, cut where they are long', () => {
		const [first, second] = textWarnings(`$\\frac{1$ and\n\n$$\n\\nope${'x'.repeat(90)}\n$$`, []);
		expect(first).toContain('\\frac{1');
		expect(second).toMatch(/\\nopex+…$/);
	});
});

import { describe, expect, it } from 'vitest';
import { typeset } from './typeset';

describe('typesetting', () => {
	it('gives HTML with MathML', () => {
		expect(typeset('\\langle A_0 B_0 \\rangle')).toMatch(/<math.*<mi>A<\/mi>/);
	});

	it.each([
		'\\href{javascript:alert(1)}{x}',
		'\\includegraphics{http://x.example/a.png}',
		'\\htmlData{a=b}{x}',
		'\\text{<script>alert(1)</script>}',
		'<img src=x onerror=alert(1)>'
	])('%s makes neither a link nor an element of its own', (latex) => {
		expect(typeset(latex) ?? '').not.toMatch(/<script|<img|<a |href=|data-a/);
	});

	it.each([
		['nested', '{'.repeat(1_000) + '}'.repeat(1_000)],
		['long', 'x'.repeat(2_001)],
		['macros', '\\def\\a{\\a\\a}\\a'],
		['broken', '\\frac{1']
	])('%s input ends without a formula, at once', (_, latex) => {
		const start = performance.now();
		const html = typeset(latex);
		expect(performance.now() - start).toBeLessThan(500);
		expect(html === null || html.length < 200_000).toBe(true);
	});
});

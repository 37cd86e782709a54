import { describe, expect, it } from 'vitest';
import { parseBibtex } from './parse-bibtex';
import { plainMath } from './plain-math';

describe('plainMath', () => {
	it.each([
		['\\sqrt2', '√2'],
		['2\\sqrt{2}', '2√2'],
		['\\sqrt{a+b}', '√(a+b)'],
		['\\frac{1}{\\sqrt{2}}', '1/√2'],
		['\\frac12', '1/2'],
		['2\\times 2', '2×2'],
		['d\\to\\infty', 'd→∞'],
		['\\mathrm{CHSH}', '{CHSH}'],
		['I_{3322} + d^2', 'I₃₃₂₂ + d²'],
		['\\alpha^n', '\\alpha^n']
	])('%s', (formula, expected) => expect(plainMath(formula)).toBe(expected));
});

describe('a title with formulas', () => {
	it('comes out readable, and a DOI given as an address once', async () => {
		for (const doi of ['https://doi.org/10.5555/X', 'doi:10.5555/x', 'dx.doi.org/10.5555/x']) {
			const reading = await parseBibtex(
				`@article{a, title={the $\\sqrt2$ lake, \\emph{or} $d^2\\times 2$ shores}, author={Arden, Mira}, year=2004, doi={${doi}}}`
			);
			if (!reading.ok) throw new Error(reading.message);
			const { title, formatted, doi: read } = reading.reference;
			expect(title).toBe('the √2 lake, or d²×2 shores');
			expect(read).toBe('10.5555/x');
			expect(formatted).toBe(
				'Arden, M. (2004). the √2 lake, or d²×2 shores. https://doi.org/10.5555/x'
			);
		}
	});
});

import { describe, expect, it } from 'vitest';
import { parseCoefficient } from '../exact/expression';
import { NotationError, NotationLimitError } from '../exact/notation-error';
import { ZERO, printRational, type Rational } from '../exact/rational';
import { FAMILIES, familyFunctional, familyLatex, familyTitle, type FamilySpec } from './families';
import { collinsGisinForm, type Functional } from './functional';
import { functionalOfTerms, termsOfFunctional } from './problem-terms';

/** By listing every deterministic strategy: slow, and shares nothing with the product's solver. */
function localMaximum(f: Functional): Rational {
	const sizes = f.scenario.outputs.flat();
	const firsts = f.scenario.outputs.map((_, p) => f.scenario.outputs.slice(0, p).flat().length);
	const strategy = sizes.map(() => 0);
	let best: Rational | null = null;
	for (;;) {
		let value = ZERO;
		for (const { coefficient, events } of f.terms) {
			const holds = events.every(([p, x, a]) => strategy[(firsts[p] ?? 0) + x] === a);
			if (holds && coefficient.exact) value = value.add(coefficient.exact);
		}
		if (!best || value.compare(best) > 0) best = value;
		let at = 0;
		while (at < sizes.length && strategy[at] === (sizes[at] ?? 0) - 1) strategy[at++] = 0;
		if (at === sizes.length) return best;
		strategy[at] = (strategy[at] ?? 0) + 1;
	}
}

/** The value on a behaviour given as P(events) for full events. */
const valueOn = (f: Functional, probability: (events: readonly (readonly number[])[]) => number) =>
	f.terms.reduce((sum, t) => sum + t.coefficient.value * probability(t.events), 0);

describe('local maxima of the families', () => {
	// Published values; from memory except CGLMP's, read in Phys. Rev. Lett. 88, 040404 (2002).
	it.each<[FamilySpec, string]>([
		[{ name: 'chsh' }, '2'], // Phys. Rev. Lett. 23, 880 (1969)
		[{ name: 'tilted-chsh', alpha: 0.5 }, '5/2'], // Phys. Rev. Lett. 108, 100402 (2012)
		[{ name: 'tilted-chsh', alpha: '3/2' }, '7/2'],
		[{ name: 'chained', n: 2 }, '2'], // Ann. Phys. 202, 22 (1990)
		[{ name: 'chained', n: 3 }, '4'],
		[{ name: 'chained', n: '4' }, '6'],
		[{ name: 'i3322' }, '0'], // J. Phys. A 37, 1775 (2004)
		[{ name: 'cglmp', d: 2 }, '2'],
		[{ name: 'cglmp', d: 3 }, '2'],
		[{ name: 'cglmp', d: 4 }, '2'],
		[{ name: 'cglmp', d: 5 }, '2'],
		[{ name: 'elegant' }, '6'], // arXiv:quant-ph/0702021
		[{ name: 'mermin', n: 3 }, '2'], // Phys. Rev. Lett. 65, 1838 (1990): 2^floor(n/2)
		[{ name: 'mermin', n: 4 }, '4'],
		[{ name: 'svetlichny', n: 2 }, '2'], // Phys. Rev. Lett. 88, 170405 (2002): 2^ceil(n/2)
		[{ name: 'svetlichny', n: 3 }, '4'],
		[{ name: 'svetlichny', n: 4 }, '4'],
		[{ name: 'gyni', n: 3 }, '1/4'], // Phys. Rev. Lett. 104, 230404 (2010)
		[{ name: 'gyni', n: 4 }, '1/8'],
		[{ name: 'magic-square' }, '8/9'] // arXiv:quant-ph/0206070
	])('%j has local maximum %s', (spec, value) => {
		expect(printRational(localMaximum(familyFunctional(spec)))).toBe(value);
	});
});

describe('the families on known boxes', () => {
	it('gives CGLMP its published value on the maximally entangled state', () => {
		// P(A_x = k, B_y = l) = 1 / (2 d^3 sin^2(pi (k - l + alpha_x + beta_y) / d)) with alpha = 0, 1/2
		// and beta = 1/4, -1/4: Phys. Rev. Lett. 88, 040404 (2002), eq. (13). The values: Acin, Durt,
		// Gisin, Latorre, Phys. Rev. A 65, 052325 (2002), Table I, printed to four decimals.
		for (const [d, printed] of [
			[3, 2.8729],
			[4, 2.8962],
			[5, 2.9105]
		] as const) {
			const value = valueOn(familyFunctional({ name: 'cglmp', d }), ([a, b]) => {
				const shift = [0, 0.5][a?.[1] ?? 0] ?? 0;
				const other = [0.25, -0.25][b?.[1] ?? 0] ?? 0;
				const angle = (Math.PI * ((a?.[2] ?? 0) - (b?.[2] ?? 0) + shift + other)) / d;
				return 1 / (2 * d ** 3 * Math.sin(angle) ** 2);
			});
			expect(Math.abs(value - printed)).toBeLessThan(5.1e-5);
		}
	});

	it('reaches the algebraic maximum of CHSH on the box that wins it always', () => {
		// Popescu, Rohrlich, Found. Phys. 24, 379 (1994)
		const value = valueOn(familyFunctional({ name: 'chsh' }), ([a, b]) => {
			const sum = (a?.[2] ?? 0) + (b?.[2] ?? 0);
			return sum % 2 === (a?.[1] ?? 0) * (b?.[1] ?? 0) ? 0.5 : 0;
		});
		expect(value).toBe(4);
	});

	it('gives Mermin and Svetlichny their quantum values on equatorial GHZ correlations', () => {
		// <prod A(phi_p)> = cos(sum phi_p) on the GHZ state; Mermin 2^(n-1) with phases 0 and -pi/2,
		// Svetlichny 2^(n-1) sqrt(2) with the first phase shifted by pi/4.
		for (const [name, first, step, value] of [
			['mermin', 0, -Math.PI / 2, 4],
			['svetlichny', Math.PI / 4, -Math.PI / 2, 4 * Math.SQRT2]
		] as const) {
			const total = valueOn(familyFunctional({ name, n: 3 }), (events) => {
				const angle = events.reduce((sum, e) => sum + (e[1] ?? 0) * step, first);
				const odd = events.reduce((sum, e) => sum + (e[2] ?? 0), 0) % 2;
				return (1 + (odd ? -1 : 1) * Math.cos(angle)) / 8;
			});
			expect(total).toBeCloseTo(value, 12);
		}
	});

	it('wins the magic square with independent uniform bits half the time', () => {
		expect(valueOn(familyFunctional({ name: 'magic-square' }), () => 1 / 16)).toBeCloseTo(0.5, 14);
	});

	it('keeps an XOR game what its matrix says', () => {
		const game = familyFunctional({
			name: 'xor-game',
			matrix: [
				['1/4', 0.25],
				['1/4', '-1/4']
			]
		});
		const chsh = familyFunctional({ name: 'chsh' });
		expect(game.terms.map((t) => t.events)).toEqual(chsh.terms.map((t) => t.events));
		game.terms.forEach((t, i) => {
			expect(t.coefficient.value * 4).toBe(chsh.terms[i]?.coefficient.value);
		});
	});
});

describe('parameters and titles', () => {
	it('titles members as readers know them', () => {
		expect(familyTitle({ name: 'chsh' })).toBe('CHSH');
		expect(familyTitle({ name: 'cglmp', d: 3 })).toBe('CGLMP d=3');
		expect(familyTitle({ name: 'chained', n: 4 })).toBe('Chained n=4');
		expect(familyTitle({ name: 'xor-game', matrix: [[1, 2, 3]] })).toBe('XOR game 1\u00d73');
		expect(familyLatex({ name: 'tilted-chsh', alpha: '0.5' })).toMatch(/^0\.5\\,A_0/);
		expect(familyTitle({ name: 'tilted-chsh', alpha: '1/2' })).toBe('Tilted CHSH \u03b1=1/2');
	});

	it.each<[FamilySpec, RegExp]>([
		[{ name: 'nothing' }, /no family named "nothing"/],
		[{ name: 'cglmp' }, /d must be an integer from 2 to 12/],
		[{ name: 'cglmp', d: 1 }, /from 2 to 12 for cglmp, not 1/],
		[{ name: 'cglmp', d: 2.5 }, /not 2.5/],
		[{ name: 'cglmp', n: 3 }, /takes only the parameter d, not n/],
		[{ name: 'chsh', n: 3 }, /takes no parameter, not n/],
		[{ name: 'tilted-chsh', alpha: 3 }, /alpha must be a number from 0 to 2/],
		[{ name: 'tilted-chsh' }, /alpha must be a number from 0 to 2/],
		[{ name: 'tilted-chsh', alpha: ' ' }, /alpha must be a number from 0 to 2/],
		[{ name: 'xor-game' }, /matrix of the XOR game is missing/],
		[{ name: 'xor-game', matrix: [[]] }, /matrix of the XOR game is missing/],
		[{ name: 'xor-game', matrix: [Array(21).fill(1)] }, /at most 20 rows and columns/],
		[{ name: 'xor-game', matrix: [[1, 2], [3]] }, /row 2 of the matrix has 1 entries/],
		[{ name: 'xor-game', matrix: [['1', 'x']] }, /row 1, column 2 of the matrix: x is not a number/]
	])('refuses %j', (spec, message) => {
		expect(() => familyFunctional(spec)).toThrow(message);
		expect(() => familyFunctional(spec)).toThrow(NotationError);
	});

	it('tells too large from malformed', () => {
		expect(() => familyFunctional({ name: 'cglmp', d: 13 })).toThrow(NotationLimitError);
		expect(() => familyFunctional({ name: 'chained', n: 61 })).toThrow(NotationLimitError);
	});

	it('starts every form with a parameter that works', () => {
		for (const { name, parameter } of FAMILIES) {
			const spec: Record<string, unknown> = { name };
			if (parameter?.kind === 'matrix')
				spec[parameter.key] = parameter.initial.split('\n').map((row) => row.split(' '));
			else if (parameter) spec[parameter.key] = parameter.initial;
			const f = familyFunctional(spec as unknown as FamilySpec);
			expect(f.terms.length).toBeGreaterThan(0);
			expect(familyLatex(spec as unknown as FamilySpec).length).toBeGreaterThan(4);
			// Stored as a problem's terms and read back, it is the same data.
			const again = functionalOfTerms(f.scenario.outputs, termsOfFunctional(f));
			expect(termsOfFunctional(again)).toEqual(termsOfFunctional(f));
		}
	});

	it('makes chained n=2 the CHSH inequality up to a relabelling', () => {
		const coefficients = (spec: FamilySpec) =>
			collinsGisinForm(familyFunctional(spec))
				.terms.map((t) => t.coefficient.text)
				.sort();
		expect(coefficients({ name: 'chained', n: 2 })).toEqual(coefficients({ name: 'chsh' }));
	});

	it('keeps an irrational tilt exact', () => {
		const f = familyFunctional({ name: 'tilted-chsh', alpha: 'sqrt(2)' });
		expect(f.terms[0]?.coefficient.text).toBe(parseCoefficient('sqrt(2)').text);
	});
});

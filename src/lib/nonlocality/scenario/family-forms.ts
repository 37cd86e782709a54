/**
 * The functionals of the named families; indices from 0, observables A_x = P(0|x) - P(1|x). Each
 * with its source, the convention and the known maxima: local, quantum, no-signalling.
 */
import { exactCoefficient, type Coefficient } from '../exact/coefficient';
import { ratio } from '../exact/rational';
import { makeFunctional, type Functional, type Term } from './functional';
import { correlatorTerms } from './observables';
import type { Event } from './scenario';

const of = (numerator: number, denominator = 1): Coefficient =>
	exactCoefficient(ratio(BigInt(numerator), BigInt(denominator)));

/** `inputs` inputs with `outputs` outputs for each of `parties` parties. */
const uniformScenario = (parties: number, inputs: number, outputs: number) => ({
	outputs: Array.from({ length: parties }, () => Array.from({ length: inputs }, () => outputs))
});

/**
 * sum M_xy A_x B_y. Local: max over signs; quantum: level 1 of the relaxations is exact; no-signalling:
 * sum |M_xy|. With sum |M_xy| = 1 the XOR game of M is won with probability 1/2 + f/2.
 * @see Cleve, Hoyer, Toner, Watrous, arXiv:quant-ph/0404076 (2004)
 */
export function correlatorForm(matrix: readonly (readonly Coefficient[])[]): Functional {
	const rows = matrix.length;
	const columns = matrix[0]?.length ?? 0;
	const outputs = [Array.from({ length: rows }, () => 2), Array.from({ length: columns }, () => 2)];
	const terms = matrix.flatMap((row, x) =>
		row.flatMap((entry, y) =>
			correlatorTerms(entry, [
				[0, x],
				[1, y]
			])
		)
	);
	return makeFunctional({ outputs }, terms);
}

const CHSH_MATRIX = [
	[of(1), of(1)],
	[of(1), of(-1)]
];

/**
 * A0 B0 + A0 B1 + A1 B0 - A1 B1: 2; 2 sqrt(2); 4.
 * @see Clauser, Horne, Shimony, Holt, Phys. Rev. Lett. 23, 880 (1969); Tsirelson, Lett. Math. Phys. 4,
 * 93 (1980); Popescu, Rohrlich, Found. Phys. 24, 379 (1994)
 */
export const chsh = (): Functional => correlatorForm(CHSH_MATRIX);

/**
 * alpha A0 + CHSH, alpha in [0, 2]: 2 + alpha; sqrt(8 + 2 alpha^2); 4.
 * @see Acin, Massar, Pironio, Phys. Rev. Lett. 108, 100402 (2012)
 */
export function tiltedChsh(alpha: Coefficient): Functional {
	const { scenario, terms } = chsh();
	return makeFunctional(scenario, [...terms, ...correlatorTerms(alpha, [[0, 0]])]);
}

/**
 * sum_{i<n} A_i B_i + sum_{i<n-1} A_{i+1} B_i - A_0 B_{n-1}: 2n - 2; 2n cos(pi/2n); 2n.
 * @see Braunstein, Caves, Ann. Phys. 202, 22 (1990); Wehner, Phys. Rev. A 73, 022110 (2006)
 */
export function chained(n: number): Functional {
	const matrix = Array.from({ length: n }, () => Array.from({ length: n }, () => of(0)));
	const set = (x: number, y: number, value: number) => matrix[x]?.splice(y, 1, of(value));
	for (let i = 0; i < n; i++) set(i, i, 1);
	for (let i = 0; i < n - 1; i++) set(i + 1, i, 1);
	set(0, n - 1, -1);
	return correlatorForm(matrix);
}

/**
 * Collins-Gisin table, rows party 0, last outputs left out: 0; 0.2508753845..., no closed form known; 1.
 * @see Collins, Gisin, J. Phys. A 37, 1775 (2004); Pal, Vertesi, Phys. Rev. A 82, 022116 (2010)
 */
export function i3322(): Functional {
	const table = [
		[0, -1, 0, 0],
		[-2, 1, 1, 1],
		[-1, 1, 1, -1],
		[0, 1, -1, 0]
	];
	const terms = table.flatMap((row, i) =>
		row.map((entry, j): Term => {
			const events: Event[] = [];
			if (i > 0) events.push([0, i - 1, 0]);
			if (j > 0) events.push([1, j - 1, 0]);
			return { coefficient: of(entry), events };
		})
	);
	return makeFunctional(uniformScenario(2, 3, 2), terms);
}

/**
 * The inequality of Collins, Gisin, Linden, Massar and Popescu for d outputs, with
 * P(X = Y + k) = sum_j P(X = j + k mod d, Y = j): 2; no closed form known, (1 + sqrt(11/3)) for d = 3;
 * 4.
 * @see Phys. Rev. Lett. 88, 040404 (2002); Acin, Durt, Gisin, Latorre, Phys. Rev. A 65, 052325 (2002)
 */
export function cglmp(d: number): Functional {
	const terms: Term[] = [];
	const modulo = (value: number) => ((value % d) + d) % d;
	/** P(A_x = B_y + shift). */
	const add = (coefficient: Coefficient, x: number, y: number, shift: number) => {
		for (let j = 0; j < d; j++) {
			terms.push({
				coefficient,
				events: [
					[0, x, modulo(j + shift)],
					[1, y, j]
				]
			});
		}
	};
	for (let k = 0; k < Math.floor(d / 2); k++) {
		const plus = of(d - 1 - 2 * k, d - 1);
		const minus = of(2 * k + 1 - d, d - 1);
		add(plus, 0, 0, k); // A0 = B0 + k
		add(plus, 1, 0, -k - 1); // B0 = A1 + k + 1
		add(plus, 1, 1, k); // A1 = B1 + k
		add(plus, 0, 1, -k); // B1 = A0 + k
		add(minus, 0, 0, -k - 1); // A0 = B0 - k - 1
		add(minus, 1, 0, k); // B0 = A1 - k
		add(minus, 1, 1, -k - 1); // A1 = B1 - k - 1
		add(minus, 0, 1, k + 1); // B1 = A0 - k - 1
	}
	return makeFunctional(uniformScenario(2, 2, d), terms);
}

/**
 * Three inputs for party 0, four for party 1, the signs of the corners of a tetrahedron in a cube: 6;
 * 4 sqrt(3); 12.
 * @see Gisin, arXiv:quant-ph/0702021 (2007)
 */
export const elegant = (): Functional =>
	correlatorForm(
		[
			[1, 1, -1, -1],
			[1, -1, 1, -1],
			[1, -1, -1, 1]
		].map((row) => row.map((entry) => of(entry)))
	);

/** Every choice of one of two inputs per party, as `[inputs, their sum]`. */
function inputChoices(n: number): (readonly [inputs: readonly number[], sum: number])[] {
	return Array.from({ length: 2 ** n }, (_, bits) => {
		const inputs = Array.from({ length: n }, (_, party) => (bits >> party) & 1);
		return [inputs, inputs.reduce((sum, input) => sum + input, 0)] as const;
	});
}

/** sum over inputs of coefficient(their sum) * <product of all parties' observables>. */
function fullCorrelators(n: number, coefficient: (sum: number) => number): Functional {
	const terms = inputChoices(n).flatMap(([inputs, sum]) =>
		correlatorTerms(
			of(coefficient(sum)),
			inputs.map((input, party) => [party, input] as const)
		)
	);
	return makeFunctional(uniformScenario(n, 2, 2), terms);
}

/**
 * Re prod_p (A^p_0 + i A^p_1), the original form and not the recursive one: 2^floor(n/2); 2^(n-1);
 * 2^(n-1).
 * @see Mermin, Phys. Rev. Lett. 65, 1838 (1990)
 */
export const mermin = (n: number): Functional =>
	fullCorrelators(n, (sum) => (sum % 2 === 1 ? 0 : sum % 4 === 0 ? 1 : -1));

/**
 * Coefficient (-1)^floor(k/2), k the sum of the inputs: 2^ceil(n/2); 2^(n-1) sqrt(2); 2^n. The hybrid
 * bound 2^(n-1) is another quantity.
 * @see Svetlichny, Phys. Rev. D 35, 3066 (1987); Collins et al., Phys. Rev. Lett. 88, 170405 (2002)
 */
export const svetlichny = (n: number): Functional =>
	fullCorrelators(n, (sum) => (Math.floor(sum / 2) % 2 === 0 ? 1 : -1));

/**
 * Guess your neighbour's input: everyone outputs the next one's input, with uniform inputs under the
 * parity promise x_0 + ... + x_{m-1} even, m = n or n - 1, whichever is odd: 2^-(n-1); the same; 1/3,
 * 1/6, 1/11 for n = 3, 4, 5.
 * @see Almeida, Bancal, Brunner, Acin, Gisin, Pironio, Phys. Rev. Lett. 104, 230404 (2010)
 */
export function gyni(n: number): Functional {
	const promised = n % 2 === 1 ? n : n - 1;
	const terms: Term[] = [];
	for (const [inputs] of inputChoices(n)) {
		const sum = inputs.slice(0, promised).reduce((total, input) => total + input, 0);
		if (sum % 2 === 1) continue;
		const events = inputs.map((input, p): Event => [p, input, inputs[(p + 1) % n] ?? 0]);
		terms.push({ coefficient: of(1, 2 ** (n - 1)), events });
	}
	return makeFunctional(uniformScenario(n, 2, 2), terms);
}

/**
 * The magic square game: output k is the bits (k>>1, k&1) and a third by parity, even in party 0's
 * row and odd in party 1's column; they win when they agree where row and column meet. Winning
 * probability under uniform questions: 8/9; 1; 1.
 * @see Mermin, Phys. Rev. Lett. 65, 3373 (1990); Peres, Phys. Lett. A 151, 107 (1990)
 */
export function magicSquare(): Functional {
	const bit = (output: number, position: number, parity: number) => {
		const bits = [output >> 1, output & 1];
		return bits[position] ?? (output >> 1) ^ (output & 1) ^ parity;
	};
	const range = (length: number) => Array.from({ length }, (_, i) => i);
	const terms: Term[] = [];
	for (const x of range(3)) {
		for (const y of range(3)) {
			for (const a of range(4)) {
				for (const b of range(4)) {
					if (bit(a, y, 0) !== bit(b, x, 1)) continue;
					terms.push({
						coefficient: of(1, 9),
						events: [
							[0, x, a],
							[1, y, b]
						]
					});
				}
			}
		}
	}
	return makeFunctional(uniformScenario(2, 3, 4), terms);
}

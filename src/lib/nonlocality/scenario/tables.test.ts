import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { exactCoefficient, multiplyCoefficients, negateCoefficient } from '../exact/coefficient';
import { NotationError, NotationLimitError } from '../exact/notation-error';
import { ratio } from '../exact/rational';
import { familyFunctional } from './families';
import {
	parseProbabilityTable,
	printProbabilityTable,
	splitProbabilities
} from './probability-table';
import { collinsGisinForm, makeFunctional, type Functional } from './functional';
import {
	parseCollinsGisin,
	parseCorrelators,
	parseProbabilities,
	printCollinsGisin,
	printCorrelators,
	splitTable
} from './tables';

const same = (a: Functional, b: Functional): boolean => {
	const negative = b.terms.map((t) => ({ ...t, coefficient: negateCoefficient(t.coefficient) }));
	return collinsGisinForm(makeFunctional(a.scenario, [...a.terms, ...negative])).terms.length === 0;
};

/** scale * f + shift. */
const affine = (f: Functional, scale: number, shift: number): Functional =>
	makeFunctional(f.scenario, [
		...f.terms.map((t) => ({
			...t,
			coefficient: multiplyCoefficients(t.coefficient, exactCoefficient(ratio(BigInt(scale))))
		})),
		{ coefficient: exactCoefficient(ratio(BigInt(shift))), events: [] }
	]);

// Clauser, Horne, Phys. Rev. D 10, 526 (1974); the table as in arXiv:0711.3362.
const CH = [
	[0, -1, 0],
	[-1, 1, 1],
	[0, 1, -1]
];
// Collins, Gisin, J. Phys. A 37, 1775 (2004); its correlators follow with p = (1 + A)/2.
const I3322 = [
	[0, -1, 0, 0],
	[-2, 1, 1, 1],
	[-1, 1, 1, -1],
	[0, 1, -1, 0]
];
const I3322_CORRELATORS = [
	[0, 1, 1, 0],
	[-1, 1, 1, 1],
	[-1, 1, 1, -1],
	[0, 1, -1, 0]
];

describe('known conversions', () => {
	it('CHSH = 4 CH + 2', () => {
		expect(same(familyFunctional({ name: 'chsh' }), affine(parseCollinsGisin(CH), 4, 2))).toBe(
			true
		);
	});

	it('I3322 in correlators = 4 I + 4', () => {
		const i = parseCollinsGisin(I3322);
		expect(same(i, familyFunctional({ name: 'i3322' }))).toBe(true);
		expect(same(parseCorrelators(I3322_CORRELATORS), affine(i, 4, 4))).toBe(true);
		expect(printCorrelators(affine(i, 4, 4))).toEqual(
			I3322_CORRELATORS.map((row) => row.map(String))
		);
	});

	it('prints the tables it was given', () => {
		expect(printCollinsGisin(parseCollinsGisin(CH))).toEqual(CH.map((row) => row.map(String)));
		expect(printCollinsGisin(parseCorrelators(I3322_CORRELATORS))).toEqual([
			['4', '-4', '0', '0'],
			['-8', '4', '4', '4'],
			['-4', '4', '4', '-4'],
			['0', '4', '-4', '0']
		]);
	});
});

describe('splitTable', () => {
	it.each([
		'1 2 3\n4 5 6',
		'1, 2, 3\n4, 5, 6\n',
		'1;2;3\r\n4;5;6',
		'1\t2\t3\n4\t5\t6',
		'1 & 2 & 3 \\\\\n4 & 5 & 6 \\\\',
		'\\begin{pmatrix} 1 & 2 & 3 \\\\ 4 & 5 & 6 \\end{pmatrix}',
		'\\begin{array}{c|cc} 1 & 2 & 3 \\\\ \\hline 4 & 5 & 6 \\end{array}',
		'[[1,2,3],[4,5,6]]',
		'1 | 2 3\n4 | 5 6',
		'1 | 2 3\n--+-----\n4 | 5 6',
		'| 1 | 2 | 3 |\n|---|---|---|\n| 4 | 5 | 6 |',
		'[1 2 3; 4 5 6]',
		'{{1,2,3},{4,5,6}}',
		'((1, 2, 3), (4, 5, 6))',
		'[[1, 2, 3],\n [4, 5, 6]]',
		'$$\\left(\\begin{array}{c|cc}\n1 & 2\n& 3 \\\\ \\hline\n4 & 5 & 6\n\\end{array}\\right).$$',
		'M = \\begin{bmatrix*} 1 & 2 & 3 \\\\[2pt] 4 & 5 & 6 \\end{bmatrix*}',
		'\\begin{equation} \\begin{tabular}{c||@{ }c|c} 1&2&3\\tabularnewline\\hline\\hline 4&5&6 \\end{tabular} \\end{equation}',
		'1 2 3 % the first row\n4 5 6 # the second'
	])('%j', (text) => {
		expect(splitTable(text)).toEqual([
			['1', '2', '3'],
			['4', '5', '6']
		]);
	});

	it('takes a sign to the number behind it, and nothing between commas for zero', () => {
		expect(splitTable('0 - 1\n1 \u2212 \\frac{1}{2}')).toEqual([
			['0', '-1'],
			['1', '\u2212\\frac{1}{2}']
		]);
		expect(printCollinsGisin(parseCollinsGisin(splitTable('1,,2\n3,4,5')))).toEqual([
			['1', '0', '2'],
			['3', '4', '5']
		]);
	});

	it.each([' ', '\n', '\\', '{', '[', '-', '1 ', '(1),', '\\\\', '\\begin{array}', '%', '}  '])(
		'takes no time on a long run of %j',
		(piece) => {
			const text = piece.repeat(199_000 / piece.length);
			const before = process.cpuUsage();
			const attempts = [
				...[text, `\\begin{array}${text}`, `{{${text}`, `((${text}`].map(
					(whole) => () => splitTable(whole.slice(0, 200_000))
				),
				...[text, `0|0 1${text}x`, `0|0${text}x\u2028x`, `${text}|0 1`].map(
					(whole) => () => splitProbabilities(whole)
				)
			];
			for (const attempt of attempts) {
				try {
					attempt();
				} catch (error) {
					expect(error).toBeInstanceOf(NotationError);
				}
			}
			const { user, system } = process.cpuUsage(before);
			expect((user + system) / 1000).toBeLessThan(1500);
		}
	);

	it('keeps expressions whole between commas', () => {
		expect(splitTable('1/2, 2 sqrt(2)\n-1, \\frac{1}{2}')).toEqual([
			['1/2', '2 sqrt(2)'],
			['-1', '\\frac{1}{2}']
		]);
	});
});

describe('what cannot be read', () => {
	it.each<[() => unknown, RegExp]>([
		[() => splitTable(''), /empty/],
		[
			() => splitTable('\\begin{matrix}1\\end{matrix} \\begin{matrix}2\\end{matrix}'),
			/more than one table/
		],
		[() => splitTable('$$'), /empty/],
		[() => parseProbabilityTable([[1], [2]]), /need even numbers/],
		[() => parseProbabilityTable([[1, 2]], [[2]]), /two parties, not 1/],
		[
			() =>
				parseProbabilityTable(
					[
						[1, 2],
						[3, 4]
					],
					[[2], [3]]
				),
			/2 rows and 2 columns; these outputs need 2 and 3/
		],
		[
			() =>
				parseProbabilityTable([
					[1, 2],
					[3, 'x']
				]),
			/row 2, column 2/
		],
		[() => splitProbabilities(''), /empty/],
		[() => splitProbabilities('0,1|1,0: 1\nP(0,1) = 2'), /line 2 is no probability/],
		[() => splitProbabilities('0,1|1,0: 1\n01|10 2'), /line 2: 0,1\|1,0 occurs twice/],
		[() => splitTable('1 2\n3'), /row 2 has 1 cells, the first row 2/],
		[
			() =>
				parseCollinsGisin([
					[1, 2],
					[3, 'x']
				]),
			/row 2, column 2: x is not a number/
		],
		[() => parseCollinsGisin([[1, 2]]), /at least two rows/],
		[
			() =>
				parseCollinsGisin(CH, [
					[2, 2],
					[2, 2, 2]
				]),
			/3 rows and 3 columns; these outputs need 3 and 4/
		],
		[() => parseCollinsGisin(CH, [[2, 2], [2, 2], [2]]), /two parties, not 3/],
		[
			() =>
				parseCorrelators([
					[NaN, 1],
					[1, 1]
				]),
			/row 1, column 1/
		],
		[() => parseCorrelators([[1, 2]]), /at least two rows and two columns/],
		[() => parseProbabilities({}), /table of probabilities is empty/],
		[() => parseProbabilities({ '0|0': 1 }, [[2], [2]]), /"0\|0" is for 1 parties, not 2/],
		[() => parseProbabilities({ 'a|b': 1 }), /names no probability/],
		[() => parseProbabilities({ '0,0|0': 1 }), /names no probability/],
		[() => parseProbabilities({ '0,0|0,0': 1, '0|0': 1 }), /is for 1 parties, the others for 2/],
		[() => parseProbabilities({ '0,2|0,0': 1 }, [[2], [2]]), /outside the scenario/],
		[() => parseProbabilities({ '0,0|0,0': 'x' }), /"0,0\|0,0": x is not a number/],
		[() => parseProbabilities(JSON.parse('{"__proto__": 1}')), /names no probability/]
	])('%#', (attempt, message) => {
		expect(attempt).toThrow(message);
		expect(attempt).toThrow(NotationError);
	});

	it('tells too large from malformed', () => {
		const wide = Array.from({ length: 202 }, () => ['1']);
		expect(() => parseCollinsGisin(wide)).toThrow(NotationLimitError);
		expect(() => parseProbabilities({ '0,0|0,200': 1 })).toThrow(NotationLimitError);
		expect(() => parseProbabilities({ '0,0,0,0,0,0,0|0,0,0,0,0,0,0': 1 })).toThrow(
			NotationLimitError
		);
		expect(() => splitTable('1 '.repeat(250_001))).toThrow(NotationLimitError);
		expect(() => splitProbabilities('1 '.repeat(250_001))).toThrow(NotationLimitError);
	});
});

describe('tables of all probabilities', () => {
	it('have a row and a column for every output', () => {
		// the game of CHSH: sum over x, y of P(a + b = x y)
		const table = [
			[1, 0, 1, 0],
			[0, 1, 0, 1],
			[1, 0, 0, 1],
			[0, 1, 1, 0]
		];
		const game = parseProbabilityTable(table);
		expect(same(familyFunctional({ name: 'chsh' }), affine(game, 2, -4))).toBe(true);
		expect(printProbabilityTable(game)).toEqual(table.map((row) => row.map(String)));
		expect(printProbabilityTable(parseCollinsGisin(CH))).toBeNull();
		expect(printProbabilityTable(familyFunctional({ name: 'mermin', n: 3 }))).toBeNull();
	});

	it.each([
		'0,1|1,0: 1/2\n1,1|0,0: -sqrt(2)',
		'P(0,1|1,0) = 1/2\np( 1, 1 | 0, 0 ) = -sqrt(2)\n',
		'01|10 1/2\n\n11|00\t-sqrt(2)',
		'{"0,1|1,0": "1/2", "1,1|0,0": "-sqrt(2)"}',
		'{\n  "0,1|1,0": 1/2,\n  "1,1|0,0": "-sqrt(2)"\n}'
	])('are read from lines: %j', (text) => {
		expect(splitProbabilities(text)).toEqual({ '0,1|1,0': '1/2', '1,1|0,0': '-sqrt(2)' });
	});
});

describe('any table', () => {
	it('of more than two outputs is none of correlators', () => {
		const outputs = [
			[2, 3],
			[3, 2, 2]
		];
		expect(printCorrelators(makeFunctional({ outputs }, []))).toBeNull();
	});

	it('is linear in the table', () => {
		const cell = fc.integer({ min: -5, max: 5 });
		const table = fc.array(fc.array(cell, { minLength: 3, maxLength: 3 }), {
			minLength: 3,
			maxLength: 3
		});
		fc.assert(
			fc.property(table, table, (a, b) => {
				const sum = a.map((row, i) => row.map((value, j) => value + (b[i]?.[j] ?? 0)));
				const [fa, fb, fsum] = [a, b, sum].map((t) => parseCollinsGisin(t));
				expect(fa && fb && fsum).toBeDefined();
				if (!fa || !fb || !fsum) return;
				expect(same(fsum, makeFunctional(fa.scenario, [...fa.terms, ...fb.terms]))).toBe(true);
			})
		);
	});
});

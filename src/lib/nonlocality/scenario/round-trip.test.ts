import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { anyFunctional, anyScenario } from '../../../../tests/factories/any-functional';
import { negateCoefficient } from '../exact/coefficient';
import { parseExpression } from './expression';
import { printExpression } from './expression-print';
import { collinsGisinForm, makeFunctional, type Functional } from './functional';
import { printLatex } from './latex';
import {
	parseProbabilityTable,
	printProbabilityTable,
	splitProbabilities
} from './probability-table';
import { functionalOfTerms, termsOfFunctional } from './problem-terms';
import {
	parseCollinsGisin,
	parseCorrelators,
	parseProbabilities,
	printCollinsGisin,
	printCorrelators,
	printProbabilities,
	splitTable
} from './tables';

/** Equal on every no-signalling behaviour: equal Collins-Gisin coordinates. */
function expectSame(a: Functional, b: Functional): void {
	expect(a.scenario.outputs).toEqual(b.scenario.outputs);
	const negative = b.terms.map((t) => ({ ...t, coefficient: negateCoefficient(t.coefficient) }));
	const difference = makeFunctional(a.scenario, [...a.terms, ...negative]);
	expect(collinsGisinForm(difference).terms).toEqual([]);
}

const withFunctional = (scenario: fc.Arbitrary<number[][]>, full = false) =>
	scenario.chain((outputs) => anyFunctional(outputs, full));

const ANY = { parties: [1, 6], inputs: [1, 4], outputs: [2, 4] } as const;
const OBSERVABLES = { parties: [1, 6], inputs: [1, 12], outputs: [2, 2] } as const;
const MANY_OUTPUTS = { parties: [1, 3], inputs: [1, 2], outputs: [9, 20] } as const;

/** The table as people paste it. */
const PASTED: readonly ((rows: readonly (readonly string[])[]) => string)[] = [
	(rows) => rows.map((row) => row.join('\t')).join('\n'),
	(rows) => rows.map((row) => row.join(', ')).join('\r\n'),
	(rows) => rows.map((row) => row.join(' & ')).join(' \\\\\n'),
	(rows) =>
		`\\left(\\begin{array}{${'c'.repeat(rows[0]?.length ?? 0)}}\n` +
		`${rows.map((row) => row.join('&')).join('\\\\ \\hline\n')}\n\\end{array}\\right)`,
	(rows) => `M = \\begin{pmatrix}${rows.map((row) => row.join(' & ')).join('\\\\')}\\end{pmatrix}.`,
	(rows) => `[${rows.map((row) => `[${row.join(', ')}]`).join(',\n ')}]`,
	(rows) => rows.map((row) => row.join('  ').replaceAll('-', '\u2212')).join('\n'),
	(rows) => rows.map((row) => `| ${row.join(' | ')} |`).join('\n')
];

describe('what was printed reads back to the same functional', () => {
	it.each([
		['any scenario', ANY, 250],
		['observables of up to twelve inputs', OBSERVABLES, 200],
		['many outputs', MANY_OUTPUTS, 100]
	])('as an expression, as LaTeX and as terms: %s', (_, shape, numRuns) => {
		fc.assert(
			fc.property(
				withFunctional(anyScenario(shape)),
				fc.constantFrom<(0 | 1)[]>(0, 1),
				(f, indexBase) => {
					const { outputs } = f.scenario;
					const read = (text: string) => parseExpression(text, { indexBase, outputs });
					expectSame(read(printExpression(f, { indexBase })).functional, f);
					expectSame(read(printLatex(f, { indexBase })).functional, f);
					expect(functionalOfTerms(outputs, termsOfFunctional(f)).terms).toEqual(f.terms);
				}
			),
			{ numRuns }
		);
	});

	it('where a letter and two digits alone could be a correlator', () => {
		const outputs = Array.from({ length: 6 }, () => Array.from({ length: 12 }, () => 2));
		for (const letter of 'ABCDEF') {
			const f = parseExpression(`${letter}10 - 2 ${letter}11`, { outputs }).functional;
			expectSame(parseExpression(printLatex(f), { outputs }).functional, f);
			expectSame(parseExpression(printExpression(f), { outputs }).functional, f);
		}
	});

	it('as LaTeX in a display, with a name in front and a bound behind', () => {
		fc.assert(
			fc.property(withFunctional(anyScenario(ANY)), (f) => {
				const { outputs } = f.scenario;
				const pasted = `\\begin{equation} S = ${printLatex(f)} \\leq 2\\sqrt{2}. \\label{a} \\end{equation}`;
				if (f.terms.every(({ events }) => events.length === 0)) return;
				const { functional, claimedBound } = parseExpression(pasted, { outputs });
				expectSame(functional, f);
				expect(claimedBound).toEqual({ relation: '<=', text: '2\\sqrt{2}' });
			}),
			{ numRuns: 100 }
		);
	});

	const two = { parties: [2, 2], inputs: [1, 3], outputs: [2, 4] } as const;
	const paste = fc.constantFrom(...PASTED);

	it('as a Collins-Gisin table, however it is pasted', () => {
		fc.assert(
			fc.property(withFunctional(anyScenario(two)), paste, (f, pasted) => {
				const rows = splitTable(pasted(printCollinsGisin(f) ?? []));
				expectSame(parseCollinsGisin(rows, f.scenario.outputs), f);
			})
		);
	});

	it('as a correlator table, however it is pasted', () => {
		fc.assert(
			fc.property(withFunctional(anyScenario({ ...two, outputs: [2, 2] })), paste, (f, pasted) => {
				expectSame(parseCorrelators(splitTable(pasted(printCorrelators(f) ?? []))), f);
			})
		);
	});

	it('as a table of all probabilities, however it is pasted', () => {
		fc.assert(
			fc.property(withFunctional(anyScenario(two), true), paste, (f, pasted) => {
				const rows = splitTable(pasted(printProbabilityTable(f) ?? []));
				expect(parseProbabilityTable(rows, f.scenario.outputs).terms).toEqual(f.terms);
			})
		);
	});

	it('as probabilities by key, as an object or on lines', () => {
		fc.assert(
			fc.property(withFunctional(anyScenario(ANY), true), (f) => {
				const { outputs } = f.scenario;
				const entries = printProbabilities(f) ?? {};
				expect(parseProbabilities(entries, outputs).terms).toEqual(f.terms);
				if (f.terms.length === 0) return;
				const lines = Object.entries(entries).map(([key, value]) => `P(${key}) = ${value}`);
				for (const text of [
					lines.join('\n'),
					JSON.stringify(entries),
					JSON.stringify(entries, null, 2)
				])
					expect(parseProbabilities(splitProbabilities(text), outputs).terms).toEqual(f.terms);
			})
		);
	});
});

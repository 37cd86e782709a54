import { describe, expect, it } from 'vitest';
import { collinsGisinForm } from '../../../nonlocality/scenario/functional';
import { parseExpression } from '../../../nonlocality/scenario/expression';
import { termsOfFunctional } from '../../../nonlocality/scenario/problem-terms';
import { expressionNotation } from './notation-words';
import { readProbabilities } from './read-probabilities';

const same = (text: string, expression: string, outputs?: number[][]) => {
	const terms = (f: ReturnType<typeof readProbabilities>['functional']) =>
		termsOfFunctional(collinsGisinForm(f));
	const asked = outputs ? { outputs } : {};
	expect(terms(readProbabilities(text, outputs).functional)).toEqual(
		terms(parseExpression(expression, asked).functional)
	);
};

describe('a full probability table', () => {
	it('is read a line a probability, however its marks are set', () => {
		const expression = '1/2 P(0,1|1,0) - P(0,0|0,1)';
		same('0,1|1,0  1/2\n0,0|0,1 -1', expression);
		same('P(0,1|1,0) = 1/2\nP( 0, 0 | 0, 1 ): -1;', expression);
		same('{\n "0,1|1,0": "1/2",\n "0,0|0,1": -1\n}', expression);
	});

	it('holds three parties and outputs of its own', () => {
		same('0,2,1|0,0,1 sqrt(2)', 'sqrt(2) P(0,2,1|0,0,1)', [
			[2, 2],
			[3, 3],
			[2, 2]
		]);
	});

	it('of two parties is read as a grid', () => {
		// The winning condition of the CHSH game: a + b = xy modulo 2.
		const grid = '1 0 1 0\n0 1 0 1\n1 0 0 1\n0 1 1 0';
		const won = ['0,0|0,0', '1,1|0,0', '0,0|0,1', '1,1|0,1', '0,0|1,0', '1,1|1,0'];
		const lost = ['0,1|1,1', '1,0|1,1'];
		same(grid, [...won, ...lost].map((key) => `P(${key})`).join(' + '));
		expect(readProbabilities(grid, undefined).notation).toContain('a grid of 4 × 4');
	});

	it.each([
		['0,1|1,0', /line 1 is no probability with its coefficient/],
		['0,1|1,0 1\n0,1|1 2', /"0,1\|1" names no probability/],
		['0,1|1,0 1\nnothing', /line 2 is no probability with its coefficient/],
		['0,1|1,0 1\n0,1|1,0 2', /line 2: 0,1\|1,0 occurs twice/],
		['1 0 1\n0 1 1\n1 1 1', /3 rows and 3 columns, and inputs of two outputs need even numbers/]
	])('says of %j what is wrong', (text, message) => {
		expect(() => readProbabilities(text, undefined)).toThrow(message);
	});
});

describe('the words for a notation', () => {
	it.each([
		['A0 B0 + A1', 'Expression, in observables'],
		['<A_0 B_1> - P(0,1|1,0)', 'Expression, in expectation values in brackets and probabilities'],
		[
			'\\langle A_{0} B_{1} \\rangle',
			'Expression pasted as LaTeX, in expectation values in brackets'
		],
		['2E(0,1)', 'Expression, in correlators E'],
		['P_A(0|1)', 'Expression, in probabilities']
	])('of %s', (source, words) => {
		expect(expressionNotation(source)).toBe(words);
	});
});

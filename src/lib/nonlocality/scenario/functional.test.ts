import { describe, expect, it } from 'vitest';
import { COEFFICIENT_ONE, equalCoefficients, multiplyCoefficients } from '../exact/coefficient';
import { parseCoefficient } from '../exact/expression';
import { canonicalForm } from './equivalence';
import { makeFunctional } from './functional';
import { divide, integerForm } from './integer-form';
import { functionalOfTerms } from './problem-terms';
import { relabelEvent } from './relabelling';
import { outputCount, type Event } from './scenario';
import { printCorrelators, printProbabilities, printCollinsGisin } from './tables';

const scenario = { outputs: [[2, 3], [2]] };
const term = (...events: Event[]) => ({ coefficient: COEFFICIENT_ONE, events });

describe('a functional', () => {
	it('orders events by party, merges repeated ones and drops zeros', () => {
		const f = functionalOfTerms(scenario, [
			[
				'1/3',
				[
					[1, 0, 0],
					[0, 1, 2]
				]
			],
			[
				'2/3',
				[
					[0, 1, 2],
					[1, 0, 0]
				]
			],
			['1', [[0, 0, 1]]],
			['-1', [[0, 0, 1]]]
		]);
		expect(f.terms).toEqual([term([0, 1, 2], [1, 0, 0])]);
	});

	it.each<[Event[], RegExp]>([
		[[[0, 0, 2]], /party 0, input 0 has no output 2/],
		[[[0, 0, -1]], /no output -1/],
		[[[0, 0, 0.5]], /no output 0.5/],
		[[[0, 2, 0]], /party 0 has no input 2/],
		[[[2, 0, 0]], /party 2 has no input 0/],
		[
			[
				[0, 0, 0],
				[0, 1, 0]
			],
			/party 0 occurs twice/
		]
	])('refuses %j', (events, message) => {
		expect(() => makeFunctional(scenario, [term(...events)])).toThrow(message);
	});

	it('has no table where a table has no place for it', () => {
		const three = functionalOfTerms([[2], [2], [2]], [['1', [[0, 0, 0]]]]);
		expect(printCollinsGisin(three)).toBeNull();
		expect(printCorrelators(three)).toBeNull();
		expect(printProbabilities(three)).toBeNull();
		expect(printCorrelators(functionalOfTerms(scenario, []))).toBeNull();
	});
});

it('asks for measurements and names that exist', () => {
	expect(outputCount(scenario, 0, 1)).toBe(3);
	expect(() => outputCount(scenario, 1, 1)).toThrow(RangeError);
	const relabelling = { parties: [0], inputs: [[0]], outputs: [[[1, 0]]] };
	expect(relabelEvent([0, 0, 0], relabelling)).toEqual([0, 0, 1]);
	for (const event of [
		[1, 0, 0],
		[0, 1, 0],
		[0, 0, 2]
	] as const)
		expect(() => relabelEvent(event, relabelling)).toThrow(/no name for output/);
});

describe('integers of coefficients', () => {
	const form = (...texts: string[]) => integerForm(texts.map(parseCoefficient));
	it.each([
		[['2', '-4', '0'], [1n, -2n, 0n], '2'],
		[['1/2', '1/3'], [3n, 2n], '1/6'],
		[['-3*sqrt(2)', '0', '6*sqrt(2)'], [-1n, 0n, 2n], '3*sqrt(2)'],
		[['1+sqrt(2)', '-2-2*sqrt(2)'], [1n, -2n], '1+sqrt(2)'],
		[['-pi', '2*pi'], [-1n, 2n], 'pi']
	])('of %j', (texts, integers, scale) => {
		const found = form(...texts);
		expect(found.numerical).toBe(false);
		expect(found.integers).toEqual(integers);
		expect(found.scale.text).toBe(scale);
	});

	it.each([
		[
			['1', 'sqrt(2)'],
			[707106781187n, 1000000000000n]
		],
		[
			['-sqrt(3)', '1', 'sqrt(2)'],
			[-1000000000000n, 577350269190n, 816496580928n]
		],
		[
			['sqrt(2)', '1/2', '-4'],
			[353553390593n, 125000000000n, -1000000000000n]
		],
		[
			['pi', 'sqrt(2)'],
			[1000000000000n, 450158158079n]
		]
	])('are twelve digits where ratios are irrational: %j', (texts, integers) => {
		const found = form(...texts);
		expect(found.numerical).toBe(true);
		expect(found.integers).toEqual(integers);
		texts.forEach((text, i) => {
			const { value } = parseCoefficient(text);
			const again = multiplyCoefficients(found.scale, found.normalised[i] ?? found.scale);
			expect(Math.abs(again.value - value)).toBeLessThanOrEqual(again.error + 1e-15);
		});
	});

	it.each([
		['0', 'pi', '0'],
		['3', '2', '3/2'],
		['4*pi', '2*pi', '2'],
		['sqrt(2)', '2', '1/2*sqrt(2)']
	])('%s divided by %s is %s', (a, b, quotient) => {
		const found = divide(parseCoefficient(a), parseCoefficient(b));
		expect(equalCoefficients(found, parseCoefficient(quotient))).toBe(true);
	});

	it('bounds the error of any other quotient', () => {
		const found = divide(parseCoefficient('1'), parseCoefficient('pi'));
		expect(Math.abs(found.value - 0.3183098861837907)).toBeLessThanOrEqual(found.error);
		expect(found.error).toBeLessThan(1e-15);
	});
});

it('takes coefficients of very different sizes together', () => {
	const f = functionalOfTerms(scenario, [
		['1e-12', [[0, 0, 0]]],
		['1e12', [[1, 0, 0]]]
	]);
	const { canonical, scale, numerical } = canonicalForm(f);
	expect(numerical).toBe(false);
	expect(canonical.terms.map(({ coefficient }) => coefficient.text)).toContain(
		`1${'0'.repeat(24)}`
	);
	expect(scale.text).toBe(`1/2${'0'.repeat(12)}`);
});

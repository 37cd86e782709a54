import { describe, expect, it } from 'vitest';
import { problemOn } from '../../../../tests/factories/solver-problem';
import { parseSdpa } from '../optimization/sdpa-text';
import { familyFunctional } from '../scenario/families';
import { sdpaText } from './solve';

const chsh = {
	...problemOn('local', familyFunctional({ name: 'chsh' })),
	quantity: 'npa',
	level: 1,
	nonNegative: false
} as const;

describe('a relaxation as a file for other solvers', () => {
	it('has a row for each monomial and a variable for each moment', () => {
		// Level 1 of two inputs each: 1 and four projectors, so 5 rows and 10 free moments.
		const { blocks, objective, entries } = parseSdpa(sdpaText(chsh));
		expect(blocks).toEqual([5]);
		expect(objective).toHaveLength(10);
		expect(entries.filter(({ matrix, value }) => matrix === 0 && value === -1)).toHaveLength(1);
		expect(sdpaText(chsh)).toMatch(/maximum of the[^]*relaxation is 2 - x\./);
	});

	it('turns the objective for a minimum', () => {
		const most = parseSdpa(sdpaText(chsh)).objective;
		const least = parseSdpa(sdpaText({ ...chsh, sense: 'min' })).objective;
		expect(least).toEqual(most.map((value) => 0 - value));
		expect(sdpaText({ ...chsh, sense: 'min' })).toMatch(/minimum of the[^]*is x - \(-2\)\./);
	});

	it('has probabilities and constraints as linear rows, an equation twice', () => {
		const rows = (problem: Parameters<typeof sdpaText>[0]) =>
			-(parseSdpa(sdpaText(problem)).blocks[1] ?? 0);
		const with16 = { ...chsh, nonNegative: true } as const;
		expect(rows(with16)).toBe(16);
		const terms = [['1', [[0, 0, 0]]]] as const;
		const constraints = [
			{ terms, relation: '<=', value: '1/2' },
			{ terms, relation: '=', value: '1/3' }
		] as const;
		expect(rows({ ...with16, constraints })).toBe(19);
		const { entries } = parseSdpa(sdpaText({ ...chsh, constraints: constraints.slice(1) }));
		const linear = entries.filter(({ block }) => block === 2);
		expect(linear).toHaveLength(4);
		expect(linear.reduce((sum, { value }) => sum + value, 0)).toBe(0);
	});

	it('is none for another quantity', () => {
		expect(() => sdpaText({ ...chsh, quantity: 'facet' })).toThrow(/no single semidefinite/);
	});
});

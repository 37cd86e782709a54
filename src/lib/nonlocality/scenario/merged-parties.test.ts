import { describe, expect, it } from 'vitest';
import { parseExpression } from './expression';
import { bipartitions, jointInputs, mergeParties } from './merged-parties';

describe('bipartitions', () => {
	it('lists each split once, party 0 in the first group', () => {
		expect(bipartitions(3)).toEqual([
			[[0, 2], [1]],
			[[0, 1], [2]],
			[[0], [1, 2]]
		]);
		for (const count of [2, 4, 5]) {
			const found = bipartitions(count);
			expect(found).toHaveLength(2 ** (count - 1) - 1);
			expect(new Set(found.map((groups) => JSON.stringify(groups))).size).toBe(found.length);
			for (const [first, second] of found)
				expect([...first, ...second].sort()).toEqual(Array.from({ length: count }, (_, p) => p));
		}
	});
});

describe('mergeParties', () => {
	const outputs = [[2, 2], [3, 2], [2]];

	it('numbers joint inputs and outputs row by row', () => {
		const { functional } = parseExpression('P(1,2,0|1,0,0) + 2 P(0,1,1|0,1,0) - 3', {
			outputs,
			indexBase: 0
		});
		const merged = mergeParties(functional, [[0, 1], [2]]);
		expect(merged.scenario.outputs).toEqual([[6, 4, 6, 4], [2]]);
		expect(jointInputs(functional.scenario, [0, 1])[2]).toEqual({
			inputs: [1, 0],
			outputs: [2, 3]
		});
		expect(merged.terms.map(({ coefficient, events }) => [coefficient.text, events])).toEqual([
			['-3', []],
			[
				'2',
				[
					[0, 1, 1],
					[1, 0, 1]
				]
			],
			[
				'1',
				[
					[0, 2, 5],
					[1, 0, 0]
				]
			]
		]);
	});

	it('refuses a term that measures a part of a group', () => {
		const { functional } = parseExpression('P_AC(0,0|0,0)', { outputs, indexBase: 0 });
		expect(() => mergeParties(functional, [[0, 1], [2]])).toThrow(
			/only a part of the parties 0, 1/
		);
		expect(mergeParties(functional, [[0, 2], [1]]).terms).toHaveLength(1);
	});
});

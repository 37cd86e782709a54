import { describe, expect, it } from 'vitest';
import { parseProblem } from './problem';
import { readBox } from './problem-box';
import { ProblemError, ProblemLimitError } from './problem-error';
import type { BoxShape } from './problem-shape';

const TWO = [
	[2, 2],
	[2, 2]
];

/** The table a box of the format stands for. */
function tableOf(shape: BoxShape, outputs?: number[][]) {
	const { box, outputs: scenario } = readBox(shape, outputs);
	return { table: box.kind === 'table' ? box.probabilities : {}, scenario };
}

describe('isotropic boxes', () => {
	it.each<[number, number | string, string, string]>([
		[2, 1, '1/2', '0'],
		[2, 0, '1/4', '1/4'],
		[2, -1, '0', '1/2'],
		[2, '1/2', '3/8', '1/8'],
		[2, 0.7071, '17071/40000', '2929/40000'],
		[2, '1/sqrt(2)', '1/4+1/8*sqrt(2)', '1/4-1/8*sqrt(2)'],
		[3, '-1/2', '0', '1/6'],
		[3, 1, '1/3', '0'],
		[4, '-1/3', '0', '1/12'],
		[5, 0, '1/25', '1/25']
	])('d=%i, E=%s', (d, E, right, wrong) => {
		const { table, scenario } = tableOf({ family: 'isotropic', d, E });
		expect(scenario).toEqual([Array.from({ length: d }, () => d), [d, d]]);
		expect(Object.keys(table)).toHaveLength(2 * d ** 3);
		for (const [key, value] of Object.entries(table)) {
			const [a = 0, b = 0, x = 0, y = 0] = key.split(/[,|]/).map(Number);
			expect(value, key).toBe((a + b - x * y) % d === 0 ? right : wrong);
		}
	});

	it('are of no more than 32 outputs', () => {
		expect(() => readBox({ family: 'isotropic', d: 33, E: 0 }, undefined)).toThrow(
			ProblemLimitError
		);
	});
});

it('makes the uniform box of different numbers of outputs', () => {
	const { table } = tableOf({ family: 'uniform' }, [[2, 3], [4], [2]]);
	expect(Object.keys(table)).toHaveLength(5 * 4 * 2);
	expect(table['1,3,0|0,0,0']).toBe('1/16');
	expect(table['2,3,1|1,0,0']).toBe('1/24');
});

it('makes deterministic boxes', () => {
	const { table } = tableOf({ family: 'deterministic', strategy: [[0, 2], [1]] }, [[2, 3], [2]]);
	const certain = Object.keys(table).filter((key) => table[key] === '1');
	expect(certain).toEqual(['0,1|0,0', '2,1|1,0']);
	expect(Object.values(table).filter((value) => value === '0')).toHaveLength(8);
});

it('takes a table as it is written, with the smallest scenario when none is given', () => {
	const { table, scenario } = tableOf({ '0,0|0,0': 0.5, '1,1|0,0': '1/2' });
	expect(scenario).toEqual([[2], [2]]);
	expect(table).toEqual({ '0,0|0,0': '1/2', '1,1|0,0': '1/2' });
	expect(tableOf({ kind: 'table', probabilities: { '0|0': 1 } }, [[2]]).table).toEqual({
		'0|0': '1'
	});
});

const QUBIT = [
	[
		[
			[1, 0],
			[0, 0]
		],
		[
			[0, 0],
			[0, 1]
		]
	]
].map((elements) =>
	elements.map((matrix) => matrix.map((row) => row.map((re): [number, number] => [re, 0])))
);

it('takes a state with measurements', () => {
	const { box, outputs } = readBox(
		{
			family: 'quantum',
			state: [
				['1/sqrt(2)', 0],
				[0, 0],
				[0, 0],
				[0, 'sqrt(1/2)']
			],
			measurements: [QUBIT, QUBIT]
		},
		undefined
	);
	expect(outputs).toEqual([[2], [2]]);
	expect(box).toMatchObject({ kind: 'quantum', strategy: { dimensions: [2, 2] } });
	expect(box.kind === 'quantum' && box.strategy.state[3]).toEqual([0, Math.SQRT1_2]);
});

describe('what is wrong with a box is said at its field', () => {
	const state = [[1, 0]];
	const one = [[[1, 0]]];
	const zero = [[[0, 0]]];
	it.each<[object | string, string, RegExp]>([
		[{ family: 'isotropic', d: 2 }, 'box.E', /is missing/],
		[{ family: 'isotropic', E: 1 }, 'box.d', /is missing/],
		[{ family: 'isotropic', d: 2.5, E: 0 }, 'box.d', /whole number/],
		[{ family: 'isotropic', d: 1, E: 0 }, 'box.d', /at least 2/],
		[{ family: 'isotropic', d: 2, E: 1, F: 1 }, 'box.F', /not known/],
		[{ family: 'isotropic', d: 2, E: 'x' }, 'box.E', /x is not a number/],
		[{ family: 'isotropic', d: 2, E: [1] }, 'box.E', /a number, or a text/],
		[{ family: 'isotropic', d: 2, E: 1.0000001 }, 'box.E', /from -1\/\(d-1\) to 1/],
		[{ family: 'isotropic', d: 3, E: '-0.51' }, 'box.E', /from -1\/\(d-1\) to 1/],
		[{ family: 'isotropic', d: 3, E: 0 }, 'box', /is for the outputs/],
		[{ family: 'uniform', d: 2 }, 'box.d', /not known/],
		[{ family: 'deterministic' }, 'box.strategy', /is missing/],
		[{ family: 'deterministic', strategy: 'x' }, 'box.strategy', /list/],
		[{ family: 'deterministic', strategy: [[0, -1], []] }, 'box.strategy[0][1]', /at least 0/],
		[
			{
				family: 'deterministic',
				strategy: [
					[0, 2],
					[0, 0]
				]
			},
			'box.strategy',
			/one output per/
		],
		[{ family: 'deterministic', strategy: [[0, 1]] }, 'box.strategy', /one output per/],
		[{ family: 'nothing' }, 'box', /isotropic, uniform, deterministic, quantum/],
		['x', 'box', /isotropic, uniform, deterministic, quantum/],
		[{ '0,0|0,0': 'x' }, 'box["0,0|0,0"]', /x is not a number/],
		[{ '0,0|0,0': 1, '0,2|0,0': 1 }, 'box["0,2|0,0"]', /outside the outputs/],
		[{ '0,0|0,0': 1, '0,0': 1 }, 'box["0,0"]', /names a probability/],
		[{ '0,0|0,0': -1 }, 'box', /negative/],
		[{ '0,0|0,0': 1 }, 'box', /sum to 0, not 1/],
		[{ kind: 'table' }, 'box.probabilities', /is missing/],
		[{ family: 'quantum', measurements: [[[one, zero]]] }, 'box.state', /is missing/],
		[{ family: 'quantum', state }, 'box.measurements', /is missing/],
		[{ family: 'quantum', state, measurements: 'x' }, 'box.measurements', /matrices/],
		[{ family: 'quantum', state: [[1]], measurements: [] }, 'box.state[0]', /\[re, im\]/],
		[{ family: 'quantum', state, measurements: [] }, 'box.measurements', /two elements/],
		[{ family: 'quantum', state, measurements: [[[one]]] }, 'box.measurements', /two elements/],
		[{ family: 'quantum', state, measurements: [[[one, zero]]] }, 'box.measurements', /outputs/],
		[
			{
				family: 'quantum',
				state: [[0, 0]],
				measurements: Array(2).fill(Array(2).fill([one, zero]))
			},
			'box.state',
			/zero vector/
		],
		[
			{
				family: 'quantum',
				state: [...state, ...state],
				measurements: Array(2).fill(Array(2).fill([one, zero]))
			},
			'box.state',
			/must have 1 x 1 = 1 components, not 2/
		],
		[
			{
				family: 'quantum',
				state,
				measurements: Array(2).fill(Array(2).fill([one, [...zero, ...zero]]))
			},
			'box.measurements[0][0][1]',
			/square matrix/
		],
		[
			{ family: 'quantum', state, measurements: Array(2).fill(Array(2).fill([one, [[[0, 'q']]]])) },
			'box.measurements[0][0][1][0][0]',
			/q is not a number/
		]
	])('%j: %s', (box, field, message) => {
		const problem = {
			quantity: 'value',
			outputs: TWO,
			terms: [[1, [[0, 0, 0]]]],
			box
		};
		let error: unknown = null;
		try {
			parseProblem(problem);
		} catch (thrown) {
			error = thrown;
		}
		expect(error).toBeInstanceOf(ProblemError);
		expect(error).toMatchObject({ field });
		expect(String(error)).toMatch(message);
	});
});

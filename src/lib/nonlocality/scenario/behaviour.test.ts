import { describe, expect, it } from 'vitest';
import { CHSH_STRATEGY, realMatrix } from '../../../../tests/factories/chsh-strategy';
import { uniformBehaviour } from '../../../../tests/factories/uniform-behaviour';
import type { ComplexMatrix, QuantumStrategy } from '../problem';
import { behaviourOfTable, valueOnBehaviour } from './behaviour';
import { marginalOf, readTable } from './exact-table';
import { familyFunctional } from './families';
import { behaviourOfStrategy } from './strategy-behaviour';

const TWO = {
	outputs: [
		[2, 2],
		[2, 2]
	]
};
const chsh = familyFunctional({ name: 'chsh' });

/** a + b = x y (Popescu, Rohrlich, Found. Phys. 24, 379 (1994)). */
const WINS: Record<string, string> = {};
for (const x of [0, 1])
	for (const y of [0, 1]) for (const a of [0, 1]) WINS[`${a},${a ^ (x & y)}|${x},${y}`] = '1/2';

describe('behaviours of tables', () => {
	it('give functionals their exact values', () => {
		expect(valueOnBehaviour(chsh, behaviourOfTable(TWO, WINS)).text).toBe('4');
		expect(valueOnBehaviour(chsh, uniformBehaviour(TWO)).text).toBe('0');
		const table = readTable(TWO, WINS);
		expect(typeof table === 'string' || marginalOf(table, [[1, 1, 0]]).toFraction()).toBe('1/2');
	});

	it.each<[Record<string, string>, RegExp]>([
		[{ ...WINS, '0,0|0,0': '-1/2' }, /P\(0,0\|0,0\) = -1\/2 is negative/],
		[{ ...WINS, '0,0|0,0': '1/3' }, /inputs 0,0 sum to 5\/6, not 1/],
		[{ ...WINS, '0,0|0,0': '1', '1,1|0,0': '0' }, /signalling/],
		[{ ...WINS, '0,0|0,0': 'sqrt(2)/2' }, /sum to 1\.2071/],
		[{ ...WINS, '0,2|0,0': '0' }, /"0,2\|0,0" names no probability/]
	])('refuse what is none: %#', (entries, message) => {
		expect(() => behaviourOfTable(TWO, entries)).toThrow(message);
	});

	it('are not looked at past a limit, and are read as fractions where they are to be', () => {
		const large = { outputs: Array.from({ length: 6 }, () => [2, 2, 3]) };
		expect(readTable(large, {})).toMatch(/past the limit of 100000/);
		expect(readTable(TWO, { '0,0|0,0': 'sqrt(2)' })).toMatch(/is no fraction/);
	});
});

describe('behaviours of strategies', () => {
	it('reach 2 sqrt(2)', () => {
		const { value, error } = valueOnBehaviour(chsh, behaviourOfStrategy(TWO, CHSH_STRATEGY));
		expect(Math.abs(value - 2 * Math.SQRT2)).toBeLessThanOrEqual(error + 1e-15);
		expect(error).toBeLessThan(1e-12);
	});

	const [first = [], second = []] = CHSH_STRATEGY.measurements;
	const withFirst = (elements: readonly ComplexMatrix[]) => [[elements, ...first.slice(1)], second];
	const identity = realMatrix([
		[1, 0],
		[0, 1]
	]);
	it.each<[Partial<QuantumStrategy>, RegExp]>([
		[{ dimensions: [2] }, /2 dimensions/],
		[{ dimensions: [2, 0] }, /at least 1/],
		[{ dimensions: [100, 100] }, /10000 entries is past the limit of 4096/],
		[{ state: [[1, 0]] }, /1 entries, not 4/],
		[{ state: CHSH_STRATEGY.state.map(([re]) => [2 * re, 0] as const) }, /squared length 4/],
		[{ measurements: [] }, /party 0, input 0: 2 measurement elements are needed/],
		[{ measurements: withFirst([identity]) }, /2 measurement elements are needed/],
		[{ measurements: withFirst([realMatrix([[1]]), realMatrix([[0]])]) }, /no 2 x 2 matrix/],
		[{ measurements: withFirst([identity, identity]) }, /sum to the identity/],
		[
			{
				measurements: withFirst([
					realMatrix([
						[1, 1],
						[0, 0]
					]),
					realMatrix([
						[0, -1],
						[0, 1]
					])
				])
			},
			/not Hermitian/
		],
		[
			{
				measurements: withFirst([
					realMatrix([
						[2, 0],
						[0, 1]
					]),
					realMatrix([
						[-1, 0],
						[0, 0]
					])
				])
			},
			/not positive/
		]
	])('refuse what does not fit: %#', (change, message) => {
		expect(() => behaviourOfStrategy(TWO, { ...CHSH_STRATEGY, ...change })).toThrow(message);
	});
});

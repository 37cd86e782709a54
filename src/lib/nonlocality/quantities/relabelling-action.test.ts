import { describe, expect, it } from 'vitest';
import { CentredStrings } from './centred-strings';
import { RelabellingAction } from './relabelling-action';

/** Two parties with two inputs of two outputs; the relabelling swaps Alice's outputs and Bob's inputs. */
const parties = [0, 1].map(() => new CentredStrings([0, 1], [0, 1], [2, 2]));
const action = new RelabellingAction(parties, [
	{
		parties: [0, 1],
		inputs: [
			[0, 1],
			[1, 0]
		],
		outputs: [
			[
				[1, 0],
				[0, 1]
			],
			[
				[0, 1],
				[0, 1]
			]
		]
	}
]);

describe('RelabellingAction', () => {
	it('takes A_0 B_0 to -A_0 B_1', () => {
		const [alice, bob] = parties.map(({ strings }) => strings.append(0, 0));
		const pattern = [alice ?? 0, bob ?? 0].map((string, p) => action.placeOf(p, string).pattern);
		const other = action.placeOf(1, parties[1]?.strings.append(0, 1) ?? 0).pattern;
		expect(action.image(0, pattern, false)).toEqual([pattern[0], other]);
		expect(action.sign(0, pattern)).toBeCloseTo(-1, 12);
		expect(action.dimension(pattern)).toBe(1);
	});

	it('refuses a party, a relabelling and a pattern that are not there', () => {
		expect(() => action.placeOf(2, 0)).toThrow(new RangeError('there is no party 2'));
		expect(() => action.image(1, [0, 0], false)).toThrow(
			new RangeError('there is no relabelling 1')
		);
		expect(() => action.keyOf([0, 2 ** 26])).toThrow(/too many patterns/);
	});
});

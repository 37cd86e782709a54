import { describe, expect, it } from 'vitest';
import { shortMethod } from './short-method';

describe('a method under a figure', () => {
	it.each([
		['NPA level 1', 'NPA level 1'],
		['an explicit quantum strategy in dimension 2', 'see-saw d=2'],
		['an explicit quantum strategy in dimension 2 x 3', 'see-saw d=2 x 3'],
		['an explicit quantum strategy', 'see-saw'],
		['a feasible moment matrix of NPA level 2', 'NPA level 2'],
		['the NPA level of one operator per party', 'NPA level of one operator per party'],
		['NPA level 1 with non-negative probabilities', 'NPA level 1, P ≥ 0'],
		['the enumeration of all deterministic strategies', 'deterministic strategies'],
		['a deterministic strategy', 'deterministic strategies'],
		['a no-signalling box', 'linear programme'],
		['a reproduction by Wren Aldous (own program (new) 2.1)', 'reproduction by Wren Aldous'],
		['a person’s reproduction', 'a person’s reproduction'],
		['evaluation', 'evaluation']
	])('%s: %s', (label, short) => {
		expect(shortMethod(label)).toBe(short);
	});
});

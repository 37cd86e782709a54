import { expect, it } from 'vitest';
import { Recent } from './recent';

it('a cache keeps the latest and lets the oldest go', () => {
	const cache = new Recent<number>(2);
	expect(cache.keep('a', 1)).toBe(1);
	cache.keep('b', 2);
	cache.keep('c', 3);
	expect(['a', 'b', 'c'].map((key) => cache.get(key))).toEqual([undefined, 2, 3]);
	expect(() => new Recent(0)).toThrow(RangeError);
});

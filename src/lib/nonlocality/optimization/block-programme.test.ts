import { describe, expect, it } from 'vitest';
import { factorGram } from './block-programme';

describe('factorGram', () => {
	it('keeps the diagonal of an orthogonal set', () => {
		const gram = factorGram(Float64Array.of(4, 0, 0, 9), 2);
		expect(gram?.factor).toBeNull();
		expect([...(gram?.diagonal ?? [])]).toEqual([4, 9]);
	});

	it('factorises another one: [[4, 2], [2, 5]] = L L^T with L = [[2, 0], [1, 2]]', () => {
		const factor = factorGram(Float64Array.of(4, 0, 2, 5), 2)?.factor;
		expect([factor?.[0], factor?.[2], factor?.[3]]).toEqual([2, 1, 2]);
	});

	it('finds that matrices are not independent', () => {
		expect(factorGram(Float64Array.of(1, 0, 2, 4), 2)).toBeNull();
		expect(factorGram(Float64Array.of(1, 0, 0, 0), 2)).toBeNull();
	});
});

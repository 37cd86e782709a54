import { describe, expect, test } from 'vitest';
import { smallestTridiagonalEigenvalue, tailOfEigenvector } from './tridiagonal-eigen';

// The path's matrix, 2 on the diagonal and -1 beside it, is diagonalised by sines (common practice).
describe.each([2, 3, 12, 40])('the path with %i vertices', (n) => {
	const angle = Math.PI / (n + 1);
	const diagonal = Float64Array.from({ length: n }, () => 2);
	const offDiagonal = Float64Array.from({ length: n - 1 }, () => -1);
	const smallest = 2 - 2 * Math.cos(angle);

	test('has the smallest eigenvalue 2 - 2 cos(pi / (n + 1))', () => {
		expect(smallestTridiagonalEigenvalue(diagonal, offDiagonal)).toBeCloseTo(smallest, 13);
	});

	test('has the last component of its eigenvector', () => {
		const last = Math.sqrt(2 / (n + 1)) * Math.sin(n * angle);
		expect(tailOfEigenvector(diagonal, offDiagonal, n, smallest)).toBeCloseTo(last, 10);
	});
});

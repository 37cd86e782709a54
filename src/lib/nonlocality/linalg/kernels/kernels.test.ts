import { describe, expect, test } from 'vitest';
import { seededRandom } from '../seeded-random';
import { makeKernels, type Kernels } from './kernels';
import { stepScratch } from './plain-step';
import { layOutSupports } from './supports';

/** Normwise, relative: what both sides may differ by, as sums are taken in another order. */
const TOLERANCE = 1e-12;
/** Around the vectors' width, the tiles, the panels of elimination and one panel alone. */
const SIZES = [...Array.from({ length: 40 }, (_, i) => i + 1), 63, 64, 65, 67, 88, 101, 127, 130];
const LARGE = [255, 256, 257, 391, 999];

const both = (n: number) => {
	const demand = { doubles: 12 * n * n + 100 * n + 1000, arrays: 60, order: n };
	return [makeKernels(demand, 'wasm'), makeKernels(demand, 'plain')] as const;
};

/** |a - b| / |b|, Frobenius. */
function distance(a: Float64Array, b: Float64Array): number {
	let difference = 0;
	let size = 0;
	b.forEach((value, i) => {
		difference += ((a[i] ?? NaN) - value) ** 2;
		size += value * value;
	});
	return Math.sqrt(difference / (size || 1));
}

function randomMatrix(length: number, seed: number): Float64Array {
	const random = seededRandom(seed);
	return Float64Array.from({ length }, () => random.normal());
}

function symmetricMatrix(n: number, seed: number): Float64Array {
	const a = randomMatrix(n * n, seed);
	return a.map((value, cell) => value + (a[(cell % n) * n + Math.floor(cell / n)] ?? 0));
}

/** Diagonally dominant: condition number of a few. */
function positiveMatrix(n: number, seed: number): Float64Array {
	const a = symmetricMatrix(n, seed);
	for (let i = 0; i < n; i++) a[i * n + i] = 4 * n + (a[i * n + i] ?? 0);
	return a;
}

/** Runs the same on both kinds of kernels, on copies of the inputs; expects the same arrays. */
function expectSame(
	n: number,
	inputs: readonly Float64Array[],
	run: (kernels: Kernels, arrays: readonly Float64Array[]) => unknown
): void {
	const outcomes = both(n).map((kernels) => {
		const arrays = inputs.map((input) => {
			const array = kernels.doubles(input.length);
			array.set(input);
			return array;
		});
		const returned = run(kernels, arrays);
		const results = arrays.map((array) => array.slice());
		kernels.release();
		return { returned, results };
	});
	const [wasm, plain] = outcomes;
	if (typeof plain?.returned === 'number')
		expect(Math.abs(Number(wasm?.returned) - plain.returned)).toBeLessThan(TOLERANCE * n);
	else expect(wasm?.returned).toEqual(plain?.returned);
	plain?.results.forEach((result, i) =>
		expect(distance(wasm?.results[i] ?? new Float64Array(), result)).toBeLessThan(TOLERANCE)
	);
}

const at = (arrays: readonly Float64Array[], i: number) => arrays[i] ?? new Float64Array();

describe('kernels in WebAssembly and in plain TypeScript agree on', () => {
	test.each([...SIZES, ...LARGE])('Cholesky factors and solutions, n = %i', (n) => {
		expectSame(n, [positiveMatrix(n, n), randomMatrix(n, n + 1)], (kernels, arrays) => {
			const done = kernels.factorCholesky(at(arrays, 0), n);
			kernels.solveFactored(at(arrays, 0), n, at(arrays, 1));
			return done;
		});
	});

	test.each(SIZES)('inverses, n = %i', (n) => {
		const square = new Float64Array(n * n);
		expectSame(n, [positiveMatrix(n, n), square, square], (kernels, arrays) => {
			kernels.factorCholesky(at(arrays, 0), n);
			kernels.invertFactor(at(arrays, 0), n, at(arrays, 1));
			kernels.inverseFromFactor(at(arrays, 1), n, at(arrays, 2));
		});
	});

	test.each(SIZES)('products, n = %i', (n) => {
		const inputs = [randomMatrix(n * n, n), randomMatrix(n * n, n + 1), new Float64Array(n * n)];
		expectSame(n, inputs, (kernels, arrays) => {
			kernels.multiply(at(arrays, 0), at(arrays, 1), at(arrays, 2), n);
			kernels.symmetrise(at(arrays, 2), n);
			kernels.addScaled(at(arrays, 0), -0.3, at(arrays, 1));
			kernels.mirror(at(arrays, 0), n, 'lower');
			kernels.mirror(at(arrays, 1), n, 'upper');
		});
		expectSame(n, inputs, (kernels, arrays) => kernels.dot(at(arrays, 0), at(arrays, 1)));
	});

	test.each(SIZES)('products with vectors, n = %i', (n) => {
		const vectors = [0, 1, 2].map((i) => randomMatrix(n, i));
		expectSame(n, [symmetricMatrix(n, n), ...vectors], (kernels, arrays) => {
			kernels.subtractProduct(at(arrays, 0), at(arrays, 1), at(arrays, 2), at(arrays, 3), n);
		});
	});

	test.each(SIZES)('the largest step, n = %i', (n) => {
		const inputs = [positiveMatrix(n, n), new Float64Array(n * n), symmetricMatrix(n, n + 1)];
		expectSame(n, inputs, (kernels, arrays) => {
			const matrix = at(arrays, 0).slice();
			kernels.factorCholesky(at(arrays, 0), n);
			kernels.invertFactor(at(arrays, 0), n, at(arrays, 1));
			const scratch = kernels.doubles(stepScratch(n));
			const step = kernels.largestStep(at(arrays, 1), at(arrays, 2), scratch, n);
			expectLargest(kernels, matrix, at(arrays, 2), n, step);
			return Math.min(step, 1e3) / 1e3;
		});
	});

	test.each([1, 2, 3, 5, 8, 13, 27, 30])('the Schur complement, n = %i', (n) => {
		const random = seededRandom(n);
		const count = Math.max(1, Math.floor((n * n) / 5));
		const index = new Int32Array(n * n);
		for (let row = 0, cell = 0; row < n; row++)
			for (let column = 0; column <= row; column++, cell++) {
				const matrix = cell < count ? cell + 1 : random.integer(count + 2) - 1;
				index[row * n + column] = index[column * n + row] = matrix;
			}
		const inputs = [symmetricMatrix(n, 1), symmetricMatrix(n, 2), new Float64Array(count ** 2)];
		expectSame(n, inputs, (kernels, arrays) => {
			const supports = layOutSupports(index, n, count, (length) => kernels.integers(length));
			kernels.buildSchur(supports, at(arrays, 0), at(arrays, 1), at(arrays, 2), () => undefined);
			expectDefinition(index, n, count, supports.order, arrays);
		});
	});

	test.each([5, 40, 100, 300])('refusing an indefinite matrix, n = %i', (n) => {
		for (const kernels of both(n)) {
			const a = kernels.doubles(n * n);
			a.set(positiveMatrix(n, n));
			a[n * n - 1] = -1;
			expect(kernels.factorCholesky(a, n)).toBe(false);
			a.set(positiveMatrix(n, n));
			a[0] = NaN;
			expect(kernels.factorCholesky(a, n)).toBe(false);
			kernels.release();
		}
	});
});

/** The matrix is still positive some per cent before the step, and no longer some after it. */
function expectLargest(
	kernels: Kernels,
	matrix: Float64Array,
	direction: Float64Array,
	n: number,
	step: number
): void {
	const positiveAfter = (length: number) => {
		const moved = kernels.doubles(n * n);
		moved.forEach((_, i) => (moved[i] = (matrix[i] ?? 0) + length * (direction[i] ?? 0)));
		return kernels.factorCholesky(moved, n);
	};
	if (step === Infinity) expect(positiveAfter(1e6)).toBe(true);
	else expect([positiveAfter(0.95 * step), positiveAfter(1.05 * step)]).toEqual([true, false]);
}

/** M_ij = <F_i, X F_j W> summed cell by cell, symmetrised as F_i allows. */
function expectDefinition(
	index: Int32Array,
	n: number,
	count: number,
	order: Int32Array,
	[x, w, matrix]: readonly Float64Array[]
): void {
	const cells = Array.from({ length: count + 1 }, (): number[] => []);
	index.forEach((number, cell) => number > 0 && cells[number]?.push(cell));
	const expected = new Float64Array(count ** 2);
	const found = new Float64Array(count ** 2);
	order.forEach((i, rank) => {
		for (let other = 0; other <= rank; other++) {
			let sum = 0;
			for (const a of cells[i] ?? [])
				for (const b of cells[order[other] ?? 0] ?? []) {
					const [row, column] = [Math.floor(a / n), a % n];
					const [left, right] = [Math.floor(b / n), b % n];
					sum += (x?.[left * n + row] ?? NaN) * (w?.[column * n + right] ?? NaN);
				}
			expected[rank * count + other] = sum;
			found[rank * count + other] = matrix?.[rank * count + other] ?? NaN;
		}
	});
	expect(distance(found, expected)).toBeLessThan(TOLERANCE);
}

describe('the memory', () => {
	const demand = { doubles: 100, arrays: 4, order: 8 };

	test('is zeroed when it is used again', () => {
		const first = makeKernels(demand, 'wasm');
		first.doubles(50).fill(3);
		first.release();
		const second = makeKernels(demand, 'wasm');
		expect(second.doubles(50).every((value) => value === 0)).toBe(true);
	});

	test('is never given to two users at a time', () => {
		const first = makeKernels(demand, 'wasm').doubles(10);
		const second = makeKernels(demand, 'wasm').doubles(10);
		second.fill(1);
		expect(first.every((value) => value === 0)).toBe(true);
	});

	test('refuses more than was promised, and arrays from elsewhere', () => {
		const kernels = makeKernels(demand, 'wasm');
		expect(() => kernels.doubles(1e6)).toThrow('promised');
		expect(() => kernels.dot(new Float64Array(3), kernels.doubles(3))).toThrow('not one of');
	});

	test('of a large factorisation is polled, and left in the middle when told to', () => {
		const n = 700;
		const kernels = makeKernels({ doubles: n * n, arrays: 1, order: n }, 'wasm');
		const a = kernels.doubles(n * n);
		a.set(positiveMatrix(n, 1));
		let polls = 0;
		kernels.factorCholesky(a, n, () => polls++);
		expect(polls).toBeGreaterThan(5);
		const stop = () => {
			throw new Error('stopped');
		};
		expect(() => kernels.factorCholesky(a, n, stop)).toThrow('stopped');
	});
});

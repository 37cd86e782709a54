import { describe, expect, it } from 'vitest';
import { ascend, type Landscape } from './limited-memory-ascent';

function plain(
	slope: Landscape<Float64Array>['slope']
): Landscape<Float64Array> & { calls: number } {
	const landscape = {
		calls: 0,
		slope: (point: Float64Array) => {
			landscape.calls++;
			return slope(point);
		},
		move: (point: Float64Array, by: Float64Array) => point.map((x, i) => x + (by[i] ?? 0)),
		poll: () => undefined
	};
	return landscape;
}

describe('ascend', () => {
	it("finds the top of Rosenbrock's valley turned over, at (1, 1)", () => {
		// Rosenbrock, Comput. J. 3, 175 (1960), the usual start (-1.2, 1)
		const landscape = plain(([x = 0, y = 0]) => ({
			value: -((1 - x) ** 2) - 100 * (y - x * x) ** 2,
			gradient: Float64Array.of(2 * (1 - x) + 400 * x * (y - x * x), -200 * (y - x * x))
		}));
		const options = { iterations: 200, tolerance: 1e-10 };
		const { point, value } = ascend(Float64Array.of(-1.2, 1), landscape, options);
		expect(point[0]).toBeCloseTo(1, 8);
		expect(point[1]).toBeCloseTo(1, 8);
		expect(value).toBeGreaterThan(-1e-15);
		expect(landscape.calls).toBeLessThan(120);
	});

	it('solves an ill-conditioned quadratic, never falling', () => {
		let last = -Infinity;
		const weights = Float64Array.from({ length: 12 }, (_, i) => 10 ** (i / 2));
		const landscape = plain((point) => ({
			value: -point.reduce((sum, x, i) => sum + ((weights[i] ?? 0) * (x - i) ** 2) / 2, 0),
			gradient: point.map((x, i) => -(weights[i] ?? 0) * (x - i))
		}));
		let point: Float64Array = new Float64Array(12);
		for (let part = 0; part < 3; part++) {
			const reached = ascend(point, landscape, { iterations: 200, tolerance: 1e-9 });
			expect(reached.value).toBeGreaterThanOrEqual(last);
			last = reached.value;
			({ point } = reached);
		}
		point.forEach((x, i) => expect(x).toBeCloseTo(i, 6));
	});

	it('stays where the slope is 0, and stops when the poll throws', () => {
		const flat = plain((point) => ({ value: 1, gradient: new Float64Array(point.length) }));
		const start = Float64Array.of(3, 4);
		expect(ascend(start, flat, { iterations: 10, tolerance: 0 }).point).toBe(start);
		const stopped = {
			...plain((point) => ({ value: point[0] ?? 0, gradient: Float64Array.of(1) })),
			poll: () => {
				throw new Error('enough');
			}
		};
		expect(() => ascend(Float64Array.of(0), stopped, { iterations: 10, tolerance: 0 })).toThrow(
			'enough'
		);
	});
});

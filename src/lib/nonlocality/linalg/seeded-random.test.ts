import { describe, expect, it } from 'vitest';
import { seededRandom } from './seeded-random';

describe('seededRandom', () => {
	it('repeats with its seed and differs with the stream', () => {
		const draw = (seed: number, stream: number) => {
			const random = seededRandom(seed, stream);
			return Array.from({ length: 5 }, () => random.uniform());
		};
		expect(draw(7, 3)).toEqual(draw(7, 3));
		expect(draw(7, 3)).not.toEqual(draw(7, 4));
		expect(draw(7, 3)).not.toEqual(draw(8, 3));
	});

	it('has the moments of the uniform and the normal distribution', () => {
		const random = seededRandom(1);
		const count = 40_000;
		let [mean, square, fourth, uniform] = [0, 0, 0, 0];
		for (let i = 0; i < count; i++) {
			const x = random.normal();
			mean += x / count;
			square += x ** 2 / count;
			fourth += x ** 4 / count;
			const u = random.uniform();
			expect(u >= 0 && u < 1).toBe(true);
			uniform += u / count;
		}
		// five standard errors of each average
		expect(Math.abs(mean)).toBeLessThan(0.025);
		expect(Math.abs(square - 1)).toBeLessThan(0.036);
		expect(Math.abs(fourth - 3)).toBeLessThan(0.25);
		expect(Math.abs(uniform - 0.5)).toBeLessThan(0.0073);
	});
});

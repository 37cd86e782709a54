import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { squaredNorm } from '../linalg/complex-dense';
import { seededRandom } from '../linalg/seeded-random';
import { familyFunctional, type FamilySpec } from '../scenario/families';
import { arrangeForSeeSaw } from './see-saw-functional';
import { formValue, tidyStrategy } from './see-saw-guarantee';
import { randomStrategy, type SeeSawStrategy } from './see-saw-strategy';
import { evaluateStrategy } from './strategy-evaluation';
import { movedStrategy, strategyGradient, valuesOf } from './strategy-slope';

/** Step of the differences: their error is about its square. */
const STEP = 1e-5;

const specs: readonly (readonly [FamilySpec, readonly number[]])[] = [
	[{ name: 'chsh' }, [2, 3]],
	[{ name: 'cglmp', d: 3 }, [2, 3]],
	[{ name: 'mermin', n: 3 }, [2, 2, 2]]
];
const cases = fc.record({
	at: fc.nat(specs.length - 1),
	real: fc.boolean(),
	general: fc.boolean(),
	seed: fc.nat(1000)
});

function setUp({
	at,
	real,
	general,
	seed
}: {
	at: number;
	real: boolean;
	general: boolean;
	seed: number;
}) {
	const [spec, dimensions] = specs[at] ?? [{ name: 'chsh' }, [2, 2]];
	const g = familyFunctional(spec);
	const random = seededRandom(seed);
	const strategy = randomStrategy(g.scenario.outputs, dimensions, { real, general }, random);
	return { g, functionals: [arrangeForSeeSaw(g)], strategy, random };
}

describe('strategyGradient', () => {
	it('agrees with central differences along random tangents', () => {
		fc.assert(
			fc.property(cases, (given) => {
				const { functionals, strategy, random } = setUp(given);
				const valueOf = (s: SeeSawStrategy) => valuesOf(functionals, s).values[0] ?? NaN;
				const values = valuesOf(functionals, strategy);
				const gradient = strategyGradient(functionals, [1], strategy, values, () => undefined);
				// the gradient of other weights is a tangent, and so is its sum with this one
				const other = setUp({ ...given, seed: given.seed + 1 });
				const turn = strategyGradient(
					functionals,
					[1],
					other.strategy,
					valuesOf(functionals, other.strategy),
					() => undefined
				);
				const { re, im } = strategy.state;
				const share = random.normal();
				const tangent = gradient.map((entry, i) =>
					i < re.length + (im?.length ?? 0) ? entry : entry + share * (turn[i] ?? 0)
				);
				const slope = tangent.reduce((sum, entry, i) => sum + entry * (gradient[i] ?? 0), 0);
				const ahead = valueOf(
					movedStrategy(
						strategy,
						tangent.map((x) => STEP * x)
					)
				);
				const behind = valueOf(
					movedStrategy(
						strategy,
						tangent.map((x) => -STEP * x)
					)
				);
				const tolerance = 1e-6 * (1 + tangent.reduce((sum, x) => sum + x * x, 0) ** 1.5);
				expect(Math.abs((ahead - behind) / (2 * STEP) - slope)).toBeLessThan(tolerance);
			}),
			{ numRuns: 60 }
		);
	});
});

describe('movedStrategy', () => {
	it('reaches strategies, whatever the step', () => {
		fc.assert(
			fc.property(cases, fc.double({ min: -3, max: 3, noNaN: true }), (given, step) => {
				const { g, functionals, strategy } = setUp(given);
				const values = valuesOf(functionals, strategy);
				const gradient = strategyGradient(functionals, [1], strategy, values, () => undefined);
				const moved = movedStrategy(
					strategy,
					gradient.map((x) => step * x)
				);
				expect(squaredNorm(moved.state)).toBeCloseTo(1, 12);
				const value = valuesOf(functionals, moved).values[0] ?? NaN;
				tidyStrategy(moved);
				expect(formValue(g, evaluateStrategy(moved)).value).toBeCloseTo(value, 10);
			}),
			{ numRuns: 60 }
		);
	});
});

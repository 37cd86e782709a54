import { afterEach, describe, expect, test } from 'vitest';
import { npaProblem, PATIENT } from '../../../../tests/factories/npa-problem';
import { forceKernels } from '../linalg/kernels/kernels';
import { seededRandom } from '../linalg/seeded-random';
import { SolverStop, type Level, type ProblemOf, type ProblemTerm } from '../problem';
import { familyFunctional, type FamilySpec } from '../scenario/families';
import { functionalToMaximise } from '../scenario/problem-functional';
import { npaBound } from './npa-bound';

/** Two guaranteed bounds on the same optimum, each at most so far from it. */
const GUARANTEED = 3e-9;

const CASES: readonly (readonly [FamilySpec, Level])[] = [
	[{ name: 'chsh' }, 1],
	[{ name: 'chsh' }, 3],
	[{ name: 'tilted-chsh', alpha: '0.7' }, 2],
	[{ name: 'chained', n: 4 }, '1+AB'],
	[{ name: 'i3322' }, 1],
	[{ name: 'i3322' }, '1+AB'],
	[{ name: 'i3322' }, 2],
	[{ name: 'cglmp', d: 3 }, '1+AB'],
	[{ name: 'cglmp', d: 4 }, '1+AB'],
	[{ name: 'elegant' }, 1],
	[{ name: 'mermin', n: 3 }, 2],
	[{ name: 'gyni', n: 3 }, { perParty: 1 }]
];

function boundWith(kind: 'wasm' | 'plain', problem: ProblemOf<'npa'>, control = PATIENT) {
	forceKernels(kind);
	return npaBound(problem, functionalToMaximise(problem), control);
}

function expectSameBounds(problem: ProblemOf<'npa'>): void {
	const [wasm, plain] = [boundWith('wasm', problem), boundWith('plain', problem)];
	const scale = Math.max(1, ...problem.terms.map(([value]) => Math.abs(Number(value) || 0)));
	for (const side of ['lower', 'upper'] as const)
		expect(Math.abs((wasm[side] ?? NaN) - (plain[side] ?? NaN))).toBeLessThan(GUARANTEED * scale);
}

afterEach(() => forceKernels(null));

describe('the guaranteed bounds of both kinds of kernels', () => {
	test.each(CASES)('meet: %o at level %o', (family, level) => {
		expectSameBounds(npaProblem(familyFunctional(family), level));
	});

	test('meet with probabilities imposed', () => {
		expectSameBounds(npaProblem({ name: 'cglmp', d: 3 }, 1, { nonNegative: true }));
	});

	test.each([1, 2, 3])('meet for a random functional, seed %i', (seed) => {
		const random = seededRandom(seed);
		const matrix = [0, 1, 2].map(() => [0, 1, 2].map(() => Math.round(100 * random.normal())));
		expectSameBounds(npaProblem(familyFunctional({ name: 'xor-game', matrix }), '1+AB'));
	});
});

/** A coefficient on every probability of the first outputs and its marginals: no symmetry. */
function withoutSymmetry(): ProblemOf<'npa'> {
	const random = seededRandom(1);
	const inputs = [0, 1, 2, 3];
	const coefficient = () => random.normal().toFixed(3);
	const terms: ProblemTerm[] = inputs.flatMap((x): ProblemTerm[] => [
		[coefficient(), [[0, x, 0]]],
		[coefficient(), [[1, x, 0]]],
		...inputs.map((y): ProblemTerm => [
			coefficient(),
			[
				[0, x, 0],
				[1, y, 0]
			]
		])
	]);
	return npaProblem({ name: 'chained', n: 4 }, 2, { terms });
}

/** Milliseconds of this process's processor time: what others run meanwhile does not count. */
function processorTime(): number {
	const { user, system } = process.cpuUsage();
	return (user + system) / 1000;
}

describe('a solver', () => {
	test.each(['wasm', 'plain'] as const)('asks within 100 ms of work, %s kernels', (kind) => {
		const problem = withoutSymmetry();
		let longest = 0;
		let polls = 0;
		let last = processorTime();
		const control = {
			...PATIENT,
			shouldStop: () => {
				const now = processorTime();
				longest = Math.max(longest, now - last);
				last = now;
				return ++polls === 100;
			}
		};
		expect(() => boundWith(kind, problem, control)).toThrow(SolverStop);
		expect(polls).toBe(100);
		expect(longest).toBeLessThan(100);
	});
});

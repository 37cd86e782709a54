import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { PATIENT, npaProblem } from '../../../../tests/factories/npa-problem';
import { randomFunctional, randomRelabelling } from '../../../../tests/factories/random-functional';
import { lehmer } from '../../../../tests/factories/solver-problem';
import { verifyResult } from '../certificates/verify';
import { checkMomentCertificate } from '../certificates/check-moments';
import type { Level, ProblemConstraint, ProblemOf } from '../problem';
import type { FamilySpec } from '../scenario/families';
import { makeFunctional, type Functional } from '../scenario/functional';
import { functionalToMaximise } from '../scenario/problem-functional';
import { relabelFunctional } from '../scenario/relabelling';
import { symmetryGroup } from '../scenario/symmetry-group';
import { MomentBoundSearch } from './moment-bound-search';
import { makeMomentProblem } from './moment-problem';
import { npaBound } from './npa-bound';
import { plainRoute } from './plain-route';
import { reducedRoute } from './reduced-route';
import { solve } from './solve';
import { SymmetryReduction } from './symmetry-reduction';

/** What two routes may differ by, relative to the largest coefficient: each proves its own sides. */
const AGREEMENT = 3e-9;
const idle = () => undefined;

/** Both routes on one problem, whatever would be predicted to be faster. */
function bothRoutes(problem: ProblemOf<'npa'>) {
	const g = functionalToMaximise(problem);
	const relaxation = makeMomentProblem(problem, g);
	const reduction = SymmetryReduction.of(
		relaxation,
		symmetryGroup(g).elementsOfSubgroup(200),
		idle
	);
	if (!reduction) throw new Error('no reduction');
	const scale = Math.max(1, ...relaxation.programme.objective.subarray(1).map(Math.abs));
	const sides = [reducedRoute(reduction), plainRoute(relaxation)].map((route) => {
		const search = new MomentBoundSearch(relaxation, PATIENT, Infinity);
		search.run(route);
		const certificate = search.certificate();
		if (!certificate) throw new Error('no certificate');
		const check = checkMomentCertificate(problem, g, certificate);
		if (!check.checked) throw new Error(check.reason);
		expect(check.upper).toBeLessThanOrEqual(search.upper);
		return { upper: search.upper, lower: search.lower ?? NaN };
	});
	const [reduced, plain] = sides;
	if (!reduced || !plain) throw new Error('a route is missing');
	return { reduced, plain, scale, reduction };
}

const FAMILIES: [FamilySpec, Level, boolean, number][] = [
	[{ name: 'chsh' }, 1, false, AGREEMENT],
	[{ name: 'chsh' }, '1+AB', false, AGREEMENT],
	[{ name: 'i3322' }, 2, false, AGREEMENT],
	[{ name: 'cglmp', d: 3 }, 1, true, AGREEMENT],
	[{ name: 'cglmp', d: 4 }, 1, true, AGREEMENT],
	[{ name: 'cglmp', d: 3 }, '1+AB', false, AGREEMENT],
	[{ name: 'cglmp', d: 4 }, '1+AB', false, AGREEMENT],
	[{ name: 'elegant' }, '1+AB', false, AGREEMENT],
	[{ name: 'chained', n: 4 }, '1+AB', false, AGREEMENT],
	[{ name: 'tilted-chsh', alpha: 'sqrt(2)' }, '1+AB', false, AGREEMENT],
	[{ name: 'magic-square' }, 1, false, AGREEMENT],
	[{ name: 'gyni', n: 3 }, { perParty: 1 }, false, AGREEMENT],
	[{ name: 'svetlichny', n: 3 }, { perParty: 1 }, false, AGREEMENT],
	// Its optimal moments are far from unique: both routes end where rounding does.
	[{ name: 'mermin', n: 3 }, { perParty: 1 }, false, 1e-8]
];

test.each(FAMILIES)(
	'%j at level %j: the same bound on both routes',
	(spec, level, nonNegative, tolerance) => {
		const { reduced, plain, scale } = bothRoutes(npaProblem(spec, level, { nonNegative }));
		expect(Math.abs(reduced.upper - plain.upper)).toBeLessThan(tolerance * scale);
		expect(reduced.upper).toBeGreaterThanOrEqual(plain.lower);
		expect(plain.upper).toBeGreaterThanOrEqual(reduced.lower);
	}
);

test('rows that say nothing of the invariant moments are left out, and lifted as zeros', () => {
	// Every outcome of CHSH is an image of every other: their mean is 1/2, below 3/4.
	const constraints = [0, 1].flatMap((p) =>
		[0, 1].flatMap((x) =>
			[0, 1].map((a): ProblemConstraint => ({
				terms: [['1', [[p, x, a]]]],
				relation: '<=',
				value: '3/4'
			}))
		)
	);
	const { reduced, plain } = bothRoutes(npaProblem({ name: 'chsh' }, '1+AB', { constraints }));
	// Cirel'son, Lett. Math. Phys. 4, 93 (1980)
	expect(Math.abs(reduced.upper - 2 * Math.SQRT2)).toBeLessThan(AGREEMENT * 4);
	expect(Math.abs(reduced.upper - plain.upper)).toBeLessThan(AGREEMENT * 4);
});

/** The sum of a functional's images under all products of one random relabelling. */
function symmetrised(f: Functional, seed: number): Functional {
	const any = randomRelabelling(f, lehmer(seed));
	const alike = new Set(f.scenario.outputs.flat()).size === 1;
	// Inputs with different numbers of outputs stay where they are; the parties are alike.
	const inputs = alike ? any.inputs : f.scenario.outputs.map((counts) => [...counts.keys()]);
	const relabelling = { ...any, inputs };
	const terms = [...f.terms];
	const shown = (g: Functional) =>
		JSON.stringify(g.terms.map((t) => [t.events, t.coefficient.text]));
	for (let image = relabelFunctional(f, relabelling); shown(image) !== shown(f);) {
		terms.push(...image.terms);
		image = relabelFunctional(image, relabelling);
	}
	return makeFunctional(f.scenario, terms);
}

const SHAPES: [number[][], Level][] = [
	[
		[
			[2, 2, 2],
			[2, 2, 2]
		],
		'1+AB'
	],
	[
		[
			[3, 3],
			[3, 3]
		],
		'1+AB'
	],
	[
		[
			[2, 3],
			[2, 3]
		],
		2
	],
	[
		[
			[4, 2],
			[4, 2]
		],
		1
	],
	[
		[
			[2, 2],
			[2, 2],
			[2, 2]
		],
		{ perParty: 1 }
	]
];

test('random functionals with a random symmetry: the same bound on both routes', () => {
	fc.assert(
		fc.property(
			fc.nat(),
			fc.constantFrom(...SHAPES),
			fc.boolean(),
			(seed, [outputs, level], nonNegative) => {
				const f = symmetrised(randomFunctional(outputs, 5, lehmer(seed)), seed + 1);
				const { reduced, plain, scale } = bothRoutes(npaProblem(f, level, { nonNegative }));
				expect(Math.abs(reduced.upper - plain.upper)).toBeLessThan(AGREEMENT * scale);
				expect(reduced.upper).toBeGreaterThanOrEqual(plain.lower);
				expect(plain.upper).toBeGreaterThanOrEqual(reduced.lower);
			}
		),
		{ numRuns: 25 }
	);
}, 60_000);

// The number of invariant moments is fixed by the group: the trace of its mean on all moments.
test.each<[FamilySpec, Level, number]>([
	[{ name: 'chsh' }, '1+AB', 2],
	[{ name: 'i3322' }, 2, 23],
	[{ name: 'cglmp', d: 3 }, '1+AB', 8],
	[{ name: 'cglmp', d: 4 }, '1+AB', 17]
])('%j at level %j has %i invariant moments', (spec, level, count) => {
	const { reduction } = bothRoutes(npaProblem(spec, level));
	expect(reduction.programme.unknowns).toBe(count);
	const rows = reduction.programme.sizes.map(
		(size, b) => size * (reduction.programme.weights[b] ?? 0)
	);
	expect(rows.reduce((a, b) => a + b)).toBe(
		npaBound(npaProblem(spec, level), functionalToMaximise(npaProblem(spec, level)), PATIENT)
			.method['size']
	);
});

describe('the route that npaBound takes', () => {
	const bound = (problem: ProblemOf<'npa'>) =>
		npaBound(problem, functionalToMaximise(problem), PATIENT);

	test('says the order of the group and the blocks, and verifies', async () => {
		const problem = npaProblem({ name: 'cglmp', d: 4 }, '1+AB');
		const result = await solve(problem, PATIENT);
		expect(result.method).toMatchObject({
			symmetry: 32,
			size: 49,
			moments: 336,
			invariantMoments: 17
		});
		expect(result.method['blocks']).toEqual([4, 3, 3, 3, 3, 3, 3, 3, 3]);
		expect(verifyResult(result).checked).toBe(true);
	});
	test('is the same the second time, from what was prepared', () => {
		const problem = npaProblem({ name: 'cglmp', d: 4 }, '1+AB');
		expect(bound(problem)).toEqual(bound(problem));
	});
	test('is the plain one without symmetry, with equalities, and for what is small', () => {
		const f = randomFunctional(
			[
				[2, 2, 2],
				[2, 2, 2]
			],
			9,
			lehmer(1)
		);
		const equality: ProblemConstraint = {
			terms: [['1', [[0, 0, 0]]]],
			relation: '=',
			value: '1/2'
		};
		for (const problem of [
			npaProblem(f, 2),
			npaProblem({ name: 'i3322' }, 2, { constraints: [equality] }),
			npaProblem({ name: 'chsh' }, 1)
		])
			expect(bound(problem).method['symmetry']).toBe(undefined);
	});
	test('follows the symmetries that a constraint leaves', () => {
		// I3322 is symmetric under exchange of the parties: a constraint on one of them is not.
		const onOne: ProblemConstraint = { terms: [['1', [[0, 0, 0]]]], relation: '<=', value: '1/4' };
		const onBoth: ProblemConstraint[] = [onOne, { ...onOne, terms: [['1', [[1, 0, 0]]]] }];
		const chsh = { name: 'chained', n: 4 };
		const [alone, both] = [[onOne], onBoth].map((constraints) =>
			bound(npaProblem(chsh, '1+AB', { constraints }))
		);
		expect(alone?.method['symmetry']).toBe(undefined);
		expect((both?.upper ?? NaN) <= (alone?.upper ?? NaN) + 1e-8).toBe(true);
	});
	test('refuses too many moments only where no symmetry helps', () => {
		const problem = npaProblem({ name: 'chained', n: 13 }, '1+AB');
		expect(bound(problem).method['moments']).toBeGreaterThan(6000);
	});
	test('I3322 at level 4, which has 4,491 moments', () => {
		// Best known quantum value 0.250875384514: Pal, Vertesi, Phys. Rev. A 82, 022116 (2010).
		const { upper, method } = bound(npaProblem({ name: 'i3322' }, 4));
		expect(method).toMatchObject({ size: 244, moments: 4491, symmetry: 8, invariantMoments: 593 });
		expect(upper).toBeGreaterThan(0.250875384514);
		expect(upper).toBeLessThan(0.25087541);
	}, 60_000);
	test('a level that is not closed under relabelling is solved as it stands', () => {
		const problem = npaProblem({ name: 'i3322' }, { products: ['A', 'AB', 'B', 'ABA', 'BAB'] });
		expect(bound(problem).upper).toBeLessThan(0.251471);
	});
});

import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import degenerate from '../../../../tests/vectors/degenerate-moment-problems.json';
import vectors from '../../../../tests/vectors/vectors.json';
import { PATIENT, npaProblem } from '../../../../tests/factories/npa-problem';
import { checkExactMoments } from '../certificates/check-exact-moments';
import { checkMomentCertificate } from '../certificates/check-moments';
import { exactCoefficient } from '../exact/coefficient';
import { ratio } from '../exact/rational';
import { SolverStop, type Level, type ProblemConstraint, type ProblemOf } from '../problem';
import { familyFunctional } from '../scenario/families';
import { makeFunctional, scaleFunctional, type Functional } from '../scenario/functional';
import { functionalToMaximise } from '../scenario/problem-functional';
import { npaBound } from './npa-bound';

/** Solves, checks the certificate with the separate code, and returns the checked sides. */
function solveChecked(problem: ProblemOf<'npa'>) {
	const g = functionalToMaximise(problem);
	const outcome = npaBound(problem, g, PATIENT);
	const { certificate } = outcome;
	if (certificate?.kind !== 'npa-dual' && certificate?.kind !== 'npa-exact')
		throw new Error('no certificate');
	const check =
		certificate.kind === 'npa-exact'
			? checkExactMoments(problem, g, certificate)
			: checkMomentCertificate(problem, g, certificate);
	if (!check.checked) throw new Error(check.reason);
	expect(check.upper).toBeLessThanOrEqual(outcome.upper ?? NaN);
	if (outcome.lower !== null) expect(check.lower).toBeGreaterThanOrEqual(outcome.lower);
	return { ...outcome, lower: outcome.lower ?? NaN, upper: outcome.upper ?? NaN };
}

/** What one solve may leave open; the aim is 3e-9, three parties at full correlation are harder. */
const GAP = 5e-8;

interface Expected {
	readonly name: string;
	readonly problem: ProblemOf<'npa'>;
	readonly value: number;
	readonly tolerance: number;
	readonly source: string;
}

/** Values and sources stand in tests/vectors/vectors.json. */
function fromVectors(): Expected[] {
	return vectors.flatMap((vector) => {
		const { problem, expect: expected } = vector;
		if (problem.quantity !== 'npa' || problem.constraints || !problem.family) return [];
		if (vector.id === 'cglmp.5.npa1ab' || vector.id === 'i3322.npa3') return []; // below, timed
		return [
			{
				name: vector.id,
				problem: npaProblem(problem.family, problem.level as Level, {
					nonNegative: problem.nonNegative ?? false
				}),
				value: expected.upper ?? NaN,
				tolerance: vector.tolerance,
				source: vector.source
			}
		];
	});
}

/** Quantum maxima that a level is known to reach. */
const REACHED: Expected[] = [
	{
		name: 'elegant, level 1',
		problem: npaProblem({ name: 'elegant' }, 1),
		value: 4 * Math.sqrt(3),
		tolerance: 1e-7,
		source: 'Gisin, arXiv:quant-ph/0702021 (2007), from memory; correlators only: level 1 is exact'
	},
	...[3, 4, 6].map((n) => ({
		name: `chained n=${n}, level 1`,
		problem: npaProblem({ name: 'chained', n }, 1),
		value: 2 * n * Math.cos(Math.PI / (2 * n)),
		tolerance: 1e-7,
		source: 'Wehner, Phys. Rev. A 73, 022110 (2006); formula from memory'
	})),
	...[0.5, 1, 1.5].map((alpha) => ({
		name: `tilted CHSH alpha=${alpha}, level 1+AB`,
		problem: npaProblem({ name: 'tilted-chsh', alpha }, '1+AB'),
		value: Math.sqrt(8 + 2 * alpha * alpha),
		tolerance: 1e-7,
		source: 'Acin, Massar, Pironio, Phys. Rev. Lett. 108, 100402 (2012)'
	}))
];

describe('published values', () => {
	const cases = [...fromVectors(), ...REACHED];
	test('there are enough of them', () => expect(cases.length).toBeGreaterThanOrEqual(22));
	test.each(cases)('$name', ({ problem, value, tolerance }) => {
		const { lower, upper, optimum } = solveChecked(problem);
		expect(upper).toBeGreaterThan(value - tolerance);
		expect(lower).toBeLessThan(value + tolerance);
		expect(Math.abs((optimum ?? NaN) - value)).toBeLessThan(tolerance);
		expect(lower).toBeLessThanOrEqual(upper);
		expect(upper - lower).toBeLessThan(GAP);
	});
	test('I3322 at level 3', () => {
		// Pal, Vertesi, Phys. Rev. A 79, 022120 (2009): 0.25087556.
		const { lower, upper } = solveChecked(npaProblem({ name: 'i3322' }, 3));
		expect(upper).toBeGreaterThan(0.250875384514); // best known quantum value, arXiv:1006.3032
		expect(Math.abs(upper - 0.25087556)).toBeLessThan(1e-8);
		expect(upper - lower).toBeLessThan(5e-9);
	}, 60_000);
});

describe('the answer moves as it must', () => {
	const i3322 = familyFunctional({ name: 'i3322' });
	const value = (f: Functional, level: Level = '1+AB') => solveChecked(npaProblem(f, level));
	const close = (a: number, b: number, tolerance = 1e-8) =>
		expect(Math.abs(a - b)).toBeLessThan(tolerance);
	const plain = value(i3322);

	test('scaling', () => {
		const scaled = scaleFunctional(i3322, exactCoefficient(ratio(1000n, 7n)));
		close(value(scaled).upper, (plain.upper * 1000) / 7, 1e-6);
	});
	test('a constant', () => {
		const constant = { coefficient: exactCoefficient(ratio(-10n, 3n)), events: [] };
		const shifted = makeFunctional(i3322.scenario, [...i3322.terms, constant]);
		close(value(shifted).upper, plain.upper - 10 / 3);
	});
	test('outputs, inputs and parties renamed', () => {
		const renamed = makeFunctional(
			i3322.scenario,
			i3322.terms.map(({ coefficient, events }) => ({
				coefficient,
				events: events.map(
					([party, input, output]) =>
						[1 - party, (input + party + 1) % 3, input === 1 ? 1 - output : output] as const
				)
			}))
		);
		close(value(renamed).upper, plain.upper);
	});
	test('an unused input and an unused output', () => {
		const wider = makeFunctional(
			{
				outputs: [
					[2, 2, 2, 2],
					[2, 2, 2]
				]
			},
			i3322.terms
		);
		close(value(wider).upper, plain.upper);
	});
	test('the minimum is minus the maximum of the negative', () => {
		const negative = scaleFunctional(i3322, exactCoefficient(ratio(-1n)));
		const minimum = solveChecked(npaProblem(negative, '1+AB', { sense: 'min' }));
		close(minimum.upper, plain.upper); // both maximise the same g
	});
	test('levels only tighten', () => {
		const uppers = ([1, '1+AB', 2] as const).map((level) => value(i3322, level));
		expect(uppers[1]?.upper).toBeLessThan(uppers[0]?.lower ?? NaN);
		expect(uppers[2]?.upper).toBeLessThan(uppers[1]?.lower ?? NaN);
	});
	test('a list of products is the level that it spells', () => {
		close(value(i3322, { products: ['A', 'B', 'AB'] }).upper, plain.upper);
		close(value(i3322, { perParty: 1 }).upper, plain.upper);
	});
	test('non-negative probabilities change nothing once they are implied', () => {
		const imposed = solveChecked(npaProblem(i3322, '1+AB', { nonNegative: true }));
		expect(imposed.method['rows']).toBe(0);
		close(imposed.upper, plain.upper);
	});
	test('a constant functional', () => {
		const constant = makeFunctional(i3322.scenario, [
			{ coefficient: exactCoefficient(ratio(1n, 3n)), events: [] }
		]);
		const { lower, upper } = value(constant, 1);
		close(lower, 1 / 3);
		close(upper, 1 / 3);
	});
});

describe('constraints on the behaviour', () => {
	const chsh = { name: 'chsh' };
	const marginal: ProblemConstraint['terms'] = [['1', [[0, 0, 0]]]];
	const hardy: ProblemConstraint[] = (
		[
			[0, 1, 0],
			[1, 0, 1],
			[1, 1, 2]
		] as const
	).map(([x, y, which]) => ({
		terms: [
			[
				'1',
				[
					[0, x, which === 1 ? 1 : 0],
					[1, y, which === 0 ? 1 : 0]
				]
			]
		],
		relation: '=',
		value: '0'
	}));

	test("Hardy's paradox, which has no strictly feasible point", () => {
		// (5 sqrt(5) - 11) / 2 in any dimension: Rabelo, Law, Scarani, Phys. Rev. Lett. 109, 180401
		// (2012), arXiv:1205.3280; from memory.
		const both = makeFunctional(
			{
				outputs: [
					[2, 2],
					[2, 2]
				]
			},
			[
				{
					coefficient: exactCoefficient(ratio(1n)),
					events: [
						[0, 0, 0],
						[1, 0, 0]
					]
				}
			]
		);
		const problem = npaProblem(both, '1+AB', { constraints: hardy });
		const outcome = npaBound(problem, functionalToMaximise(problem), PATIENT);
		const value = (5 * Math.sqrt(5) - 11) / 2;
		expect(outcome.upper).toBeGreaterThan(value);
		expect(outcome.upper).toBeLessThan(value + 2e-5);
		expect(outcome.lower).toBe(null);
		expect(outcome.guaranteed).toEqual({ lower: false, upper: true });
		expect(String(outcome.method['equalities'])).toMatch(/no lower side/);
		expect(solveChecked(problem).upper).toBe(outcome.upper);
	});
	test.each([
		['<=', '1/4'],
		['>=', '3/4']
	] as const)('P(0|0) %s %s: CHSH is sqrt(7)', (relation, value) => {
		// With marginal m the largest CHSH is sqrt(8 - 4 m^2), the dual of the tilted inequality's
		// sqrt(8 + 2 alpha^2) (Acin, Massar, Pironio 2012); m = 1/2 here.
		const problem = npaProblem(chsh, '1+AB', {
			constraints: [{ terms: marginal, relation, value }]
		});
		const { lower, upper } = solveChecked(problem);
		expect(upper).toBeGreaterThan(Math.sqrt(7));
		expect(lower).toBeLessThan(Math.sqrt(7));
		expect(upper - lower).toBeLessThan(1e-8);
	});
	test('an equality, and the same one twice', () => {
		const once: ProblemConstraint = { terms: marginal, relation: '=', value: '1/4' };
		const twice: ProblemConstraint = { ...once, terms: [['2', [[0, 0, 0]]]], value: '1/2' };
		for (const constraints of [[once], [once, twice]]) {
			const { upper } = solveChecked(npaProblem(chsh, '1+AB', { constraints }));
			expect(upper).toBeGreaterThan(Math.sqrt(7));
			expect(upper).toBeLessThan(Math.sqrt(7) + 1e-6);
		}
	});
	test.each([['>='], ['=']] as const)('P(0|0) %s 1.1 leaves nothing', (relation) => {
		const constraints: ProblemConstraint[] = [{ terms: marginal, relation, value: '1.1' }];
		expect(() => solveChecked(npaProblem(chsh, '1+AB', { constraints }))).toThrow(
			/satisfies the constraints/
		);
	});
	test('one that says nothing on the behaviour is refused', () => {
		const constraints: ProblemConstraint[] = [{ terms: [['1', []]], relation: '<=', value: '2' }];
		expect(() => solveChecked(npaProblem(chsh, 1, { constraints }))).toThrow(/constraint 0/);
	});
});

/** Random functionals with at most three parties, rational coefficients, all level shapes. */
const anyFunctional: fc.Arbitrary<Functional> = fc
	.array(fc.array(fc.integer({ min: 2, max: 3 }), { minLength: 1, maxLength: 2 }), {
		minLength: 1,
		maxLength: 3
	})
	.chain((outputs) => {
		const event = (party: number) =>
			fc.option(
				fc
					.nat((outputs[party]?.length ?? 1) - 1)
					.chain((input) =>
						fc
							.nat((outputs[party]?.[input] ?? 1) - 1)
							.map((output) => [party, input, output] as const)
					)
			);
		const term = fc
			.tuple(fc.integer({ min: -20, max: 20 }), ...outputs.map((_, party) => event(party)))
			.map(([numerator, ...events]) => ({
				coefficient: exactCoefficient(ratio(BigInt(numerator), 3n)),
				events: events.filter((found) => found !== null)
			}));
		return fc
			.array(term, { minLength: 1, maxLength: 12 })
			.map((terms) => makeFunctional({ outputs }, terms));
	});

/**
 * Relative to max(1, |value|). Nearly all random functionals end below 1e-9. Where the optimal
 * moments are far from unique, the linear system of the last iterations loses them to rounding: of
 * 20,000 random ones of two parties two ended between 1e-8 and 1.3e-8, of 2,700 of three parties
 * one at 7e-8 (85 rows, 216 of them probabilities).
 */
const ANY_GAP = 1e-7;
/** For those that once ended between 1e-8 and 2e-6, and now do as well as others. */
const DEGENERATE_GAP = 1e-8;

test('any functional: both sides are checked and close', () => {
	const level = fc.constantFrom<Level>({ perParty: 1 }, 2);
	fc.assert(
		fc.property(anyFunctional, level, fc.boolean(), (functional, chosen, nonNegative) => {
			const { lower, upper } = solveChecked(npaProblem(functional, chosen, { nonNegative }));
			expect(lower).toBeLessThanOrEqual(upper);
			expect(upper - lower).toBeLessThan(ANY_GAP * Math.max(1, Math.abs(upper)));
		}),
		{ numRuns: 40 }
	);
}, 60_000);

describe('optimal moments that are not unique', () => {
	// Found among 25,000 random problems as those whose bounds did not close. A JSON module's types
	// are wider than the format's.
	const cases = degenerate as unknown as readonly Partial<ProblemOf<'npa'>>[];
	test.each(cases.map((found, at) => [at, found] as const))('case %i', (_, found) => {
		const problem = npaProblem({ name: 'chsh' }, found.level ?? 2, found);
		const { lower, upper } = solveChecked(problem);
		expect(lower).toBeLessThanOrEqual(upper);
		expect(upper - lower).toBeLessThan(DEGENERATE_GAP * Math.max(1, Math.abs(upper)));
	});
});

describe('what is refused', () => {
	const solve = (problem: ProblemOf<'npa'>, control = PATIENT) =>
		npaBound(problem, functionalToMaximise(problem), control);
	test.each([
		['1+AB for three parties', { name: 'mermin', n: 3 }, '1+AB' as Level, /1 per party/],
		['a level that lacks a moment', { name: 'mermin', n: 3 }, 1, /level 2 or 1 per party/],
		['level 0', { name: 'chsh' }, 0, /at least 1/],
		['a product of nobody', { name: 'chsh' }, { products: ['AC'] }, /names a party/],
		['a list that is not closed', { name: 'chsh' }, { products: ['A', 'AABB'] }, /needs one of/]
	])('%s', (_, family, level, message) => {
		expect(() => solve(npaProblem(family, level))).toThrow(message);
	});
	test('a matrix past the limit, with the figure', () => {
		expect(() => solve(npaProblem({ name: 'i3322' }, 6))).toThrow(/rows; the limit is 600/);
	});
	test('cancelling', () => {
		const stopped = { ...PATIENT, shouldStop: () => true };
		expect(() => solve(npaProblem({ name: 'chsh' }, 1), stopped)).toThrow(SolverStop);
	});
	test('a spent budget still gives proved bounds', () => {
		let time = 0;
		const hurried = { ...PATIENT, now: () => (time += 10) };
		const outcome = solve(npaProblem({ name: 'i3322' }, 2, { seconds: 0.2 }), hurried);
		expect(outcome.method['ending']).toBe('budget');
		expect(outcome.upper).toBeGreaterThan(0.2509397);
		expect(outcome.guaranteed.upper).toBe(true);
	});
});

import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { COEFFICIENT_ONE, exactCoefficient, negateCoefficient } from '../exact/coefficient';
import { parseCoefficient } from '../exact/expression';
import { ratio, type Rational } from '../exact/rational';
import { enumerateStrategies } from '../quantities/enumerate-strategies';
import { strategyTensor } from '../quantities/strategy-tensor';
import {
	randomFunctional,
	randomRelabelling,
	sparseFunctional,
	rewrittenByNoSignalling
} from '../../../../tests/factories/random-functional';
import { lehmer } from '../../../../tests/factories/solver-problem';
import { affineMap, agree, canonicalForm, looseForm } from './equivalence';
import { familyFunctional, type FamilySpec } from './families';
import { makeFunctional, scaleFunctional, type Functional } from './functional';
import { functionalOfTerms } from './problem-terms';
import { relabelFunctional } from './relabelling';
import type { Event } from './scenario';

function localMaximumOf(f: Functional): Rational {
	const tensor = strategyTensor(f);
	return ratio(enumerateStrategies(tensor, () => {}).value, tensor.denominator);
}

const SCENARIOS = [
	[
		[2, 2],
		[2, 2]
	],
	[
		[2, 2, 2],
		[2, 2, 2]
	],
	[
		[3, 3],
		[3, 3]
	],
	[
		[2, 3],
		[3, 2, 2]
	],
	[
		[2, 2],
		[2, 2],
		[2, 2]
	],
	[[2, 2], [2, 3], [4]],
	[[2, 2], [2, 2], [2], [2, 2]],
	[[3], [2, 2], [2], [3]]
];

const FAMILY_LIST: FamilySpec[] = [
	{ name: 'chsh' },
	{ name: 'tilted-chsh', alpha: '1/2' },
	{ name: 'tilted-chsh', alpha: '1' },
	{ name: 'chained', n: 3 },
	{ name: 'chained', n: 4 },
	{ name: 'chained', n: 9 },
	{ name: 'i3322' },
	{ name: 'cglmp', d: 3 },
	{ name: 'cglmp', d: 4 },
	{ name: 'cglmp', d: 5 },
	{ name: 'cglmp', d: 6 },
	{ name: 'elegant' },
	{ name: 'mermin', n: 3 },
	{ name: 'mermin', n: 4 },
	{ name: 'mermin', n: 5 },
	{ name: 'svetlichny', n: 3 },
	{ name: 'svetlichny', n: 4 },
	{ name: 'gyni', n: 3 },
	{ name: 'gyni', n: 4 },
	{ name: 'magic-square' }
];

describe('canonical form', () => {
	it('does not change under relabelling, scale, shift and no-signalling rewriting', () => {
		const shape = fc.record({
			seed: fc.nat(),
			outputs: fc.constantFrom(...SCENARIOS),
			/** 0 for a few terms only. */
			size: fc.constantFrom(0, 0, 1, 3, 20),
			scale: fc.tuple(fc.integer({ min: 1, max: 40 }), fc.integer({ min: 1, max: 40 })),
			shift: fc.integer({ min: -50, max: 50 })
		});
		fc.assert(
			fc.property(shape, ({ seed, outputs, size, scale, shift }) => {
				const random = lehmer(seed);
				const f =
					size === 0
						? sparseFunctional(outputs, 1 + random(6), random)
						: randomFunctional(outputs, size, random);
				const factor = exactCoefficient(ratio(BigInt(scale[0]), BigInt(scale[1])));
				const scaled = scaleFunctional(rewrittenByNoSignalling(f, random), factor);
				const constant = { coefficient: exactCoefficient(ratio(BigInt(shift))), events: [] };
				const g = relabelFunctional(
					makeFunctional(scaled.scenario, [...scaled.terms, constant]),
					randomRelabelling(f, random)
				);
				expect(canonicalForm(g).digest).toBe(canonicalForm(f).digest);
				expect(looseForm(g)).toBe(looseForm(f));
				const map = affineMap(g, f);
				// A constant stays one, whatever it is multiplied by: its map is a shift.
				const isConstant = canonicalForm(f).canonical.terms.length === 0;
				expect(map?.scale.text).toBe(isConstant ? '1' : factor.text);
				const moved = map?.scale.exact?.mul(localMaximumOf(f)).add(map.shift.exact ?? 0);
				expect(moved?.equals(localMaximumOf(g))).toBe(true);
			}),
			{ numRuns: 200 }
		);
	});

	it('tells generic f from -f, but CHSH is its own negative relabelled', () => {
		const minus = negateCoefficient(COEFFICIENT_ONE);
		const f = randomFunctional(
			[
				[3, 3],
				[3, 3]
			],
			20,
			lehmer(7)
		);
		expect(canonicalForm(scaleFunctional(f, minus)).digest).not.toBe(canonicalForm(f).digest);
		const chsh = familyFunctional({ name: 'chsh' });
		expect(canonicalForm(scaleFunctional(chsh, minus)).digest).toBe(canonicalForm(chsh).digest);
	});

	it('tells the published families apart, whatever their labels', () => {
		const random = lehmer(3);
		const digests = FAMILY_LIST.map((spec) => {
			const f = familyFunctional(spec);
			const { digest, complete, canonical, scale, shift } = canonicalForm(f);
			expect(complete).toBe(true);
			const again = canonicalForm(relabelFunctional(f, randomRelabelling(f, random)));
			expect(again.digest, spec.name).toBe(digest);
			expect(again.canonical).toEqual(canonical);
			const expected = localMaximumOf(canonical)
				.mul(scale.exact ?? 0)
				.add(shift.exact ?? 0);
			expect(expected.equals(localMaximumOf(f)), spec.name).toBe(true);
			return digest;
		});
		expect(new Set(digests).size).toBe(digests.length);
	});

	it('is the same after it was taken', () => {
		const { canonical, digest } = canonicalForm(familyFunctional({ name: 'i3322' }));
		const again = canonicalForm(canonical);
		expect(again.canonical).toEqual(canonical);
		expect([again.digest, again.scale.text, again.shift.text]).toEqual([digest, '1', '0']);
	});

	it('drops inputs and parties on which the functional does not depend', () => {
		const chsh = familyFunctional({ name: 'chsh' });
		const wider = makeFunctional({ outputs: [[2, 2, 3], [4], [2, 2]] }, [
			...chsh.terms.map(({ coefficient, events }) => ({
				coefficient,
				events: events.map(([p, x, a]): Event => [p === 1 ? 2 : p, x, a])
			}))
		]);
		expect(canonicalForm(wider)).toEqual(canonicalForm(chsh));
	});

	it('is not searched for to tell that two functionals differ in a coefficient or a scenario', () => {
		const chsh = [
			[1, 1],
			[1, -1]
		];
		const loose = (matrix: number[][]) => looseForm(familyFunctional({ name: 'xor-game', matrix }));
		expect(loose([chsh[1] ?? [], chsh[0] ?? []])).toBe(loose(chsh));
		expect(
			loose([
				[1, 1, 0],
				[1, -1, 0]
			])
		).toBe(loose(chsh));
		expect(
			loose([
				[1, 1],
				[1, -2]
			])
		).not.toBe(loose(chsh));
		expect(
			loose([
				[1, 1, 1],
				[1, -1, 1]
			])
		).not.toBe(loose(chsh));
		expect(loose([[0]])).toBe('constant');
	});

	it('falls back to an invariant digest when the search is cut short', () => {
		const f = familyFunctional({ name: 'elegant' });
		const g = relabelFunctional(f, randomRelabelling(f, lehmer(2)));
		const [a, b] = [canonicalForm(f, 0), canonicalForm(g, 0)];
		expect([a.complete, b.complete]).toEqual([false, false]);
		expect(a.digest).toBe(b.digest);
		expect(a.digest).not.toBe(canonicalForm(f).digest);
		expect(localMaximumOf(a.canonical).toFraction()).toBe('6');
	});

	it('gives constants one empty form, with the constant as the shift', () => {
		const zero = functionalOfTerms([[2], [2]], []);
		const one = functionalOfTerms(
			[[2], [2]],
			[
				['1', [[0, 0, 0]]],
				['1', [[0, 0, 1]]]
			]
		);
		expect(canonicalForm(one)).toMatchObject({
			digest: canonicalForm(zero).digest,
			canonical: { scenario: { outputs: [] }, terms: [] },
			shift: { text: '1' },
			complete: true
		});
		expect(affineMap(one, zero)).toMatchObject({ scale: { text: '1' }, shift: { text: '1' } });
		expect(affineMap(one, familyFunctional({ name: 'chsh' }))).toBeNull();
		// cos(pi/5) = (1 + sqrt 5)/4, which no symbolic form here knows
		const vanishing = functionalOfTerms([[2], [2]], [['cos(pi/5)-(1+sqrt(5))/4', [[0, 0, 0]]]]);
		expect(canonicalForm(vanishing).digest).toBe(canonicalForm(zero).digest);
	});
});

describe('affine map', () => {
	it('finds the published conversions', () => {
		const ch = functionalOfTerms(
			[
				[2, 2],
				[2, 2]
			],
			[
				['-1', [[0, 0, 0]]],
				['-1', [[1, 0, 0]]],
				[
					'1',
					[
						[0, 0, 0],
						[1, 0, 0]
					]
				],
				[
					'1',
					[
						[0, 0, 0],
						[1, 1, 0]
					]
				],
				[
					'1',
					[
						[0, 1, 0],
						[1, 0, 0]
					]
				],
				[
					'-1',
					[
						[0, 1, 0],
						[1, 1, 0]
					]
				]
			]
		);
		// CHSH = 4 CH + 2 (Clauser and Horne, Phys. Rev. D 10, 526 (1974); from memory)
		expect(affineMap(familyFunctional({ name: 'chsh' }), ch)).toMatchObject({
			scale: { text: '4' },
			shift: { text: '2' }
		});
		// I_2 of Collins et al., Phys. Rev. Lett. 88, 040404 (2002), is CHSH (from memory)
		const two = familyFunctional({ name: 'cglmp', d: 2 });
		expect(affineMap(two, familyFunctional({ name: 'chsh' }))).toMatchObject({
			scale: { text: '1' },
			shift: { text: '0' }
		});
		expect(affineMap(two, familyFunctional({ name: 'i3322' }))).toBeNull();
	});

	it('takes a common irrational factor into the scale and stays exact', () => {
		const chsh = familyFunctional({ name: 'chsh' });
		const scaled = scaleFunctional(chsh, parseCoefficient('2*sqrt(2)'));
		expect(canonicalForm(scaled)).toMatchObject({
			digest: canonicalForm(chsh).digest,
			numerical: false
		});
		expect(affineMap(scaled, chsh)?.scale.text).toBe('2*sqrt(2)');
	});

	it('marks irrational ratios as numerical and still finds the map', () => {
		const f = familyFunctional({ name: 'tilted-chsh', alpha: 'sqrt(2)' });
		const form = canonicalForm(f);
		expect(form.numerical).toBe(true);
		const g = relabelFunctional(
			scaleFunctional(f, parseCoefficient('3*cos(pi/7)')),
			randomRelabelling(f, lehmer(11))
		);
		expect(canonicalForm(g).digest).toBe(form.digest);
		expect(affineMap(g, f)?.scale.value).toBeCloseTo(3 * Math.cos(Math.PI / 7), 12);
		expect(affineMap(f, familyFunctional({ name: 'tilted-chsh', alpha: '1.4142' }))).toBeNull();
	});
});

describe('agree', () => {
	const form = canonicalForm(familyFunctional({ name: 'chsh' }));
	const withTerms = (change: (terms: Functional['terms']) => Functional['terms']) => ({
		...form,
		canonical: { ...form.canonical, terms: change(form.canonical.terms) }
	});

	it('compares term by term what has the same digest', () => {
		expect(agree(form, form)).toBe(true);
		expect(agree(form, { ...form, complete: false })).toBe(false);
		expect(
			agree(
				form,
				withTerms((terms) => terms.slice(1))
			)
		).toBe(false);
		expect(
			agree(
				form,
				withTerms((terms) => terms.toReversed())
			)
		).toBe(false);
	});

	it('leaves irrational coefficients out of the loose form', () => {
		const [a, b] = ['sqrt(2)', 'sqrt(3)'].map((alpha) =>
			looseForm(familyFunctional({ name: 'tilted-chsh', alpha }))
		);
		expect(a).toBe(b);
		expect(a).not.toBe(looseForm(familyFunctional({ name: 'tilted-chsh', alpha: '1/2' })));
	});
});

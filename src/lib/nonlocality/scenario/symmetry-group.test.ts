import fc from 'fast-check';
import { describe, expect, it, test } from 'vitest';
import { randomFunctional } from '../../../../tests/factories/random-functional';
import { lehmer } from '../../../../tests/factories/solver-problem';
import { familyFunctional, type FamilySpec } from './families';
import { eventsKey, makeFunctional, type Functional } from './functional';
import { relabelFunctional, type Relabelling } from './relabelling';
import { MOST_ELEMENTS, symmetryGroup } from './symmetry-group';
import { functionalOfZeroSumForm, zeroSumForm } from './zero-sum-form';

const shown = (f: Functional) =>
	functionalOfZeroSumForm(zeroSumForm(f))
		.terms.map((t) => `${eventsKey(t.events)}:${t.coefficient.text}`)
		.join();
const isSymmetry = (f: Functional, r: Relabelling) => shown(relabelFunctional(f, r)) === shown(f);

// Orders by listing all relabellings stand in equivalence-search.test.ts. Here: the ring of 2n
// inputs of the chained inequality turned and mirrored, with the flip of all outputs, 8n; CGLMP the
// same with d shifts of all outputs, 8d (Collins, Gisin, Linden, Massar, Popescu, Phys. Rev. Lett.
// 88, 040404 (2002), is invariant under these).
it.each<[FamilySpec, bigint]>([
	[{ name: 'chsh' }, 16n],
	[{ name: 'i3322' }, 8n],
	[{ name: 'cglmp', d: 3 }, 24n],
	[{ name: 'cglmp', d: 4 }, 32n],
	[{ name: 'cglmp', d: 5 }, 40n],
	[{ name: 'cglmp', d: 6 }, 48n],
	[{ name: 'chained', n: 4 }, 32n],
	[{ name: 'mermin', n: 3 }, 192n]
])('%j has %d symmetries', (spec, order) => {
	const f = familyFunctional(spec);
	const group = symmetryGroup(f);
	expect(group.order).toBe(order);
	expect(group.complete).toBe(true);
	const elements = group.elements() ?? [];
	expect(BigInt(new Set(elements.map((r) => JSON.stringify(r))).size)).toBe(order);
	expect([...elements, ...group.generators].every((r) => isSymmetry(f, r))).toBe(true);
});

it('compares irrational coefficients as symbols', () => {
	// Only P(0|0) of party 0 is weighted beside CHSH: what is left are the flips of party 1's side
	// that mirror it, of order 2.
	const tilted = (alpha: string) => symmetryGroup(familyFunctional({ name: 'tilted-chsh', alpha }));
	expect(tilted('sqrt(2)').order).toBe(tilted('1/2').order);
	expect(tilted('sqrt(2)').order).toBe(2n);
});

it('counts unused inputs and parties', () => {
	const wider = makeFunctional(
		{ outputs: [[2, 2, 3], [2, 2], [2]] },
		familyFunctional({ name: 'chsh' }).terms
	);
	// The third input tells the parties apart (16 / 2); its outputs and the last party's are free.
	expect(symmetryGroup(wider).order).toBe(8n * 6n * 2n);
});

it('leaves large groups unlisted, but offers subgroups', () => {
	const wide = familyFunctional({ name: 'mermin', n: 5 });
	const group = symmetryGroup(wide);
	expect(group.order).toBeGreaterThan(BigInt(MOST_ELEMENTS));
	expect(group.elements()).toBe(null);
	const some = group.elementsOfSubgroup(100);
	expect(some.length).toBeGreaterThan(1);
	expect(some.length).toBeLessThanOrEqual(100);
	expect(some.every((r) => isSymmetry(wide, r))).toBe(true);
});

/** All relabellings of a scenario of two parties with two inputs of two outputs. */
function everyRelabelling(): Relabelling[] {
	const orders = [
		[0, 1],
		[1, 0]
	];
	return orders.flatMap((parties) =>
		orders.flatMap((x) =>
			orders.flatMap((y) =>
				Array.from({ length: 16 }, (_, bits) => {
					const names = (k: number) => orders[(bits >> k) & 1] ?? [];
					return {
						parties,
						inputs: [x, y],
						outputs: [
							[names(0), names(1)],
							[names(2), names(3)]
						]
					};
				})
			)
		)
	);
}

describe('random functionals', () => {
	test('the group is what trying all relabellings finds', () => {
		const outputs = [
			[2, 2],
			[2, 2]
		];
		fc.assert(
			fc.property(fc.nat(), fc.integer({ min: 0, max: 3 }), (seed, size) => {
				const f = randomFunctional(outputs, size, lehmer(seed));
				const kept = everyRelabelling().filter((r) => isSymmetry(f, r));
				expect(symmetryGroup(f).order).toBe(BigInt(kept.length));
			}),
			{ numRuns: 60 }
		);
	});
});

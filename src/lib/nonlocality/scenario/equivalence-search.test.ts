import { expect, it } from 'vitest';
import { equivalenceGraph } from './equivalence-graph';
import { canonicalLabelling } from './equivalence-search';
import { familyFunctional, type FamilySpec } from './families';
import { eventsKey, type Functional } from './functional';
import { relabelFunctional, type Relabelling } from './relabelling';
import { functionalOfZeroSumForm, zeroSumForm } from './zero-sum-form';

/** Number of elements of a permutation group, by listing them; for small groups. */
function orderOf(generators: readonly Int32Array[], points: number): number {
	const found = new Set([Array.from({ length: points }, (_, i) => i).join(' ')]);
	for (const element of found) {
		const images = element.split(' ').map(Number);
		for (const g of generators) found.add(images.map((i) => g[i]).join(' '));
	}
	return found.size;
}

const gaugeFree = (spec: FamilySpec) =>
	functionalOfZeroSumForm(zeroSumForm(familyFunctional(spec)));

function symmetriesOf({ scenario, terms }: Functional): number {
	const values = [...new Set(terms.map((term) => term.coefficient.text))];
	const ranked = terms
		.filter(({ events }) => events.length > 0)
		.map(({ events, coefficient }) => ({ events, rank: values.indexOf(coefficient.text) }));
	const graph = equivalenceGraph(scenario, ranked);
	const { complete, generators } = canonicalLabelling(graph);
	expect(complete).toBe(true);
	return orderOf(generators, graph.events.length);
}

function permutationsOf(count: number): number[][] {
	if (count === 0) return [[]];
	return permutationsOf(count - 1).flatMap((p) =>
		Array.from({ length: count }, (_, i) => [...p.slice(0, i), count - 1, ...p.slice(i)])
	);
}

/** Every way of choosing one item of each list. */
function choices<T>(lists: readonly (readonly T[])[]): T[][] {
	return lists.reduce<T[][]>(
		(found, list) => found.flatMap((chosen) => list.map((item) => [...chosen, item])),
		[[]]
	);
}

/** All relabellings of a scenario whose parties and inputs are all alike. */
function everyRelabelling(parties: number, inputs: number, outputs: number): Relabelling[] {
	const ofOutputs = choices(Array.from({ length: inputs }, () => permutationsOf(outputs)));
	const ofParty = permutationsOf(inputs).flatMap((x) => ofOutputs.map((a) => [x, a] as const));
	return permutationsOf(parties).flatMap((p) =>
		choices(Array.from({ length: parties }, () => ofParty)).map((each) => ({
			parties: p,
			inputs: each.map(([x]) => x),
			outputs: each.map(([, a]) => a)
		}))
	);
}

const shown = (f: Functional) =>
	f.terms.map((t) => `${eventsKey(t.events)}:${t.coefficient.text}`).join();

it.each<[FamilySpec, number, [number, number, number]]>([
	[{ name: 'chsh' }, 16, [2, 2, 2]],
	[{ name: 'i3322' }, 8, [2, 3, 2]],
	[{ name: 'cglmp', d: 3 }, 24, [2, 2, 3]],
	[{ name: 'mermin', n: 3 }, 192, [3, 2, 2]]
])('finds the symmetries of %j that trying all relabellings finds: %i', (spec, order, size) => {
	const f = gaugeFree(spec);
	const kept = everyRelabelling(...size).filter((r) => shown(relabelFunctional(f, r)) === shown(f));
	expect(kept.length).toBe(order);
	expect(symmetriesOf(f)).toBe(order);
});

// The ring of 2n inputs turned and mirrored, and the flip of all outputs: 8n. CGLMP the same, with
// its d shifts of all outputs: 8d.
it.each<[FamilySpec, number]>([
	[{ name: 'chained', n: 3 }, 24],
	[{ name: 'chained', n: 5 }, 40],
	[{ name: 'cglmp', d: 4 }, 32],
	[{ name: 'cglmp', d: 6 }, 48]
])('finds generators of the whole symmetry group of %j: order %i', (spec, order) => {
	expect(symmetriesOf(gaugeFree(spec))).toBe(order);
});

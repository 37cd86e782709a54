import { equivalenceGraph, type EquivalenceGraph } from './equivalence-graph';
import { canonicalLabelling } from './equivalence-search';
import type { Functional } from './functional';
import { PermutationGroup, type Permutation } from './permutation-group';
import type { Relabelling } from './relabelling';
import type { Scenario } from './scenario';
import { functionalOfZeroSumForm, zeroSumForm } from './zero-sum-form';

/** Work of the search for symmetries, in the search's units; some 0.2 s. */
const SYMMETRY_WORK_LIMIT = 5e6;
/** Past this many elements a group is not listed. */
export const MOST_ELEMENTS = 2048;

/** The relabellings of parties, inputs and outputs that leave a functional as it is. */
export interface SymmetryGroup {
	readonly scenario: Scenario;
	readonly generators: readonly Relabelling[];
	readonly order: bigint;
	/** False when the search was cut short: the group is then one of symmetries, maybe not of all. */
	readonly complete: boolean;
	/** All elements, the identity first, or null past MOST_ELEMENTS. */
	elements(): Relabelling[] | null;
	/** A subgroup with at most `most` elements (the whole group where that is as small). */
	elementsOfSubgroup(most: number): Relabelling[];
}

/**
 * The symmetry group of a functional: relabellings r with f(r P) = f(P) for every no-signalling
 * behaviour P. Exact: they permute the terms of the zero-sum form, whose coefficients are compared
 * as symbols; where a coefficient is known as a double only, symmetries may be missed, never made up.
 * Inputs and parties on which f does not depend count too.
 * @param workLimit work of the search before it is cut short
 * @example symmetryGroup(chsh).order // 16n
 */
export function symmetryGroup(
	functional: Functional,
	workLimit: number = SYMMETRY_WORK_LIMIT
): SymmetryGroup {
	const { scenario } = functional;
	const { terms } = functionalOfZeroSumForm(zeroSumForm(functional));
	const ranks = new Map<string, number>();
	const ranked = terms.flatMap(({ events, coefficient: { text } }) => {
		if (events.length === 0) return [];
		const rank = ranks.get(text) ?? ranks.size;
		ranks.set(text, rank);
		return [{ events, rank }];
	});
	const graph = equivalenceGraph(scenario, ranked);
	const { generators, complete } = canonicalLabelling(graph, workLimit);
	const group = new PermutationGroup(graph.events.length, generators);
	const order = group.order;
	const named = (list: readonly Permutation[]) => list.map((p) => relabellingOf(graph, p));
	return {
		scenario,
		generators: named(generators),
		order,
		complete,
		elements: () => (order > BigInt(MOST_ELEMENTS) ? null : named(group.elements())),
		elementsOfSubgroup: (most) => named(group.elementsOfSubgroup(most))
	};
}

/** A permutation of the events that respects inputs and parties, by its parts. */
function relabellingOf(graph: EquivalenceGraph, permutation: Permutation): Relabelling {
	const { outputs } = graph.scenario;
	const parties: number[] = [];
	const inputs: number[][] = outputs.map(() => []);
	const names: number[][][] = outputs.map((counts) => counts.map(() => []));
	graph.events.forEach(([p, x, a], e) => {
		const image = graph.events[permutation[e] ?? -1];
		if (!image) throw new RangeError(`event ${e} has no image`);
		const ofParty = inputs[p] ?? [];
		const ofInput = names[p]?.[x] ?? [];
		[parties[p], ofParty[x], ofInput[a]] = image;
	});
	return { parties, inputs, outputs: names };
}

import type { Relabelling } from '../../src/lib/nonlocality/scenario/relabelling';

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
export function everyRelabelling(parties: number, inputs: number, outputs: number): Relabelling[] {
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

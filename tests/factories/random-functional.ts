import { exactCoefficient, negateCoefficient } from '../../src/lib/nonlocality/exact/coefficient';
import { ratio } from '../../src/lib/nonlocality/exact/rational';
import {
	makeFunctional,
	type Functional,
	type Term
} from '../../src/lib/nonlocality/scenario/functional';
import type { Relabelling } from '../../src/lib/nonlocality/scenario/relabelling';
import type { Event } from '../../src/lib/nonlocality/scenario/scenario';

type Random = (below: number) => number;

function shuffled(count: number, random: Random): number[] {
	const list = Array.from({ length: count }, (_, i) => i);
	for (let i = count - 1; i > 0; i--) {
		const j = random(i + 1);
		[list[i], list[j]] = [list[j] ?? 0, list[i] ?? 0];
	}
	return list;
}

export function randomRelabelling(f: Functional, random: Random): Relabelling {
	const { outputs } = f.scenario;
	return {
		parties: shuffled(outputs.length, random),
		inputs: outputs.map((counts) => shuffled(counts.length, random)),
		outputs: outputs.map((counts) => counts.map((count) => shuffled(count, random)))
	};
}

/** Integer coefficients from -size to size on every set of events, the constant included. */
export function randomFunctional(outputs: number[][], size: number, random: Random): Functional {
	let events: Event[][] = [[]];
	outputs.forEach((counts, p) => {
		const own = counts.flatMap((n, x) => Array.from({ length: n }, (_, a): Event => [p, x, a]));
		events = events.flatMap((list) => [list, ...own.map((event) => [...list, event])]);
	});
	const terms = events.map((list) => ({
		events: list,
		coefficient: exactCoefficient(ratio(BigInt(random(2 * size + 1) - size)))
	}));
	return makeFunctional({ outputs }, terms);
}

/** Adds r * (sum_a P(a b|x y) - sum_a P(a b|x' y)), which is zero on every behaviour. */
export function rewrittenByNoSignalling(f: Functional, random: Random): Functional {
	const terms: Term[] = [...f.terms];
	const counts = f.scenario.outputs[0] ?? [];
	for (let times = 0; times < 4; times++) {
		const other: Event = [1, 0, random(2)];
		const weight = exactCoefficient(ratio(BigInt(random(9) - 4), 3n));
		[random(counts.length), random(counts.length)].forEach((x, side) => {
			for (let a = 0; a < (counts[x] ?? 0); a++)
				terms.push({
					coefficient: side === 0 ? weight : negateCoefficient(weight),
					events: [[0, x, a], other]
				});
		});
	}
	return makeFunctional(f.scenario, terms);
}

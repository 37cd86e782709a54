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

/**
 * Adds sums that are zero on every behaviour: r * (sum_a P(a b|x y) - sum_a P(a b|x' y)) and
 * r * (sum_a P(a b|x y) - P(b|y)), for any party and any events b of some of the others.
 */
export function rewrittenByNoSignalling(f: Functional, random: Random): Functional {
	const { outputs } = f.scenario;
	const terms: Term[] = [...f.terms];
	for (let times = 0; times < 6; times++) {
		const party = random(outputs.length);
		const others = outputs.flatMap((counts, p): Event[] => {
			const x = random(counts.length);
			return p === party || random(3) === 0 ? [] : [[p, x, random(counts[x] ?? 1)]];
		});
		const counts = outputs[party] ?? [];
		const weight = exactCoefficient(ratio(BigInt(random(9) - 4), 3n));
		const addSum = (input: number, coefficient: typeof weight) => {
			for (let a = 0; a < (counts[input] ?? 0); a++)
				terms.push({ coefficient, events: [...others, [party, input, a]] });
		};
		addSum(random(counts.length), weight);
		if (random(2) === 0) addSum(random(counts.length), negateCoefficient(weight));
		else terms.push({ coefficient: negateCoefficient(weight), events: others });
	}
	return makeFunctional(f.scenario, terms);
}

/** A few terms only, with small coefficients: such functionals have many symmetries. */
export function sparseFunctional(outputs: number[][], count: number, random: Random): Functional {
	const terms = Array.from({ length: count }, (): Term => {
		const events = outputs.flatMap((counts, p): Event[] => {
			const x = random(counts.length);
			return random(4) === 0 ? [] : [[p, x, random(counts[x] ?? 1)]];
		});
		return { events, coefficient: exactCoefficient(ratio(BigInt(random(3) - 1))) };
	});
	return makeFunctional({ outputs }, terms);
}

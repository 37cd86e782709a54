import { eventsKey, type Term } from './functional';
import { outputCount, type Event, type Scenario } from './scenario';

/** A term with its coefficient as an integer. */
export interface IntegerTerm extends Term {
	readonly integer: bigint;
}

/** The terms of a functional in a scenario of only what they use. */
export interface UsedTerms {
	readonly scenario: Scenario;
	readonly terms: readonly IntegerTerm[];
}

/** Leaves out the inputs and parties that occur in no term, and renumbers the others. */
export function dropUnused(scenario: Scenario, terms: readonly IntegerTerm[]): UsedTerms {
	const occurring = new Set(terms.flatMap((t) => t.events.map(([p, x]) => `${p}.${x}`)));
	const inputs = scenario.outputs.map((counts, p) =>
		counts.flatMap((_, x) => (occurring.has(`${p}.${x}`) ? [x] : []))
	);
	const parties = inputs.flatMap((list, p) => (list.length > 0 ? [p] : []));
	const renumber = ([p, x, a]: Event): Event => [
		parties.indexOf(p),
		(inputs[p] ?? []).indexOf(x),
		a
	];
	return {
		scenario: {
			outputs: parties.map((p) => (inputs[p] ?? []).map((x) => outputCount(scenario, p, x)))
		},
		terms: terms.map((term) => ({ ...term, events: term.events.map(renumber) }))
	};
}

/**
 * Every value's rank, without the most frequent value of each block (on ties the smallest): it
 * follows from the others, as a block sums to zero, and most blocks have few others.
 */
export function sparseTerms({
	scenario,
	terms
}: UsedTerms): { events: readonly Event[]; rank: number }[] {
	const values = [...new Set([0n, ...terms.map((term) => term.integer)])];
	values.sort((a, b) => (a < b ? -1 : 1));
	const rankOf = new Map(values.map((value, rank) => [value, rank]));
	const blocks = new Map<string, IntegerTerm[]>();
	for (const term of terms) {
		const key = term.events.map(([p, x]) => `${p}.${x}`).join(' ');
		const block = blocks.get(key);
		if (block) block.push(term);
		else blocks.set(key, [term]);
	}
	return [...blocks.values()].flatMap((block) => {
		const zeros = zerosOfBlock(scenario, block).map((events) => ({ events, integer: 0n }));
		const all = [...block, ...zeros].map(({ events, integer }) => ({
			events,
			rank: rankOf.get(integer) ?? 0
		}));
		const frequency = new Map<number, number>();
		for (const { rank } of all) frequency.set(rank, (frequency.get(rank) ?? 0) + 1);
		const [background] = [...frequency].reduce((a, b) =>
			b[1] > a[1] || (b[1] === a[1] && b[0] < a[0]) ? b : a
		);
		return all.filter(({ rank }) => rank !== background);
	});
}

/** The outcomes of a block's measurements that have no term. */
function zerosOfBlock(scenario: Scenario, block: readonly IntegerTerm[]): Event[][] {
	const [first] = block;
	if (!first) return [];
	const present = new Set(block.map(({ events }) => eventsKey(events)));
	return first.events
		.reduce<Event[][]>(
			(lists, [p, x]) =>
				lists.flatMap((list) =>
					Array.from({ length: outputCount(scenario, p, x) }, (_, a): Event[] => [
						...list,
						[p, x, a]
					])
				),
			[[]]
		)
		.filter((events) => !present.has(eventsKey(events)));
}

import { collinsGisinForm, type Functional } from '../scenario/functional';
import { absoluteSum, integerFunctional } from '../scenario/fixed-point';
import { ZERO, exactOfDouble, type Rational } from '../exact/rational';
import { SolverStop } from '../problem';

/** A party of the enumeration: only inputs on which the functional depends are listed. */
export interface TensorParty {
	readonly party: number;
	readonly inputs: readonly number[];
	/** Outputs of each listed input. */
	readonly outputs: readonly number[];
	/** Coordinate of each listed input's output 0; coordinate 0 stands for "no event". */
	readonly starts: readonly number[];
	/** 1 + sum of (outputs - 1). */
	readonly size: number;
	/** Product of the outputs. */
	readonly strategies: number;
	/** True when all listed inputs have two outputs. */
	readonly binary: boolean;
}

/** A functional as a dense integer tensor, Collins-Gisin coordinates, first party slowest. */
export interface StrategyTensor {
	/** Fewest strategies first: the last party is answered by its best reply. */
	readonly parties: readonly TensorParty[];
	readonly entries: readonly bigint[];
	readonly denominator: bigint;
	readonly allowance: Rational;
	/** True when all sums met on the way are exact in doubles. */
	readonly fitsDoubles: boolean;
	/** Strategies to enumerate: all parties but the last. */
	readonly count: number;
}

/** Entries of the tensor: 16 million doubles are 128 MB. */
const ENTRY_LIMIT = 2 ** 24;

/** @throws SolverStop when the tensor would have more than 2^24 entries. */
export function strategyTensor(functional: Functional): StrategyTensor {
	const form = collinsGisinForm(functional);
	const integers = integerFunctional(form);
	const used = new Set(form.terms.flatMap((t) => t.events.map(([p, x]) => `${p}.${x}`)));
	const parties = form.scenario.outputs
		.map((counts, party) => tensorParty(party, counts, used))
		.sort((a, b) => a.strategies - b.strategies || b.party - a.party);
	const total = parties.reduce((product, p) => product * p.size, 1);
	if (total > ENTRY_LIMIT)
		throw new SolverStop(
			'limit',
			`the functional has ${total} coordinates, more than the limit of ${ENTRY_LIMIT}`
		);
	const entries = new Array<bigint>(total).fill(0n);
	for (const { coefficient, events } of integers.terms) {
		let index = 0;
		for (const { party, inputs, starts, size } of parties) {
			const event = events.find(([p]) => p === party);
			index = index * size + (event ? (starts[inputs.indexOf(event[1])] ?? 0) + event[2] : 0);
		}
		entries[index] = (entries[index] ?? 0n) + coefficient;
	}
	return {
		parties,
		entries,
		denominator: integers.denominator,
		allowance: integers.allowance.add(twiceTheErrors(functional)),
		// An update adds one partial sum and subtracts another: 4 covers every intermediate.
		fitsDoubles: 4n * absoluteSum(integers) < 2n ** 53n,
		count: parties.slice(0, -1).reduce((product, p) => product * p.strategies, 1)
	};
}

/**
 * The check evaluates the functional's own doubles, not the grid's: twice their errors keeps the
 * sides printed here outside the ones it proves.
 */
export function twiceTheErrors(functional: Functional): Rational {
	return functional.terms.reduce(
		(sum, { coefficient: c }) => (c.exact ? sum : sum.add(exactOfDouble(2 * c.error))),
		ZERO
	);
}

function tensorParty(party: number, counts: readonly number[], used: Set<string>): TensorParty {
	const inputs = counts.flatMap((_, x) => (used.has(`${party}.${x}`) ? [x] : []));
	const outputs = inputs.map((x) => counts[x] ?? 2);
	let size = 1;
	const starts = outputs.map((count) => {
		const start = size;
		size += count - 1;
		return start;
	});
	const strategies = outputs.reduce((product, count) => product * count, 1);
	const binary = outputs.every((count) => count === 2);
	return { party, inputs, outputs, starts, size, strategies, binary };
}

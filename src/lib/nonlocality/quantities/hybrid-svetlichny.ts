import { ratio } from '../exact/rational';
import { SolverStop, type Control } from '../problem';
import { tableKey, tableSize } from '../scenario/exact-table';
import { fullCorrelatorForm, partialMeasurement } from '../scenario/full-correlators';
import type { Functional } from '../scenario/functional';
import {
	bipartitions,
	jointInputs,
	mergeParties,
	type Bipartition
} from '../scenario/merged-parties';
import { digitsOf } from '../scenario/zero-sum-form';
import { enumerateStrategies, type BestStrategy } from './enumerate-strategies';
import type { HybridFinding } from './hybrid-maximum';
import { STRATEGY_LIMIT } from './local-maximum';
import { strategyTensor, type StrategyTensor } from './strategy-tensor';
import type { WorkClock } from './work-clock';

/** Joint probabilities of the scenario, over which the functional is written out: some seconds. */
const TABLE_LIMIT = 10_000;

/**
 * Svetlichny's model: each group acts as one party with its joint inputs and outputs, so the maximum
 * is at a pair of functions from joint inputs to joint outputs.
 */
export function svetlichnyHybrid(
	functional: Functional,
	clock: WorkClock,
	control: Control
): HybridFinding {
	const { scenario } = functional;
	const size = tableSize(scenario);
	if (size > TABLE_LIMIT)
		throw new SolverStop(
			'limit',
			`the scenario has ${size} joint probabilities, more than the limit of ${TABLE_LIMIT}`
		);
	const partial = partialMeasurement(functional);
	if (partial) throw new SolverStop('failed', partial);
	const written = fullCorrelatorForm(functional);
	const merged = bipartitions(scenario.outputs.length).map((groups) => {
		clock.check();
		return { groups, two: mergeParties(written, groups) };
	});
	const total = merged.reduce((sum, { two }) => sum + strategiesOf(two), 0);
	if (total > STRATEGY_LIMIT)
		throw new SolverStop(
			'limit',
			`${total} joint strategies would have to be enumerated, more than the limit of ${STRATEGY_LIMIT}`
		);
	const splits = merged.map(({ groups, two }) => {
		clock.check();
		return { groups, tensor: strategyTensor(two) };
	});
	let done = 0;
	let best: { split: (typeof splits)[number]; found: BestStrategy } | null = null;
	for (const split of splits) {
		const found = enumerateStrategies(split.tensor, (enumerated) => {
			clock.check();
			control.report({
				stage: `joint strategies of the groups ${split.groups.join(' | ')}`,
				iteration: done + enumerated,
				fraction: (done + enumerated) / total,
				lower: null,
				upper: null
			});
		});
		done += split.tensor.count;
		// All tensors come from one functional: they have the same denominator.
		if (best === null || found.value > best.found.value) best = { split, found };
	}
	if (!best) throw new SolverStop('failed', 'there is no bipartition');
	const { groups, tensor } = best.split;
	const value = ratio(best.found.value, tensor.denominator);
	return {
		below: value,
		above: value,
		allowance: tensor.allowance,
		groups,
		behaviours: deterministicTables(functional, groups, tensor, best.found),
		bipartitions: [],
		method: { name: 'enumeration of joint strategies', enumerated: total }
	};
}

/** Functions of the joint inputs that occur, of the group with fewer of them. */
function strategiesOf({ scenario, terms }: Functional): number {
	const counts = scenario.outputs.map((counts, group) => {
		const inputs = new Set(
			terms.flatMap(({ events }) => events.filter(([g]) => g === group).map(([, x]) => x))
		);
		return [...inputs].reduce((product, x) => product * (counts[x] ?? 1), 1);
	});
	return Math.min(...counts);
}

/** A function per group as a table of ones; output 0 where the functional does not look. */
function deterministicTables(
	{ scenario }: Functional,
	groups: Bipartition,
	tensor: StrategyTensor,
	{ digits }: BestStrategy
): Record<string, string>[] {
	return groups.map((group, g) => {
		const k = tensor.parties.findIndex(({ party }) => party === g);
		const inputs = tensor.parties[k]?.inputs ?? [];
		return Object.fromEntries(
			jointInputs(scenario, group).map((joint, x) => {
				const output = digits[k]?.[inputs.indexOf(x)] ?? 0;
				return [tableKey(digitsOf(output, joint.outputs), joint.inputs), '1'] as const;
			})
		);
	});
}

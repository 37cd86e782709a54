import type { Functional } from '../scenario/functional';
import type { StrategyTensor } from './strategy-tensor';

/** Output 0 for every input on which the functional does not depend. */
export function wholeStrategy(
	{ scenario }: Pick<Functional, 'scenario'>,
	tensor: StrategyTensor,
	digits: readonly (readonly number[])[]
): number[][] {
	const strategy = scenario.outputs.map((counts) => counts.map(() => 0));
	tensor.parties.forEach(({ party, inputs }, k) => {
		const row = strategy[party] ?? [];
		inputs.forEach((input, i) => {
			row[input] = digits[k]?.[i] ?? 0;
		});
	});
	return strategy;
}

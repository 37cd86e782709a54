import type { ProblemOf } from '../problem';
import type { Event } from '../scenario/scenario';
import { formOfProbability, type MomentForm } from './moment-forms';
import { require, type Layout } from './moment-layout';

/** A form that is >= 0 (or = 0) on every feasible point, with its multiplier. */
export interface WeightedForm<T> {
	readonly form: MomentForm;
	readonly weight: T;
}

/**
 * The rows P >= 0 and the problem's constraints with their multipliers.
 * @throws Rejected where one of an inequality is negative, or belongs to nothing
 */
export function weightedForms<T extends number | bigint>(
	problem: ProblemOf<'npa'>,
	layout: Layout,
	rowMultipliers: Readonly<Record<string, T>>,
	constraintMultipliers: readonly T[]
): WeightedForm<T>[] {
	const found: WeightedForm<T>[] = [];
	for (const [key, weight] of Object.entries(rowMultipliers)) {
		require(problem.nonNegative, 'a row multiplier although P >= 0 is not imposed');
		require(weight >= 0, `the multiplier of P(${key}) is negative`);
		const form = formOfProbability(layout.numbers, layout.scenario, readRowKey(key));
		require(form !== null, `the moments do not determine P(${key})`);
		found.push({ form, weight });
	}
	constraintMultipliers.forEach((weight, place) => {
		const form = layout.constraints[place];
		require(form !== undefined, 'a multiplier of no constraint');
		const free = problem.constraints[place]?.relation === '=';
		require(free || weight >= 0, `the multiplier of constraint ${place} is negative`);
		found.push({ form, weight });
	});
	return found;
}

/** `"a,b|x,y"`, `-` for a party that is not measured. */
function readRowKey(key: string): Event[] {
	const [outputs, inputs, more] = key.split('|').map((side) => side.split(','));
	require(outputs !== undefined &&
		inputs?.length === outputs.length &&
		more === undefined, `"${key}" is no row`);
	return outputs.flatMap((output, party) => {
		const input = inputs[party] ?? '';
		if (output === '-' && input === '-') return [];
		require(/^\d{1,3}$/.test(output) && /^\d{1,3}$/.test(input), `"${key}" is no row`);
		return [[party, Number(input), Number(output)] as const];
	});
}

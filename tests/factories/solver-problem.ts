import type { Control, Problem, ProblemOf } from '../../src/lib/nonlocality/problem';
import type { Functional } from '../../src/lib/nonlocality/scenario/functional';
import { termsOfFunctional } from '../../src/lib/nonlocality/scenario/problem-terms';

/** Never stops, keeps no progress. */
export const quietControl: Control = {
	now: () => performance.now(),
	shouldStop: () => false,
	report: () => {}
};

type Changes = Partial<Pick<Problem, 'sense' | 'seconds' | 'seed' | 'constraints'>>;

/** A problem on a functional that needs no more fields than its quantity. */
export function problemOn(quantity: 'local', f: Functional, changes?: Changes): ProblemOf<'local'>;
export function problemOn(
	quantity: 'no-signalling',
	f: Functional,
	changes?: Changes
): ProblemOf<'no-signalling'>;
export function problemOn(
	quantity: 'local' | 'no-signalling',
	f: Functional,
	changes: Changes = {}
): ProblemOf<'local' | 'no-signalling'> {
	return {
		format: 1,
		quantity,
		outputs: f.scenario.outputs,
		terms: termsOfFunctional(f),
		sense: 'max',
		constraints: [],
		seconds: 60,
		seed: 0,
		...changes
	};
}

/** A small linear congruential generator (Lehmer, 48271 mod 2^31 - 1): tests repeat exactly. */
export function lehmer(seed: number): (below: number) => number {
	let state = (seed % 2147483646) + 1;
	return (below) => {
		state = (state * 48271) % 2147483647;
		return state % below;
	};
}

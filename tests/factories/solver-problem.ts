import type { Control, DoneResult, Problem, ProblemOf } from '../../src/lib/nonlocality/problem';
import { solve } from '../../src/lib/nonlocality/quantities/solve';
import type { Functional } from '../../src/lib/nonlocality/scenario/functional';
import { termsOfFunctional } from '../../src/lib/nonlocality/scenario/problem-terms';

/** Never stops, keeps no progress. */
export const quietControl: Control = {
	now: () => performance.now(),
	shouldStop: () => false,
	report: () => {}
};

/** A problem's fields beside its quantity, at their defaults. */
export const problemAbout = (f: Functional) =>
	({
		format: 1,
		outputs: f.scenario.outputs,
		terms: termsOfFunctional(f),
		sense: 'max',
		constraints: [],
		seconds: 60,
		seed: 0
	}) as const;

/** The result of a problem that has one. @throws Error with the reason otherwise. */
export async function solved(problem: Problem): Promise<DoneResult> {
	const result = await solve(problem, quietControl);
	if (result.status !== 'done') throw new Error(result.reason);
	return result;
}

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
	return { ...problemAbout(f), quantity, ...changes };
}

/** A small linear congruential generator (Lehmer, 48271 mod 2^31 - 1): tests repeat exactly. */
export function lehmer(seed: number): (below: number) => number {
	let state = (seed % 2147483646) + 1;
	return (below) => {
		state = (state * 48271) % 2147483647;
		return state % below;
	};
}

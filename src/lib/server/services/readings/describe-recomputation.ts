import type { ClaimInput } from '../../../schemas/claim-input';
import { termsOfFunctional } from '../../../nonlocality/scenario/problem-terms';
import type { ReadClaimInput } from '../claims/read-claim-input';
import { claimProblem, quantityInfo } from '../recomputations/claim-problem';
import { problemLabel } from '../recomputations/problem-label';

/**
 * `Will be recomputed by ...`, or why it can't be; null while too little is known.
 * @param seconds computing time the group's recomputations get
 */
export function describeRecomputation(
	input: ClaimInput,
	{ subject, quantity }: ReadClaimInput,
	seconds: number
): string | null {
	if (quantityInfo(input.quantity).solver === null) {
		return 'No solver serves this quantity yet: the claim will be Open until a person reproduces it.';
	}
	const functional = subject?.functional;
	if (!functional || quantity.issues.length > 0) return null;
	const { outputs } = functional.scenario;
	const found = claimProblem(
		input,
		quantity,
		{ outputs, terms: termsOfFunctional(functional) },
		seconds
	);
	if ('why' in found) return `Will be Open: ${found.why}.`;
	const { problem } = found;
	if (problem.quantity === 'quantum') {
		return `Will be recomputed by moment matrices from level 1 up and see-saw from dimension 2 up, at most ${problem.seconds} s.`;
	}
	return `Will be recomputed by: ${problemLabel(problem)}.`;
}

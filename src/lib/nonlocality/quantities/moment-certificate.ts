import type { Monomial, MomentCertificate } from '../certificates/types';
import type { Multipliers } from './guaranteed-moments';
import type { MomentMatrix } from './moment-matrix';
import type { MomentProblem } from './moment-problem';

/** Multipliers as a certificate names them. */
export function printMultipliers(
	problem: MomentProblem,
	multipliers: Multipliers
): Pick<
	MomentCertificate,
	'kind' | 'monomials' | 'multiplier' | 'rowMultipliers' | 'constraintMultipliers'
> {
	const { matrix, probabilities, inequalities, equalities } = problem;
	const n = matrix.size;
	const multiplier: number[] = [];
	for (let i = 0; i < n; i++) multiplier.push(...multipliers.matrix.subarray(i * n, i * n + i + 1));
	const rowMultipliers: Record<string, number> = {};
	probabilities.forEach(({ key }, j) => (rowMultipliers[key] = multipliers.rows[j] ?? 0));
	const constraintMultipliers: number[] = [];
	inequalities.forEach(({ place }, j) => {
		constraintMultipliers[place] = multipliers.rows[probabilities.length + j] ?? 0;
	});
	equalities.forEach(({ place }, k) => {
		constraintMultipliers[place] = multipliers.equalities[k] ?? 0;
	});
	return {
		kind: 'npa-dual',
		monomials: printMonomials(matrix),
		multiplier,
		rowMultipliers,
		...(constraintMultipliers.length > 0 && { constraintMultipliers })
	};
}

function printMonomials(matrix: MomentMatrix): Monomial[] {
	const { inputs, outputs } = matrix.alphabet;
	return matrix.words.map((word) =>
		word.map((letters, party) =>
			letters.map(
				(letter) => [inputs[party]?.[letter] ?? 0, outputs[party]?.[letter] ?? 0] as const
			)
		)
	);
}

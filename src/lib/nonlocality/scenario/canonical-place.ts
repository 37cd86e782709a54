import { canonicalForm } from './equivalence';
import type { ProblemTerm } from '../problem';
import { functionalOfTerms } from './problem-terms';

/** A functional as plain data, so that it crosses a thread's border. */
export interface PlacedFunctional {
	readonly outputs: readonly (readonly number[])[];
	readonly terms: readonly ProblemTerm[];
}

/** Its canonical form without the representative: what tells where a functional belongs. */
export interface CanonicalPlace {
	readonly digest: string;
	readonly version: number;
	readonly numerical: boolean;
	/** False when the search was cut short: the digest is then that of an invariant. */
	readonly complete: boolean;
	/** f is equivalent to scale * canonical form + shift; coefficients as text. */
	readonly scale: string;
	readonly shift: string;
}

export function canonicalPlace({ outputs, terms }: PlacedFunctional): CanonicalPlace {
	const { digest, version, numerical, complete, scale, shift } = canonicalForm(
		functionalOfTerms(outputs, terms)
	);
	return { digest, version, numerical, complete, scale: scale.text, shift: shift.text };
}

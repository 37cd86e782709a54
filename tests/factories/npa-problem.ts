import type { Control, Level, ProblemOf } from '../../src/lib/nonlocality/problem';
import { familyFunctional, type FamilySpec } from '../../src/lib/nonlocality/scenario/families';
import type { Functional } from '../../src/lib/nonlocality/scenario/functional';
import { problemAbout } from './solver-problem';

/** An npa problem about a family member or a functional, with everything else at its default. */
export function npaProblem(
	subject: FamilySpec | Functional,
	level: Level,
	overrides: Partial<ProblemOf<'npa'>> = {}
): ProblemOf<'npa'> {
	const functional = 'terms' in subject ? subject : familyFunctional(subject);
	return {
		...problemAbout(functional),
		quantity: 'npa',
		level,
		nonNegative: false,
		...overrides
	};
}

/** A clock that stands still: nothing ever runs out. */
export const PATIENT: Control = { now: () => 0, shouldStop: () => false, report: () => {} };

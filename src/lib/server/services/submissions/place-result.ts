import { NotationError, NotationLimitError } from '../../../nonlocality/exact/notation-error';
import { looseForm } from '../../../nonlocality/scenario/equivalence';
import type { Functional } from '../../../nonlocality/scenario/functional';
import { functionalOfTerms, termsOfFunctional } from '../../../nonlocality/scenario/problem-terms';
import type { Problem } from '../../../nonlocality/problem';
import { outputCount } from '../../../nonlocality/scenario/scenario';
import { IDENTITY_TEXT, readMap, type AffineMap } from '../inequalities/affine';
import { mapBetween } from '../inequalities/canonical-subject';
import type { InequalityRecord } from '../inequalities/inequality-rows';
import { placeSubject } from '../inequalities/place-subject';

/** Why a certificate is not one of the claim's inequality; a sentence for its person. */
export class OtherInequality extends Error {}

/**
 * Events to compare a functional by, past which this takes long enough (half a second on a busy
 * machine) to hold up everybody's requests; more for a claim whose own inequality is as large.
 */
const MOST_WORK = 10_000;
const MOST_TIMES = 4;

/** How many terms it has with each output written out. */
const sizeOf = ({ scenario, terms }: Functional): number =>
	terms.reduce(
		(sum, { events }) =>
			sum + events.reduce((product, [p, x]) => product * outputCount(scenario, p, x), 1),
		0
	);

/**
 * The map from a problem's functional to the inequality's representative, when they are one
 * inequality: value of the representative = scale * value of the problem + shift.
 * @throws OtherInequality
 */
export async function placeResult(
	problem: Problem,
	inequality: InequalityRecord
): Promise<AffineMap> {
	const functional = functionalOfTerms({ outputs: problem.outputs }, problem.terms);
	const representative = functionalOfTerms({ outputs: inequality.outputs }, inequality.terms);
	const text = (f: typeof functional) => JSON.stringify([f.scenario.outputs, termsOfFunctional(f)]);
	if (text(functional) === text(representative)) return readMap(IDENTITY_TEXT);
	if (sizeOf(functional) > Math.max(MOST_WORK, MOST_TIMES * sizeOf(representative))) {
		throw new OtherInequality(
			'This certificate’s functional is far larger than the claim’s inequality. If it is the same, ' +
				'write its problem with the terms that the inequality’s own results have, and certify that.'
		);
	}
	// The search takes seconds for some functionals: it is made for those only that may be the claim's.
	const mayBe = looseForm(functional) === looseForm(representative);
	const place = mayBe ? await placeSubject(functional) : null;
	if (!place || place.version !== inequality.digestVersion || place.digest !== inequality.digest) {
		throw new OtherInequality(
			'This certificate is of another inequality than the claim: they are not the same up to ' +
				'relabelling, a positive factor and a constant.'
		);
	}
	// Irrational coefficients are compared by their digits, which proves nothing of an exact bound.
	const isRational = functional.terms.every(({ coefficient }) => coefficient.exact !== null);
	if (place.numerical || !isRational) {
		throw new OtherInequality(
			'This certificate’s functional has irrational coefficients, so that it can’t be proved to ' +
				'be the claim’s in another form. Write its problem with the terms that the ' +
				'inequality’s own results have, and certify that.'
		);
	}
	try {
		return readMap(mapBetween(place, inequality));
	} catch (error) {
		if (error instanceof NotationError || error instanceof NotationLimitError) {
			throw new OtherInequality(
				'The factor between this certificate’s functional and the claim’s is too long a number. ' +
					'Certify the inequality in a simpler normalisation.'
			);
		}
		throw error;
	}
}

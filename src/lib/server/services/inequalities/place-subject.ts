import type { Functional } from '../../../nonlocality/scenario/functional';
import { termsOfFunctional } from '../../../nonlocality/scenario/problem-terms';
import { ServiceError } from '../../errors';
import { solverPool } from '../../jobs/current-pool';
import { knownPlace, keepPlace, type CanonicalSubject } from './canonical-subject';

const RETRY_AFTER_SECONDS = 20;

/**
 * Where a functional belongs, worked out by a thread of its own: the search for a representative
 * may take seconds, and everybody's requests go through this one. Its work is bounded by the library
 * (past that bound the digest is that of an invariant), so that the same functional always gets the
 * same digest, however busy the machine is.
 * @throws ServiceError unavailable when there was no answer in time
 */
export async function placeSubject(functional: Functional): Promise<CanonicalSubject> {
	const known = knownPlace(functional);
	if (known) return known;
	const { outputs } = functional.scenario;
	const pool = await solverPool();
	try {
		return keepPlace(
			functional,
			await pool.place({ outputs, terms: termsOfFunctional(functional) })
		);
	} catch (error) {
		if (!(error instanceof Error) || !['AbortError', 'TimeoutError'].includes(error.name)) {
			throw error;
		}
		throw new ServiceError(
			'unavailable',
			'This inequality could not be compared with the known ones in time. Try again in a moment, or write it with fewer terms.',
			[],
			RETRY_AFTER_SECONDS
		);
	}
}

import type { DoneResult } from '../problem';

/**
 * What a solver found about the functional it maximises (the problem's own for `max`, its negative
 * for `min`; solve.ts turns the signs back). Certificates speak about that same functional.
 */
export type Outcome = Pick<
	DoneResult,
	| 'lower'
	| 'upper'
	| 'value'
	| 'tolerance'
	| 'optimum'
	| 'guaranteed'
	| 'exact'
	| 'method'
	| 'certificate'
>;

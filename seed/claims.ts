import { CHSH_CLAIMS } from './claims/chsh';
import { FAMILY_CLAIMS } from './claims/families';
import { THREE_SETTING_CLAIMS } from './claims/three-settings';
import { CLAIMS_WITHOUT_SOLVER } from './claims/without-solver';
import type { SeedClaim } from './claims/seed-claim';

/**
 * What the invented papers claim. The comments say what each is there to show; whether it agrees
 * is decided by running the solvers, never written down here.
 */
export const CLAIMS: readonly SeedClaim[] = [
	...CHSH_CLAIMS,
	...THREE_SETTING_CLAIMS,
	...FAMILY_CLAIMS,
	...CLAIMS_WITHOUT_SOLVER
];

import type { ClaimInput } from '../../src/lib/schemas/claim-input';
import type { PaperKey } from '../papers';
import type { Person } from '../people';

export interface SeedClaim {
	/** Names it among the seed's claims. */
	readonly key: string;
	readonly paper: PaperKey;
	readonly by: Person['key'];
	readonly input: Partial<ClaimInput> & Pick<ClaimInput, 'quantity' | 'printed' | 'locator'>;
	/** Done to it after it was entered, by the maintainer. */
	readonly then?: 'publish' | 'propose' | 'withdraw';
	/** Key of the claim that supersedes it. */
	readonly supersededBy?: string;
	/** Left for the running server, so that the demo shows a recomputation under way. */
	readonly leaveQueued?: boolean;
}

export const family = (name: string, parameter = '') =>
	({ subjectKind: 'family', family: name, familyParameter: parameter }) as const;
export const expression = (text: string, indexBase: ClaimInput['indexBase'] = 'read') =>
	({ subjectKind: 'expression', expression: text, indexBase }) as const;
export const described = (text: string) => ({ subjectKind: 'described', described: text }) as const;

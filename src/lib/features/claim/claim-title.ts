import type { SharedClaimView } from '../../schemas/views';

/** `Quantum maximum of CHSH`: a claim in plain words, for titles. */
export function claimTitle(claim: Pick<SharedClaimView, 'quantityLabel' | 'subject'>): string {
	return `${claim.quantityLabel} of ${claim.subject.text}`;
}

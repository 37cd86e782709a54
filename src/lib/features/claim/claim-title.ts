import type { PublicClaimView } from '../../schemas/views';

/** `Quantum maximum of CHSH`: a claim in plain words, for titles. */
export function claimTitle(claim: Pick<PublicClaimView, 'quantityLabel' | 'subject'>): string {
	return `${claim.quantityLabel} of ${claim.subject.text}`;
}

import type { ClaimState, VerdictStatus, Visibility } from './claim';

/** What a claim's publication depends on. */
export interface PublicationFacts {
	readonly state: ClaimState;
	readonly visibility: Visibility;
	readonly status: VerdictStatus;
	readonly version: number;
	/** The version that a second person found to be as in the paper; null: none. */
	readonly confirmedVersion: number | null;
}

type Confirmable = Pick<PublicationFacts, 'version' | 'confirmedVersion'>;

/** A second person found value, locator and inequality of this version to be as in the paper. */
export function isConfirmed({ version, confirmedVersion }: Confirmable): boolean {
	return confirmedVersion === version;
}

/** Whether everyone sees it: a discrepancy only once its transcription is confirmed. */
export function isPublic(facts: PublicationFacts): boolean {
	return (
		facts.visibility === 'public' &&
		facts.state !== 'withdrawn' &&
		(facts.status !== 'discrepancy' || isConfirmed(facts))
	);
}

/** Why a claim can't be published now, as a sentence; null when it can. */
export function whyNotPublishable(facts: Omit<PublicationFacts, 'visibility'>): string | null {
	if (facts.state === 'withdrawn') return 'This claim is withdrawn.';
	if (facts.status !== 'discrepancy' || isConfirmed(facts)) return null;
	return facts.confirmedVersion === null
		? 'A discrepancy is published only after a second person has compared value, locator and inequality with the paper and found them right. That has not happened yet.'
		: 'A discrepancy is published only after a second person has compared value, locator and inequality with the paper. The claim was edited since that was done, so it has to be compared again.';
}

/** What is said of a discrepancy in public, beside its sign. */
export const PUBLIC_DISCREPANCY = 'does not reproduce as entered';

/** How the public wording came about, without anybody's name. */
export const COMPARED_BY_SECOND =
	'Value, locator and inequality were compared with the paper by a second person of the group.';

import type { ClaimFacts } from '../../services/notifications/notification-facts';
import type { Figure } from '../mail-content';

const RELATION_SIGNS = { '=': '', '<=': '≤ ', '>=': '≥ ' } as const;

/** As printed, with the sign of a bound. */
const printedValue = ({ relation, printed }: ClaimFacts) => RELATION_SIGNS[relation] + printed;

/** Claimed and recomputed under one another; a bound carries what it is worth. */
export function comparedFigures(claim: ClaimFacts): readonly Figure[] {
	const figures: Figure[] = [{ label: 'Claimed', value: printedValue(claim), strong: true }];
	const found = claim.verdict.enclosure;
	if (!found) return figures;
	const worth = { guaranteed: 'guaranteed', numerical: 'numerical', person: 'a person’s' }[
		found.worth
	];
	if (found.exact !== null) {
		const how = found.worth === 'guaranteed' ? 'exact' : `exact, ${worth}`;
		return [...figures, { label: `Recomputed (${how})`, value: found.exact }];
	}
	if (found.upper !== null) figures.push({ label: `At most (${worth})`, value: found.upper });
	if (found.lower !== null) figures.push({ label: `At least (${worth})`, value: found.lower });
	return figures;
}

type Row = readonly [label: string, value: string];

/** Which claim: what, its value, and where it is printed. */
export function claimRows(claim: ClaimFacts | null): readonly Row[] {
	if (!claim) return [];
	const [what, ...where] = claimRowsWithoutValue(claim);
	return [...(what ? [what] : []), ['Printed value', printedValue(claim)], ...where];
}

/** For a mail that has the values as figures already. */
export function claimRowsWithoutValue(claim: ClaimFacts): readonly Row[] {
	return [
		[`Claim ${claim.number}`, claim.title],
		['Paper', paperOf(claim)]
	];
}

function paperOf({ reference, locator }: ClaimFacts): string {
	return [reference, locator].filter((part) => part !== '').join(', ');
}

export const claimName = (claim: ClaimFacts | null) =>
	claim ? `${claim.title}, claim ${claim.number}` : 'a claim';

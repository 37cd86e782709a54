import { RELATION_SIGNS } from '../../../ledger/claim';
import { readStatedValue } from '../../../ledger/stated-value';
import { NotationError, NotationLimitError } from '../../../nonlocality/exact/notation-error';
import type { ClaimNormalisationView } from '../../../schemas/normalisation-views';
import { printedHtml } from '../../math/printed-html';
import { quantityInfo } from '../recomputations/claim-problem';
import type { SelectedClaim } from '../claims/claim-rows';
import { mapSide, readMap, showFigure } from './affine';
import { isIdentity, mapBetween, type MapText } from './canonical-subject';
import type { NormalisationChoice } from './normalisations';

/** Key of the normalisation that a claim is entered in. */
const keyOf = (claimId: string) => `claim-${claimId}`;

/** An efficiency or a key rate is no value of the functional: no normalisation changes it. */
const isValueOfIt = ({ claim }: SelectedClaim) =>
	quantityInfo(claim.input.quantity).subject === 'functional';

const sourceOf = ({ claim, reference }: SelectedClaim) => `${reference.short}, ${claim.locator}`;

/**
 * The normalisations of claims that no choice so far has, one for each, called after the first claim
 * that is written in it.
 */
export function claimChoices(
	selected: readonly SelectedClaim[],
	known: readonly NormalisationChoice[]
): readonly NormalisationChoice[] {
	const choices: NormalisationChoice[] = [];
	for (const row of selected.filter(isValueOfIt)) {
		const { id, scale, shift } = row.claim;
		if ([...known, ...choices].some(({ map }) => isSame(map, { scale, shift }))) continue;
		choices.push({ key: keyOf(id), label: `As in ${sourceOf(row)}`, map: { scale, shift } });
	}
	return choices;
}

const isSame = (a: MapText, b: MapText) => a.scale === b.scale && a.shift === b.shift;

/** Each claim's map from what the page shows, and what it claims there. */
export function claimNormalisations(
	selected: readonly SelectedClaim[],
	choices: readonly NormalisationChoice[],
	chosen: NormalisationChoice
): readonly ClaimNormalisationView[] {
	return selected.filter(isValueOfIt).map((row) => {
		const { claim } = row;
		const { id, scale, shift, printed, relation } = claim;
		const own = choices.find(({ map }) => isSame(map, { scale, shift }));
		const there = mapOrNull(chosen.map, { scale, shift });
		return {
			claimId: id,
			key: own?.key ?? keyOf(id),
			source: sourceOf(row),
			quantityLabel: claim.quantityLabel,
			printed,
			printedHtml: printedHtml(printed),
			sign: RELATION_SIGNS[relation],
			map: there === null ? 'too long a number' : isIdentity(there) ? null : mapWords(there),
			here: claimedHere(row, chosen.map)
		};
	});
}

/** A map whose numbers are not too long to be written. */
function mapOrNull(from: MapText, to: MapText): MapText | null {
	try {
		return mapBetween(from, to);
	} catch (error) {
		if (error instanceof NotationError || error instanceof NotationLimitError) return null;
		throw error;
	}
}

/** The printed interval in another normalisation, its ends rounded outward. */
function claimedHere({ claim }: SelectedClaim, to: MapText): string | null {
	const { scale, shift, printed, reading, relation } = claim;
	const text = mapOrNull({ scale, shift }, to);
	if (!text) return null;
	const map = readMap(text);
	const { low, high } = readStatedValue(printed, reading);
	const lower = showFigure(mapSide(map, low, 'lower'), 'lower');
	const upper = showFigure(mapSide(map, high, 'upper'), 'upper');
	const value = lower === upper ? lower : `${lower} … ${upper}`;
	return `${RELATION_SIGNS[relation]} ${value}`;
}

/** `4 × it − 2`. */
export function mapWords({ scale, shift }: MapText): string {
	const factor = scale === '1' ? 'it' : `${scale} × it`;
	if (shift === '0') return factor;
	return shift.startsWith('-') ? `${factor} − ${shift.slice(1)}` : `${factor} + ${shift}`;
}

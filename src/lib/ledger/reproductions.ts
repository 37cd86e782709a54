import type { Relation } from './claim';
import { UNKNOWN, combine, intersect, isEmpty, type Evidence } from './enclosure';
import { showEnclosure, withMinusSign } from './figures';
import { readStatedValue } from './stated-value';

/** How a reproduction is called where names are not shown. */
export const UNNAMED_REPRODUCTION = 'a person’s reproduction';
const NAMED = 'a reproduction by ';

/** A method described at length is cut here: the label stands in the middle of sentences. */
const LONGEST_METHOD = 60;

export interface ReproductionMethod {
	readonly program: string;
	readonly programVersion: string;
	readonly method: string;
}

/** `a reproduction by Wren Aldous (own program 2.1)` */
export function reproductionLabel(name: string, how: ReproductionMethod): string {
	const program = [how.program, how.program ? how.programVersion : ''].filter(Boolean).join(' ');
	const text = (program || how.method).replace(/\s+/g, ' ').trim();
	const short = text.length > LONGEST_METHOD ? `${text.slice(0, LONGEST_METHOD).trim()}…` : text;
	return `${NAMED}${name}${short ? ` (${short})` : ''}`;
}

/** True for the label of a person's reproduction that names the person. */
export const isNamedReproduction = (label: string): boolean => label.startsWith(NAMED);

export const withoutName = (label: string): string =>
	isNamedReproduction(label) ? UNNAMED_REPRODUCTION : label;

export interface FoundValue {
	readonly printed: string;
	readonly relation: Relation;
}

/**
 * What a person's value says, in the claim's own normalisation: what its digits allow, on the sides
 * its relation speaks of.
 */
export function evidenceOfReproduction({ printed, relation }: FoundValue, label: string): Evidence {
	const { low, high } = readStatedValue(printed, 'as-printed');
	return {
		worth: 'person',
		lower: relation === '<=' ? null : low,
		upper: relation === '>=' ? null : high,
		lowerLabel: label,
		upperLabel: label
	};
}

/** An accepted reproduction, or one that was accepted before a certificate excluded it. */
export interface Reproduction {
	readonly submissionId: string;
	readonly taskNumber: number;
	readonly state: 'accepted' | 'contradicted';
	readonly evidence: Evidence;
}

const provedBy = (guaranteed: readonly Evidence[]) =>
	combine(
		UNKNOWN,
		guaranteed.filter(({ worth }) => worth === 'guaranteed')
	).enclosure;

/**
 * The reproductions a verdict hears. One that was contradicted says no more than that it is: it
 * settles nothing while what contradicts it is computed anew.
 */
export function heardReproductions(
	reproductions: readonly Reproduction[],
	evidence: readonly Evidence[]
): readonly Reproduction[] {
	const proved = provedBy(evidence);
	return reproductions.filter(
		({ state, evidence: found }) => state === 'accepted' || isEmpty(intersect(proved, found))
	);
}

/** Why a reproduction can't be right, with both numbers. */
export function contradictionText(found: FoundValue, evidence: readonly Evidence[]): string {
	const proved = provedBy(evidence);
	const { low, high, text } = readStatedValue(found.printed, 'as-printed');
	const above = proved.upper !== null && proved.upper.compare(low) < 0;
	const shown = showEnclosure(above ? null : proved.lower, above ? proved.upper : null);
	const relation = { '=': '', '<=': 'at most ', '>=': 'at least ' }[found.relation];
	const bound = above ? `at most ${shown.upper ?? ''}` : `at least ${shown.lower ?? ''}`;
	const label = above ? proved.upperLabel : proved.lowerLabel;
	const read = low.equals(high) ? '' : ` (${text.charAt(0).toLowerCase()}${text.slice(1)})`;
	return withMinusSign(
		`Contradicts the certificate: it says ${relation}${found.printed.trim()}${read}, but ${bound} is proved${label ? ` by ${label}` : ''}.`
	);
}

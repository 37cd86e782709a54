import { oneLine } from '../../../ledger/one-line';
import { quantityInfo } from '../recomputations/claim-problem';
import type { ClaimRow } from './find-claim';

export type KeyedClaim = Pick<ClaimRow, 'input' | 'inequalityId' | 'scale' | 'shift' | 'subject'>;

/**
 * What a claim is about: its subject, the quantity and that quantity's parameters, in the claim's
 * own normalisation. Evidence by people counts only while this stays the same; printed value,
 * relation, paper and notes are not part of it. The same functional written otherwise has one key.
 */
export function quantityKey({ input, inequalityId, scale, shift, subject }: KeyedClaim): string {
	const { parameters } = quantityInfo(input.quantity);
	const of = (parameter: (typeof parameters)[number], value: string | boolean) =>
		parameters.includes(parameter) ? value : null;
	return JSON.stringify([
		inequalityId === null ? ['in words', oneLine(subject)] : [inequalityId, scale, shift],
		input.quantity,
		of('sense', input.sense),
		of('level', oneLine(input.level).replaceAll(' ', '').toUpperCase()),
		of('nonNegative', input.nonNegative),
		of('dimension', oneLine(input.dimension))
	]);
}

/** Whether a key is of the same inequality: a certificate says of others of its quantities, too. */
export function isOfInequality(key: string, { inequalityId }: KeyedClaim): boolean {
	const parts: unknown = JSON.parse(key);
	const subject: unknown = Array.isArray(parts) ? parts[0] : null;
	return inequalityId !== null && Array.isArray(subject) && subject[0] === inequalityId;
}

/** The key of the same about an inequality's equivalent: another id, and its map to that. */
export function rekeyed(
	key: string,
	move: (map: { readonly scale: string; readonly shift: string }) => {
		readonly id: string;
		readonly scale: string;
		readonly shift: string;
	}
): string {
	const parts: unknown = JSON.parse(key);
	const subject: unknown = Array.isArray(parts) ? parts[0] : null;
	if (!Array.isArray(parts) || !Array.isArray(subject) || subject.length !== 3) return key;
	const { id, scale, shift } = move({ scale: String(subject[1]), shift: String(subject[2]) });
	return JSON.stringify([[id, scale, shift], ...(parts as unknown[]).slice(1)]);
}

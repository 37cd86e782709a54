import { toleranceFor } from './accepted-set';
import type { Relation, VerdictStatus } from './claim';
import type { Diagnosis, OtherValue } from './diagnosis';
import { complement, logarithmBase, percent, sign, slips } from './diagnosis-slips';
import { Trial } from './diagnosis-trial';
import {
	indexBase,
	otherNormalisations,
	otherQuantities,
	relationReversed,
	roundedInstead,
	solverTolerance,
	truncated
} from './diagnosis-values';
import type { ReasonCode } from './judgement';
import type { Normalisation } from './normalisations';
import type { Ends } from './printed-like';
import { readStatedValue, type StatedValue } from './stated-value';

export interface DiagnosisInput {
	readonly reading: StatedValue;
	readonly relation: Relation;
	/** Key of the claimed quantity (ledger/quantities). */
	readonly quantity: string;
	readonly status: VerdictStatus;
	/** Left out, an Open claim counts as consistent but not settled. */
	readonly reasonCode?: ReasonCode;
	/** What the verdict rests on, in the claim's normalisation. */
	readonly enclosure: Ends | null;
	readonly others: readonly OtherValue[];
	readonly normalisations: readonly Normalisation[];
	/** The value if the indices were read with the other base. */
	readonly indexBaseAlternative?: OtherValue | null;
}

/**
 * Ways in which a claim that disagrees (or is consistent, not settled) would agree, best first.
 * Each is tried by the claim's own accepted set; none is ever applied.
 */
export function diagnose(input: DiagnosisInput): Diagnosis[] {
	const { reading, relation, status, reasonCode, enclosure } = input;
	if (!enclosure || status === 'agreement') return [];
	const trial = new Trial(reading, relation, enclosure);
	if (status === 'open') {
		if (reasonCode !== undefined && reasonCode !== 'not-settled') return [];
		return [
			...otherQuantities(trial, input.others),
			...otherNormalisations(trial, input.normalisations)
		];
	}
	const firstFour = [
		...solverTolerance(trial),
		...otherQuantities(trial, input.others),
		...otherNormalisations(trial, input.normalisations)
	];
	return [
		...firstFour,
		...truncations(input, enclosure, firstFour),
		...percent(trial),
		...complement(trial),
		...sign(trial),
		...logarithmBase(trial, input.quantity),
		...indexBase(trial, input.indexBaseAlternative),
		...relationReversed(trial),
		...slips(trial)
	];
}

/**
 * Truncation alone, or with one of the first four; what holds without truncation is left out. Of a
 * value that was entered as truncated, whether it agrees as a rounded one.
 */
function truncations(
	input: DiagnosisInput,
	enclosure: Ends,
	without: readonly Diagnosis[]
): Diagnosis[] {
	const { reading, relation } = input;
	if (!reading.decimal || reading.decimal.uncertainty) return [];
	if (reading.choice === 'truncated') {
		const rounded = readStatedValue(reading.printed, 'rounded');
		return roundedInstead(new Trial(rounded, relation, enclosure));
	}
	if (reading.choice === 'exact') return [];
	const cut = withoutFarEnd(readStatedValue(reading.printed, 'truncated'));
	const trial = new Trial(cut, relation, enclosure, true);
	const together = [
		...(isNearer(cut, enclosure) ? solverTolerance(trial) : []),
		...otherQuantities(trial, input.others),
		...otherNormalisations(trial, input.normalisations)
	];
	return [
		...truncated(trial),
		...together.filter((found) => !without.some((before) => sameSuggestion(before, found)))
	];
}

/**
 * A truncated value without the end away from zero: 2 itself, known to rounding, is never cut off to
 * 1.9. The tolerance counts twice, as the accepted set gives it back once.
 */
function withoutFarEnd(reading: StatedValue): StatedValue {
	const margin = toleranceFor(reading, false).mul(2);
	return reading.value.s < 0n
		? { ...reading, low: reading.low.add(margin) }
		: { ...reading, high: reading.high.sub(margin) };
}

/** Whether what was computed lies nearer to 0 than the value: beyond its far end nothing is cut off. */
function isNearer({ value }: StatedValue, { lower, upper }: Ends): boolean {
	if (value.s < 0n) return lower !== null && lower.compare(value) > 0;
	return upper !== null && upper.compare(value) < 0;
}

function sameSuggestion(a: Diagnosis, b: Diagnosis): boolean {
	const key = ({ kind, name, quantity, fields }: Diagnosis) =>
		JSON.stringify([kind, name, quantity, fields]);
	return key(a) === key(b);
}

import type { Relation, VerdictStatus } from './claim';
import type { Diagnosis } from './diagnosis';
import { isExact, type Enclosure, type Evidence } from './enclosure';
import { showEnclosure } from './figures';
import { judge, type ReasonCode, type RecomputationState } from './judgement';
import { printRational } from '../nonlocality/exact/rational';
import { readingEnd } from './reading-text';
import { reasonFor, showAtLeast, slackOf } from './reasons';
import { isNamedReproduction, withoutName } from './reproductions';
import type { StatedValue } from './stated-value';

export type { Evidence } from './enclosure';
export { REASON_CODES, type ReasonCode, type RecomputationState } from './judgement';

/** A verdict as it is stored and shown. Numbers are decimal strings, bounds rounded outward. */
export interface Verdict {
	readonly status: VerdictStatus;
	readonly reasonCode: ReasonCode;
	/** A sentence for a person. */
	readonly reason: string;
	readonly reading: {
		readonly printed: string;
		/** Ends of the interval the printed value stands for, decimal strings (exact where finite). */
		readonly low: string;
		readonly high: string;
		readonly exact: boolean;
		/** `Read as 2.82835 to 2.82845`. */
		readonly text: string;
	};
	readonly enclosure: {
		readonly lower: string | null;
		readonly upper: string | null;
		/** The exact rational when both ends coincide. */
		readonly exact: string | null;
		readonly worth: Evidence['worth'];
		readonly lowerLabel: string;
		readonly upperLabel: string;
	} | null;
	/** By how much at least a true bound (`<=`, `>=`) is looser than what is known. */
	readonly slack?: string;
	/** The reason without people's names, where it has any: for public pages. */
	readonly publicReason?: string;
	/** Reproductions that what is proved excludes. */
	readonly contradicting?: readonly {
		readonly submissionId: string;
		readonly taskNumber: number;
		/** `a reproduction by Wren Aldous (own program 2.1)`. */
		readonly label: string;
	}[];
	readonly diagnosis: readonly Diagnosis[];
}

/** Digits a stored bound keeps past those an enclosure is shown with in a table. */
const STORED_EXTRA = 2;

export interface VerdictInput {
	readonly reading: StatedValue;
	readonly relation: Relation;
	readonly evidence: readonly Evidence[];
	readonly recomputation: RecomputationState;
	/** The quantity's label, for the sentence: `Quantum maximum`. */
	readonly quantity?: string;
}

/** The one function every verdict comes from: claim and evidence in, status and reason out. */
export function deriveVerdict(input: VerdictInput): Omit<Verdict, 'diagnosis'> {
	const judgement = judge(input);
	const { status, reasonCode, enclosure } = judgement;
	const verdict = {
		status,
		reasonCode,
		reason: reasonFor(judgement, input),
		reading: storeReading(input.reading),
		enclosure: enclosure && storeEnclosure(enclosure)
	};
	const slack = status === 'agreement' && enclosure ? slackOf(enclosure, input) : null;
	const unnamed = enclosure && withoutNames(enclosure);
	return {
		...verdict,
		...(slack ? { slack: showAtLeast(slack) } : {}),
		...(unnamed === enclosure
			? {}
			: { publicReason: reasonFor({ ...judgement, enclosure: unnamed }, input) })
	};
}

/** The same object where no label names a person. */
function withoutNames(enclosure: Enclosure): Enclosure {
	const { lowerLabel, upperLabel } = enclosure;
	if (![lowerLabel, upperLabel].some(isNamedReproduction)) return enclosure;
	return {
		...enclosure,
		lowerLabel: withoutName(lowerLabel),
		upperLabel: withoutName(upperLabel)
	};
}

function storeReading(reading: StatedValue): Verdict['reading'] {
	return {
		printed: reading.printed,
		low: readingEnd(reading.low, 'lower'),
		high: readingEnd(reading.high, 'upper'),
		exact: reading.exact,
		text: reading.text
	};
}

function storeEnclosure(enclosure: Enclosure): NonNullable<Verdict['enclosure']> {
	const { lower, upper, worth, lowerLabel, upperLabel } = enclosure;
	const shown = showEnclosure(lower, upper, STORED_EXTRA);
	return {
		lower: shown.lower,
		upper: shown.upper,
		exact: isExact(enclosure) && lower ? printRational(lower) : null,
		worth,
		lowerLabel,
		upperLabel
	};
}

/** Whether a verdict is worth a mail: a discrepancy that is more than a solver's last digits. */
export function mailWorthy(verdict: Pick<Verdict, 'status' | 'reasonCode' | 'diagnosis'>): boolean {
	return (
		verdict.status === 'discrepancy' &&
		verdict.reasonCode !== 'last-digits' &&
		verdict.diagnosis[0]?.kind !== 'solver-tolerance'
	);
}

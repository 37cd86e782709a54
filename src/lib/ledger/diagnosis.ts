import type { Rational } from '../nonlocality/exact/rational';

export { diagnose, type DiagnosisInput } from './diagnose';

export const DIAGNOSIS_KINDS = [
	'solver-tolerance',
	'other-quantity',
	'other-normalisation',
	'truncated',
	'percent',
	'complement',
	'sign',
	'logarithm-base',
	'index-base',
	'relation-reversed',
	'digits-swapped',
	'digit-missing',
	'digit-mistyped'
] as const;
export type DiagnosisKind = (typeof DIAGNOSIS_KINDS)[number];

/** A way in which the claim would agree: a suggestion with its arithmetic, never a correction. */
export interface Diagnosis {
	readonly kind: DiagnosisKind;
	/** The value that would agree, as it would be printed. */
	readonly value: string;
	/** The suggestion in words, arithmetic included. */
	readonly text: string;
	/** `other-quantity`: which, with its fields in the problem format. */
	readonly quantity?: string;
	readonly fields?: Readonly<Record<string, unknown>>;
	/** `other-normalisation`: value in the claim's normalisation = scale * value + shift. */
	readonly scale?: string;
	readonly shift?: string;
	readonly name?: string;
	/** Set when it holds only together with truncation. */
	readonly truncated?: boolean;
}

/** The value of another quantity of the same functional, in the claim's normalisation. */
export interface OtherValue {
	/** Completes "the paper meant ...": `the almost-quantum bound (NPA level 1+AB)`. */
	readonly label: string;
	/** The quantity and its fields in the problem format. */
	readonly quantity: string;
	readonly fields: Readonly<Record<string, unknown>>;
	readonly lower: Rational | null;
	readonly upper: Rational | null;
	/** It is what the method the paper states would give. */
	readonly matchesMethod: boolean;
}

import type { Rational } from '../nonlocality/exact/rational';
import type { VerdictStatus } from './claim';
import type { Diagnosis } from './diagnosis';

/** Where an enclosure comes from and what it is worth. */
export interface Evidence {
	/** `guaranteed`: proved by a checked certificate; the others decide only where those leave it open. */
	readonly worth: 'guaranteed' | 'numerical' | 'person';
	/** Ends as exact rationals, in the claim's own normalisation; null: unbounded. */
	readonly lower: Rational | null;
	readonly upper: Rational | null;
	/** What it is, for the reason: `NPA level 2`, `an explicit quantum strategy in dimension 2`. */
	readonly lowerLabel: string;
	readonly upperLabel: string;
}

/** Why a claim stands as it does; each has one sentence made by `deriveVerdict`. */
export const REASON_CODES = [
	'within',
	'proved',
	'above-upper-bound',
	'below-lower-bound',
	'last-digits',
	'not-run',
	'running',
	'failed',
	'no-solver',
	'not-settled',
	'contradictory'
] as const;
export type ReasonCode = (typeof REASON_CODES)[number];

/** The state of the recomputation behind a claim, when there is nothing to judge yet. */
export type RecomputationState =
	| { readonly kind: 'no-solver'; readonly why?: string }
	| { readonly kind: 'not-run' }
	| { readonly kind: 'running' }
	| { readonly kind: 'failed'; readonly why: string }
	| { readonly kind: 'done' };

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
	readonly diagnosis: readonly Diagnosis[];
}

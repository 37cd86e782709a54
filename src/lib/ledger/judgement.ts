import { ratio, type Rational } from '../nonlocality/exact/rational';
import { acceptedSet, fitOf, sizeOf, statedSet, type Fit, type ReadInterval } from './accepted-set';
import type { Relation, VerdictStatus } from './claim';
import {
	UNKNOWN,
	combine,
	isEmpty,
	isExact,
	isUnbounded,
	type Enclosure,
	type Evidence
} from './enclosure';

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

/** Why a claim stays Open for good: the usual `why` of `no-solver`. */
export const NO_SOLVER = 'no solver for this quantity';

/** The state of the recomputation behind a claim, when there is nothing to judge yet. */
export type RecomputationState =
	| { readonly kind: 'no-solver'; readonly why?: string }
	| { readonly kind: 'not-run' }
	| { readonly kind: 'running' }
	| { readonly kind: 'failed'; readonly why: string }
	| { readonly kind: 'done' };

/** Solvers usually stop within this of the optimum, relative above 1. */
export const SOLVER_TOLERANCE: Rational = ratio(1n, 10n ** 6n);

export interface JudgementInput {
	readonly reading: ReadInterval;
	readonly relation: Relation;
	readonly evidence: readonly Evidence[];
	readonly recomputation: RecomputationState;
}

/** The verdict in exact rationals; `deriveVerdict` puts it into words and decimals. */
export interface Judgement {
	readonly status: VerdictStatus;
	readonly reasonCode: ReasonCode;
	/** What decided, or the best that is known; null: nothing is. */
	readonly enclosure: Enclosure | null;
	/** Reproductions that exclude what the certificates prove. */
	readonly contradicting: readonly Evidence[];
	/** People's reproductions exclude each other, so that none of them counts. */
	readonly disputed: boolean;
}

/** How far the claim's own set lies from an enclosure it does not meet; null when they meet. */
export function distanceTo(
	reading: ReadInterval,
	relation: Relation,
	enclosure: Pick<Enclosure, 'lower' | 'upper'>
): Rational | null {
	const { low, high } = statedSet(reading, relation);
	const { lower, upper } = enclosure;
	if (low && upper && upper.compare(low) < 0) return low.sub(upper);
	if (high && lower && lower.compare(high) > 0) return lower.sub(high);
	return null;
}

export function withinSolverTolerance(reading: ReadInterval, distance: Rational): boolean {
	return distance.compare(SOLVER_TOLERANCE.mul(sizeOf(reading.value))) <= 0;
}

/**
 * Judges a claim. Guaranteed evidence is intersected first and decides alone whenever it settles
 * the claim; only where it leaves it open numerical evidence, then people's, decides.
 */
export function judge(input: JudgementInput): Judgement {
	const { reading, relation, evidence, recomputation } = input;
	const ofWorth = (worth: Evidence['worth']) => evidence.filter((e) => e.worth === worth);
	const people = ofWorth('person');
	const proved = combine(UNKNOWN, ofWorth('guaranteed'));
	if (proved.contradictory || proved.contradicting.length > 0)
		return {
			status: 'open',
			reasonCode: 'contradictory',
			enclosure: null,
			contradicting: [],
			disputed: false
		};

	const byPeople = combine(proved.enclosure, people);
	const { contradicting, contradictory: disputed } = byPeople;
	const stages = [proved, combine(proved.enclosure, ofWorth('numerical')), byPeople];
	for (const stage of stages) {
		if (stage.contradictory || isUnbounded(stage.enclosure)) continue;
		const settled = settle(reading, relation, stage.enclosure);
		if (settled) return { ...settled, enclosure: stage.enclosure, contradicting, disputed };
	}
	const best = stages.find((s) => !isEmpty(s.enclosure) && !isUnbounded(s.enclosure));
	return {
		status: 'open',
		reasonCode: recomputation.kind === 'done' ? 'not-settled' : recomputation.kind,
		enclosure: best?.enclosure ?? null,
		contradicting,
		disputed
	};
}

function settle(
	reading: ReadInterval,
	relation: Relation,
	enclosure: Enclosure
): Pick<Judgement, 'status' | 'reasonCode'> | null {
	const exact = isExact(enclosure);
	const fit = fitOf(acceptedSet(reading, relation, exact), enclosure);
	if (fit === 'undecided') return null;
	if (fit === 'inside')
		return { status: 'agreement', reasonCode: exact && reading.exact ? 'proved' : 'within' };
	return { status: 'discrepancy', reasonCode: discrepancyCode(reading, relation, enclosure, fit) };
}

function discrepancyCode(
	reading: ReadInterval,
	relation: Relation,
	enclosure: Enclosure,
	fit: Exclude<Fit, 'inside' | 'undecided'>
): ReasonCode {
	const distance = distanceTo(reading, relation, enclosure);
	if (distance && withinSolverTolerance(reading, distance)) return 'last-digits';
	return fit === 'above' ? 'above-upper-bound' : 'below-lower-bound';
}

import type { Rational } from '../nonlocality/exact/rational';

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

/** Where the quantity lies, and which evidence each end rests on. */
export type Enclosure = Evidence;

/** All the real numbers: what is known before anything was computed. */
export const UNKNOWN: Enclosure = {
	worth: 'guaranteed',
	lower: null,
	upper: null,
	lowerLabel: '',
	upperLabel: ''
};

export function isUnbounded(enclosure: Enclosure): boolean {
	return enclosure.lower === null && enclosure.upper === null;
}

/** One number, proved. */
export function isExact(enclosure: Enclosure): boolean {
	const { lower, upper, worth } = enclosure;
	return worth === 'guaranteed' && lower !== null && upper !== null && lower.equals(upper);
}

export function isEmpty({ lower, upper }: Enclosure): boolean {
	return lower !== null && upper !== null && lower.compare(upper) > 0;
}

const STRENGTH = { guaranteed: 0, numerical: 1, person: 2 } as const;

/**
 * The values both allow; possibly empty (see `isEmpty`). It is worth as much as the weakest
 * evidence one of its ends rests on.
 */
export function intersect(a: Enclosure, b: Enclosure): Enclosure {
	const lowerFromB = b.lower !== null && (a.lower === null || b.lower.compare(a.lower) > 0);
	const upperFromB = b.upper !== null && (a.upper === null || b.upper.compare(a.upper) < 0);
	const lowerOf = lowerFromB ? b : a;
	const upperOf = upperFromB ? b : a;
	const used = [lowerOf, upperOf].filter((side, i) => (i === 0 ? side.lower : side.upper) !== null);
	const worth = used.reduce<Evidence['worth']>(
		(weakest, { worth }) => (STRENGTH[worth] > STRENGTH[weakest] ? worth : weakest),
		'guaranteed'
	);
	return {
		worth,
		lower: lowerOf.lower,
		upper: upperOf.upper,
		lowerLabel: lowerOf.lowerLabel,
		upperLabel: upperOf.upperLabel
	};
}

export interface Combined {
	readonly enclosure: Enclosure;
	/** Evidence left out because it excludes what stronger evidence proves. */
	readonly contradicting: readonly Evidence[];
	/** True when the evidence of this worth contradicts itself. */
	readonly contradictory: boolean;
}

/** Intersects evidence of one worth with what stronger evidence has left. */
export function combine(base: Enclosure, evidence: readonly Evidence[]): Combined {
	const contradicting = evidence.filter((e) => isEmpty(intersect(base, e)));
	const kept = evidence.filter((e) => !contradicting.includes(e));
	const enclosure = kept.reduce(intersect, base);
	return { enclosure, contradicting, contradictory: isEmpty(enclosure) };
}

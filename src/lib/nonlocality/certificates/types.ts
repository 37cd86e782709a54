/** What a reader needs to check a result without trusting the solver. One kind per claim proved. */
import type { ComplexMatrix, ProblemTerm, QuantumStrategy } from '../problem';

/** A deterministic strategy `strategy[party][input] = output`; its exact value is recomputed. */
export interface DeterministicCertificate {
	readonly kind: 'deterministic-strategy';
	readonly strategy: readonly (readonly number[])[];
	/** Exact rational as a string, or null for irrational coefficients. */
	readonly value: string | null;
	/** How many strategies the enumeration covered (decimal string). */
	readonly enumerated: string;
	/** False when the budget ended before the enumeration: a lower side only. */
	readonly complete?: false;
}

/** The local maximum under linear constraints, form_k - value_k `=`, `<=` or `>=` 0. */
export interface LocalMixtureCertificate {
	readonly kind: 'local-mixture';
	/** Deterministic strategies with weights (fractions, sum 1) that together meet the constraints. */
	readonly mixture: readonly {
		readonly weight: string;
		readonly strategy: readonly (readonly number[])[];
	}[];
	/**
	 * A fraction m_k per constraint: >= 0 for `<=`, <= 0 for `>=`, of any sign for `=`. The upper side
	 * is the local maximum of g - sum_k m_k (form_k - value_k).
	 */
	readonly multipliers: readonly string[];
	/** The maximum as an exact rational, or null where the two sides do not meet exactly. */
	readonly value: string | null;
}

/**
 * The no-signalling linear programme: maximise g over P(a|x) >= 0. Entries are exact rationals,
 * keyed `"a,b|x,y"` (outputs and inputs of all parties, in order); those left out are 0.
 */
export interface LinearProgrammeCertificate {
	readonly kind: 'linear-programme';
	/** A no-signalling behaviour: proves g >= its value. */
	readonly primal: Readonly<Record<string, string>>;
	/**
	 * Multipliers m >= 0 of the rows P(a|x) >= 0, and of the problem's constraints as
	 * `constraint 0 >=` (form - value >= 0) or `constraint 0 <=` (value - form >= 0); P stands for
	 * any of these rows in what follows. In Collins-Gisin coordinates y (each a
	 * probability, in [0, 1]) let g + sum m P = U + sum_i r_i y_i; then g <= U + sum_i max(0, r_i).
	 */
	readonly dual: Readonly<Record<string, string>>;
	/** The maximum as an exact rational, or null where the two sides do not meet exactly. */
	readonly value: string | null;
}

/** A word per party, `[[inputs and outputs] per party]`: each letter is `[input, output]`. */
export type Monomial = readonly (readonly (readonly [input: number, output: number])[])[];

/** Dual multiplier of the moment-matrix relaxation, and the feasible moments below it. */
export interface MomentCertificate {
	readonly kind: 'npa-dual';
	readonly monomials: readonly Monomial[];
	/** Lower triangle, row by row, of the symmetric multiplier Z. */
	readonly multiplier: readonly number[];
	/**
	 * Multipliers z_j >= 0 of the rows P_j >= 0, by `"a,b|x,y"` (`-` for a party that a marginal
	 * leaves out); empty without those rows.
	 */
	readonly rowMultipliers: Readonly<Record<string, number>>;
	/**
	 * Multipliers of the problem's constraints, in their order: >= 0 for `<=` (written as
	 * value - form >= 0) and `>=` (form - value >= 0), any sign for `=` (form - value = 0).
	 */
	readonly constraintMultipliers?: readonly number[];
	/** lambda_min(Z) >= -shift (0 when left out); the bound contains size * shift. */
	readonly shift?: number;
	/** Guaranteed bound on the functional (upper for `max`). */
	readonly bound: number;
	/**
	 * Moments of a strictly feasible matrix, or null. Their order: the first appearance of each
	 * moment (a word or its adjoint, reduced, other than 0 and 1) along the lower triangle of
	 * monomial^dagger_row monomial_column, row by row.
	 */
	readonly moments: readonly number[] | null;
	readonly feasibleValue: number | null;
}

/** A whole number: as a number while it is safe (below 2^53 in size), else its decimal digits. */
export type WholeNumber = number | string;

/**
 * Dual multiplier in rationals: every multiplier is the given whole number over `denominator`, so
 * that the bound is a rational and its proof exact. Only for rational coefficients.
 */
export interface ExactMomentCertificate {
	readonly kind: 'npa-exact';
	readonly monomials: readonly Monomial[];
	/** N >= 1. */
	readonly denominator: WholeNumber;
	/** Lower triangle, row by row, of the symmetric M; Z = M / N. */
	readonly multiplier: readonly WholeNumber[];
	/** As in a MomentCertificate, times N. */
	readonly rowMultipliers: Readonly<Record<string, WholeNumber>>;
	readonly constraintMultipliers: readonly WholeNumber[];
	/** M + shift * 1 is positive semidefinite; the bound contains size * shift / N. */
	readonly shift: WholeNumber;
	/** Guaranteed bound on the functional (upper for `max`), an exact fraction. */
	readonly bound: string;
	/** As in a MomentCertificate: doubles. */
	readonly moments: readonly number[] | null;
	readonly feasibleValue: number | null;
}

/** A projective measurement: an orthonormal basis and the output that each vector belongs to. */
export interface OutputBasis {
	/** `vectors[k]` is the k-th basis vector. */
	readonly vectors: ComplexMatrix;
	readonly outputs: readonly number[];
}

/** An explicit state and measurements; `value` is what the re-evaluation guarantees. */
export interface StrategyCertificate {
	readonly kind: 'quantum-strategy';
	readonly strategy: QuantumStrategy;
	readonly projective: boolean;
	/** `bases[party][input]` of a projective strategy, null otherwise. */
	readonly bases: readonly (readonly OutputBasis[])[] | null;
	readonly value: number;
	/**
	 * Of a problem with constraints: no constraint is violated by more, rounding included. 0: all of
	 * them are inequalities that provably hold. Otherwise `value` is that of a strategy which meets
	 * the constraints within this distance only, and proves nothing on the problem itself.
	 */
	readonly violation?: number;
}

/** A lower and an upper side, each proved on its own. */
export interface EnclosureCertificate {
	readonly kind: 'enclosure';
	readonly lower: DeterministicCertificate | StrategyCertificate | null;
	readonly upper: MomentCertificate | ExactMomentCertificate | null;
	/** The relaxation the upper side belongs to, as a level of the problem format. */
	readonly upperLevel: unknown;
}

/**
 * Whether g <= maximum is a facet of the local polytope, that is, whether the deterministic
 * strategies that reach the maximum contain as many affinely independent ones as the polytope has
 * dimensions, prod_p (1 + sum_x (outputs - 1)) - 1.
 */
export interface FacetCertificate {
	readonly kind: 'facet';
	/** The local maximum, an exact rational. */
	readonly maximum: string;
	/** Affinely independent strategies that reach it, `[party][input]` = output. */
	readonly strategies: readonly (readonly (readonly number[])[])[];
	/**
	 * Not a facet: the terms of a functional that is 0 at every strategy that reaches the maximum and
	 * is no multiple of g - maximum. Null for a facet, and for a constant g.
	 */
	readonly vanishing: readonly ProblemTerm[] | null;
}

/**
 * Maximum over behaviours that are local across some bipartition of the parties. Tables are keyed
 * `"a,b|x,y"` by the outputs and inputs of a group's parties, in their order; entries left out are 0.
 */
export interface HybridCertificate {
	readonly kind: 'hybrid';
	/** The bipartition of the lower side. */
	readonly groups: readonly (readonly number[])[];
	/** A behaviour of each group: g at their product proves the lower side. */
	readonly behaviours: readonly Readonly<Record<string, string>>[];
	/**
	 * The upper side within the no-signalling model, one entry per bipartition; empty for
	 * Svetlichny's, where the check enumerates.
	 */
	readonly bipartitions: readonly HybridBipartition[];
	/** The maximum as an exact rational, or null where the two sides do not meet exactly. */
	readonly value: string | null;
}

/**
 * Upper side of one bipartition: for each vertex v of the no-signalling polytope of the listed
 * group, multipliers m >= 0 of the other group's rows P >= 0. With g_v = g at v, a functional of the
 * other group: g_v + sum m P = U + sum_i r_i y_i in Collins-Gisin coordinates, so that
 * g_v <= U + sum_i max(0, r_i).
 */
export interface HybridBipartition {
	readonly groups: readonly (readonly number[])[];
	/** 0 or 1: the group whose vertices are listed. */
	readonly listed: number;
	readonly branches: readonly {
		readonly vertex: Readonly<Record<string, string>>;
		readonly multipliers: Readonly<Record<string, string>>;
	}[];
}

export type Certificate =
	| DeterministicCertificate
	| LinearProgrammeCertificate
	| MomentCertificate
	| ExactMomentCertificate
	| StrategyCertificate
	| EnclosureCertificate
	| LocalMixtureCertificate
	| HybridCertificate
	| FacetCertificate;

/** The outcome of an independent check. */
export type CheckOutcome =
	| {
			readonly checked: true;
			/** Sides proved by the check itself, doubles rounded outward. */
			readonly lower: number | null;
			readonly upper: number | null;
			readonly exact: string | null;
			/** The proved bound as a fraction (of `upper`; for `min` of `lower`) where it is rational. */
			readonly exactBound?: string;
			readonly method: string;
	  }
	| { readonly checked: false; readonly reason: string };

/**
 * A normalised problem and its result, as JSON: what a recomputation stores, a solver thread
 * receives and the command line prints. Subjects given as families, expressions or tables are
 * already expanded to `terms` here (schemas/problem.ts does that).
 */
import type { Certificate } from './certificates/types';

export const FORMAT = 1;

/** `[coefficient, events]`; the coefficient is an integer, decimal, fraction or expression. */
export type ProblemTerm = readonly [
	coefficient: string,
	events: readonly (readonly [party: number, input: number, output: number])[]
];

export interface ProblemConstraint {
	readonly terms: readonly ProblemTerm[];
	readonly relation: '=' | '<=' | '>=';
	/** A coefficient. */
	readonly value: string;
}

/** A behaviour: `"a,b|x,y"` to a coefficient, or a quantum strategy. */
export type ProblemBox =
	| { readonly kind: 'table'; readonly probabilities: Readonly<Record<string, string>> }
	| { readonly kind: 'quantum'; readonly strategy: QuantumStrategy };

/** A complex number as `[re, im]`. */
export type ComplexNumber = readonly [re: number, im: number];
/** `matrix[row][column]`. */
export type ComplexMatrix = readonly (readonly ComplexNumber[])[];

/**
 * A pure state and measurements. `state` is a vector on the tensor product of the local spaces,
 * party 0 most significant; `measurements[party][input][output]` is a `d x d` matrix.
 */
export interface QuantumStrategy {
	readonly dimensions: readonly number[];
	readonly state: readonly ComplexNumber[];
	readonly measurements: readonly (readonly (readonly ComplexMatrix[])[])[];
}

/** 1, 2, 3 ...; `1+AB` (two parties); all products of at most k per party; or a list of products. */
export type Level =
	number | '1+AB' | { readonly perParty: number } | { readonly products: readonly string[] };

/** What parties of one group may share: anything (also signalling), or no-signalling behaviours. */
export type HybridModel = 'svetlichny' | 'no-signalling';

interface ProblemSubject {
	readonly format: 1;
	readonly outputs: readonly (readonly number[])[];
	readonly terms: readonly ProblemTerm[];
	readonly sense: 'max' | 'min';
	readonly constraints: readonly ProblemConstraint[];
	/** Budget of computing time. */
	readonly seconds: number;
	readonly seed: number;
}

export type Problem = ProblemSubject &
	(
		| { readonly quantity: 'value'; readonly box: ProblemBox }
		| { readonly quantity: 'local' }
		| { readonly quantity: 'no-signalling' }
		| { readonly quantity: 'hybrid'; readonly model: HybridModel }
		| { readonly quantity: 'facet' }
		| { readonly quantity: 'npa'; readonly level: Level; readonly nonNegative: boolean }
		| {
				readonly quantity: 'see-saw';
				readonly dimension: readonly number[];
				readonly starts: number;
				readonly state: 'free' | 'maximally-entangled' | readonly ComplexNumber[];
				/** Largest local dimension to grow to. */
				readonly grow?: number;
				/** Where the search begins. */
				readonly start?: QuantumStrategy;
		  }
		| {
				readonly quantity: 'quantum';
				readonly levels: readonly Level[] | null;
				readonly dimensions: readonly number[] | null;
				readonly gap: number;
				/** [low, high]: both sides within it are close enough, however wide they are. */
				readonly within?: readonly [low: number, high: number];
				/** Where the search for strategies begins. */
				readonly start?: QuantumStrategy;
		  }
	);

export type QuantityOfProblem = Problem['quantity'];
export type ProblemOf<Q extends QuantityOfProblem> = Extract<Problem, { quantity: Q }>;

export type ResultStatus = 'done' | 'infeasible' | 'limit' | 'cancelled' | 'failed';

interface ResultCommon {
	readonly format: 1;
	readonly quantity: QuantityOfProblem;
	/** What was run: level, size, moments, iterations, starts, residuals, tolerances. */
	readonly method: Readonly<Record<string, unknown>>;
	readonly seconds: number;
	readonly seed: number;
	/** Name and version, `merestone 0.2.0`. */
	readonly solver: string;
	readonly problem: Problem;
}

/** A side that is not known is null. Doubles are rounded outward; exact rationals are strings. */
export interface DoneResult extends ResultCommon {
	readonly status: 'done';
	readonly lower: number | null;
	readonly upper: number | null;
	readonly value: number | null;
	/** Absolute tolerance of `value` where it is neither exact nor enclosed. */
	readonly tolerance: number | null;
	readonly optimum: number | null;
	readonly guaranteed: { readonly lower: boolean; readonly upper: boolean };
	readonly exact: string | null;
	readonly certificate: Certificate | null;
}

export interface UnfinishedResult extends ResultCommon {
	readonly status: Exclude<ResultStatus, 'done'>;
	/** A sentence for a person; for `limit` it names the limit and the figure. */
	readonly reason: string;
}

export type Result = DoneResult | UnfinishedResult;

/** What a solver gets from its surroundings; a pure library has neither a clock nor a thread. */
export interface Control {
	/** Milliseconds, monotonic. */
	now(): number;
	/** Polled at least every 100 ms of work. */
	shouldStop(): boolean;
	report(progress: Progress): void;
}

export interface Progress {
	/** A few words: `NPA level 2`, `see-saw, dimension 2`. */
	readonly stage: string;
	readonly iteration: number;
	/** 0 to 1, or null when it can't be told. */
	readonly fraction: number | null;
	readonly lower: number | null;
	readonly upper: number | null;
}

/** Ends a solver from within: `limit` before any work past the limits, `cancelled` when told to. */
export class SolverStop extends Error {
	constructor(
		readonly status: Exclude<ResultStatus, 'done'>,
		message: string
	) {
		super(message);
		this.name = 'SolverStop';
	}
}

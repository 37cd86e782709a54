/** A primal point y with Gamma(y) > 0 and a multiplier; arrays are the solver's own, copy to keep. */
export interface Iterate {
	readonly iteration: number;
	/** y[0] = 1. */
	readonly moments: Float64Array;
	/** X > 0, symmetric row-major. */
	readonly multiplier: Float64Array;
	/** z >= 0, one per row. */
	readonly rowMultipliers: Float64Array;
	/** Free, one per equality. */
	readonly equalityMultipliers: Float64Array;
	/** Objective at y, and the value the multiplier would prove were it exactly feasible. */
	readonly primal: number;
	readonly dual: number;
	/** Largest |c_i + <F_i, X> + ...|. */
	readonly residual: number;
}

export interface SolverHooks {
	/** Called at least every few milliseconds of work; stops the solver by throwing. */
	poll(): void;
	/** Sees every iterate; true ends the iteration. */
	visit(iterate: Iterate): boolean;
}

export type Ending = 'converged' | 'accepted' | 'stalled' | 'iterations';

export interface SolverOptions {
	/** Relative gap and residual at which the iteration ends by itself. */
	readonly tolerance: number;
	readonly mostIterations: number;
}

export interface SolverEnd {
	readonly ending: Ending;
	readonly iterations: number;
}

/** What the loop asks of an interior-point method. */
export interface InteriorPointMethod {
	/** Goes to the start; false when that is not in the interior. */
	begin(): boolean;
	measure(iteration: number): Iterate;
	/** One iteration; false when rounding lets it get no further. */
	advance(): boolean;
}

/** Iterates until the method converges or stalls, the visitor is content or the limit is reached. */
export function runInteriorPoint(
	method: InteriorPointMethod,
	hooks: SolverHooks,
	{ tolerance, mostIterations }: SolverOptions
): SolverEnd {
	if (!method.begin()) return { ending: 'stalled', iterations: 0 };
	for (let iteration = 0; ; iteration++) {
		hooks.poll();
		const iterate = method.measure(iteration);
		const { primal, dual, residual } = iterate;
		if (hooks.visit(iterate)) return { ending: 'accepted', iterations: iteration };
		const gap = Math.abs(dual - primal);
		if (gap <= tolerance * (1 + Math.abs(primal)) && residual <= tolerance)
			return { ending: 'converged', iterations: iteration };
		if (iteration === mostIterations) return { ending: 'iterations', iterations: iteration };
		if (!method.advance()) return { ending: 'stalled', iterations: iteration };
	}
}

/** Smallest centring: below it the corrector's second-order terms are noise. */
const LEAST_CENTRING = 1e-6;

/**
 * Mehrotra's choice: little centring when the predictor gets far by itself.
 * @param ratio complementarity after the predictor's steps, relative to what it is
 * @param step the shorter of the two steps, at most 1
 */
export function mehrotraCentring(ratio: number, step: number): number {
	const power = Math.max(1, 3 * step ** 2);
	return Math.min(1, Math.max(LEAST_CENTRING, Math.max(0, ratio) ** power));
}

/** Below this step in both variables rounding has won. */
export const SMALLEST_STEP = 1e-6;
const BACKTRACK = 0.8;

/** Shortens a step until `attempt` verifies it; 0 when it becomes too small. */
export function backtrack(wanted: number, attempt: (step: number) => boolean): number {
	for (let step = wanted; step > SMALLEST_STEP; step *= BACKTRACK) if (attempt(step)) return step;
	return 0;
}

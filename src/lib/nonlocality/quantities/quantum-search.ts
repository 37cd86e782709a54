import type { StrategyCertificate } from '../certificates/types';
import { SolverStop, type Control, type ProblemOf } from '../problem';
import type { Functional } from '../scenario/functional';
import { dimensionsToTry } from './quantum-plan';
import { partyDimensions } from './see-saw-dimensions';
import { StrategyGrowth } from './see-saw-growth';
import { searchStrategies } from './strategy-search';

/** Starts of the first visit to a dimension; later visits double it. */
const FIRST_STARTS = 6;
/** Growing begins when each small dimension had this many starts. */
const STARTS_BEFORE_GROWTH = 20;
/** A dimension visited with this many starts in all has shown what random starts can reach. */
const MOST_STARTS = 400;
/** Keeps dimensions in turn where a start takes less than the clock's resolution (s). */
const LEAST_START_SECONDS = 0.001;

interface Visit {
	readonly dimension: number;
	starts: number;
	batch: number;
	seconds: number;
	lower: number | null;
}

/** The sides known at present; `raise` takes a better lower one. */
export interface KnownSides {
	readonly lower: number | null;
	readonly upper: number | null;
	readonly width: number;
	raise(lower: number, certificate: StrategyCertificate): boolean;
}

/** The lower side by explicit strategies: see-saw in each dimension in turn, then growing ones. */
export class StrategyEscalation {
	readonly #problem: ProblemOf<'quantum'>;
	readonly #g: Functional;
	readonly #known: KnownSides;
	readonly #control: Control;
	readonly #visits: Visit[];
	readonly #growth: StrategyGrowth | null;

	constructor(problem: ProblemOf<'quantum'>, g: Functional, known: KnownSides, control: Control) {
		this.#problem = problem;
		this.#g = g;
		this.#known = known;
		this.#control = control;
		this.#growth =
			problem.dimensions === null
				? new StrategyGrowth(g, { seed: problem.seed, largest: null })
				: null;
		this.#visits = dimensionsToTry(problem).map((dimension) => ({
			dimension,
			starts: 0,
			batch: FIRST_STARTS,
			seconds: 0,
			lower: null
		}));
	}

	/** One batch of starts in the most promising dimension. */
	begin(seconds: number): void {
		const first = this.#visits[0];
		if (first) this.#visit(first, seconds);
	}

	/** See-saw for some seconds, least visited dimension first; false when none is left to visit. */
	search(seconds: number, mostStarts = MOST_STARTS): boolean {
		const end = this.#control.now() + 1000 * seconds;
		const spent = (visit: Visit) => visit.seconds + LEAST_START_SECONDS * visit.starts;
		for (;;) {
			const [next] = this.#visits
				.filter((visit) => visit.starts < mostStarts)
				.sort((a, b) => spent(a) - spent(b));
			if (!next) return false;
			const left = (end - this.#control.now()) / 1000;
			if (left <= 0 || this.#closed) return true;
			this.#visit(next, left);
		}
	}

	/** All the time that is left; false when nothing is left to try before it is over. */
	searchToTheEnd(seconds: number): boolean {
		if (!this.#growth) return this.search(seconds);
		const end = this.#control.now() + 1000 * seconds;
		this.search(seconds / 2, STARTS_BEFORE_GROWTH);
		const left = (end - this.#control.now()) / 1000;
		if (left > 0 && !this.#closed) {
			const { lower, upper } = this.#known;
			const enough = (upper ?? Infinity) - this.#problem.gap / 2;
			const found = this.#growth.run(left, lower ?? -Infinity, this.#control, enough);
			if (found) this.#known.raise(found.value, found);
		}
		return true;
	}

	/** What was tried, for the result's `method`. */
	summary(): Record<string, unknown> {
		const growth = this.#growth;
		return {
			...(growth?.dimensions && { grown: { dimensions: growth.dimensions, tries: growth.tries } }),
			dimensions: this.#visits
				.filter(({ starts }) => starts > 0)
				.map(({ dimension, starts, seconds, lower }) => ({ dimension, starts, seconds, lower }))
		};
	}

	get #closed(): boolean {
		return this.#known.width <= this.#problem.gap;
	}

	#visit(visit: Visit, seconds: number): void {
		const start = this.#control.now();
		const search = {
			dimensions: partyDimensions([visit.dimension], this.#problem.outputs.length),
			starts: visit.batch,
			firstStart: visit.starts,
			seed: this.#problem.seed,
			seconds,
			state: 'free',
			target: this.#known.upper,
			known: this.#known.lower
		} as const;
		try {
			const found = searchStrategies(this.#g, search, this.#control);
			visit.starts += found?.startsDone ?? visit.batch;
			visit.batch *= 2;
			if (found) {
				const { certificate } = found;
				visit.lower = Math.max(visit.lower ?? -Infinity, certificate.value);
				this.#known.raise(certificate.value, certificate);
			}
		} catch (error) {
			if (!(error instanceof SolverStop) || error.status !== 'limit') throw error;
			visit.starts = MOST_STARTS; // too large: not to be visited again
		}
		visit.seconds += (this.#control.now() - start) / 1000;
	}
}

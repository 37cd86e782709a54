import { seededRandom } from '../linalg/seeded-random';
import type { Functional } from '../scenario/functional';
import { climbChain } from './chain-climb';
import {
	chainFunctional,
	expandChain,
	randomChain,
	type ChainFunctional,
	type ChainStrategy
} from './chain-strategy';
import { expectBudgetSpent } from './search-budget';
import type { SeeSawStrategy } from './see-saw-strategy';

/** Patterns are tried in this local dimension: long enough to tell them apart, and quick. */
const EXPLORED_DIMENSION = 16;
/** Starts without a pattern worth growing after which none is expected. */
const MOST_EXPLORED = 1500;
/** Starts in the largest dimension without a better value after which the pattern is spent. */
const MOST_FRUITLESS = 60;
/** One start in so many still tries another pattern. */
const EXPLORE_EVERY = 4;
/** Gain of 50 iterations, as a share of the scale, at which a climb ends. */
const CONVERGED = 1e-12;
/** A start is worth growing once it exceeds what is known by this share of the scale. */
const WORTHWHILE = 1e-6;
/** A pattern is one bit an input of a 32-bit integer. */
const MOST_INPUTS = 30;
/** Streams of the seed that the searches in fixed dimensions will not reach. */
const FIRST_STREAM = 2_000_000;

/**
 * Strategies in chain form: random patterns of blocks in a moderate dimension, the best pattern then
 * at once in the largest. On I3322 it passes 0.25085 in dimension 34 within a second, where
 * strategies grown by a few random dimensions at a time take a minute.
 */
export class ChainSearch {
	readonly #functional: ChainFunctional;
	readonly #largest: number;
	readonly #seed: number;
	readonly #inputs: number;
	readonly #scale: number;
	#starts = 0;
	#fruitless = 0;
	#pattern: number | null = null;
	#patternValue = -Infinity;
	#best: ChainStrategy | null = null;
	#value = -Infinity;

	private constructor(functional: ChainFunctional, seed: number, largest: number) {
		this.#functional = functional;
		this.#largest = largest;
		this.#seed = seed;
		this.#inputs = functional.outputs.flat().length;
		const { joint, marginals } = functional;
		this.#scale = Math.max(...[...joint, ...marginals[0], ...marginals[1]].map(Math.abs)) || 1;
	}

	/** Null where chain form does not apply: other than two parties or two outputs. */
	static of(g: Functional, seed: number, largest: number): ChainSearch | null {
		const functional = chainFunctional(g);
		if (!functional || functional.outputs.flat().length > MOST_INPUTS || largest < 3) return null;
		return new ChainSearch(functional, seed, largest);
	}

	get starts(): number {
		return this.#starts;
	}

	/** The value of the best strategy, as computed. */
	get value(): number {
		return this.#value;
	}

	get spent(): boolean {
		return this.#pattern === null
			? this.#starts >= MOST_EXPLORED
			: this.#fruitless >= MOST_FRUITLESS;
	}

	/** One start. @param known a value to exceed. @throws BudgetSpent, SolverStop from `poll` */
	next(known: number, poll: () => void): void {
		const random = seededRandom(this.#seed, FIRST_STREAM + this.#starts++);
		const explores = this.#pattern === null || this.#starts % EXPLORE_EVERY === 0;
		const pattern = explores ? random.integer(2 ** this.#inputs) : (this.#pattern ?? 0);
		const dimension = explores ? Math.min(EXPLORED_DIMENSION, this.#largest) : this.#largest;
		const chain = randomChain(this.#functional, dimension, pattern, random);
		const aim = known + WORTHWHILE * this.#scale;
		const best = Math.max(aim, explores ? this.#patternValue : this.#value);
		const options = { best, tolerance: CONVERGED * this.#scale, poll };
		let value = -Infinity;
		let stop: unknown = null;
		try {
			value = climbChain(this.#functional, chain, options);
		} catch (error) {
			expectBudgetSpent(error);
			stop = error;
		}
		if (explores && value > best) {
			this.#fruitless = 0;
			this.#pattern = pattern;
			this.#patternValue = value;
		} else if (!explores) this.#fruitless++;
		if (value > Math.max(this.#value, aim)) {
			// what differs by less than the scale's millionth is the same optimum again
			if (value > this.#value + 1e-3 * WORTHWHILE * this.#scale) this.#fruitless = 0;
			this.#best = chain;
			this.#value = value;
		}
		if (stop) throw stop;
	}

	/** The best strategy as matrices; null before one was worth growing. */
	strategy(): SeeSawStrategy | null {
		return this.#best && expandChain(this.#functional, this.#best, seededRandom(this.#seed));
	}
}
